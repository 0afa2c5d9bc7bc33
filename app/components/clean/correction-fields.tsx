import type { SubmissionResult } from '@conform-to/react';
import { Button } from '~/components/button';
import { Checkbox } from '~/components/checkbox';
import { outsideCauseWords } from '~/components/log/words';
import { RadioRows } from '~/components/radio-rows';
import { SelectField } from '~/components/select-field';
import { TextField } from '~/components/text-field';
import { formatCount, formatNoun } from '~/format/number';
import { outsideCauses } from '~/models/failure';
import { mostCorrected } from '~/models/record-correction';

interface CorrectionFieldsProps {
  modes: readonly { id: string; name: string }[];
  /** How many failures match the filter. */
  total: number;
  /** What was chosen before, as "id:version", and is not among the rows shown. */
  elsewhere: readonly string[];
  itemPlural: string;
  refused: SubmissionResult<string[]> | null;
}

/** What to correct on the failures ticked above, and the button that shows what it would do. */
export function CorrectionFields({ modes, total, elsewhere, itemPlural, refused }: CorrectionFieldsProps) {
  const typed = (name: string) => {
    const value = refused?.initialValue?.[name];
    return typeof value === 'string' ? value : undefined;
  };
  const errorsOf = (name: string) => refused?.error?.[name] ?? undefined;
  return (
    <section aria-labelledby="correct" className="mt-6 max-w-[46rem]">
      <h2 id="correct" className="scroll-mt-20">
        Correct them
      </h2>
      <Checkbox
        name="all"
        label={`All ${formatNoun(total, 'failure')} that match, not only the ticked ones`}
        hint={`At most ${formatCount(mostCorrected)} in one go.`}
        defaultChecked={typed('all') === 'on'}
        errors={errorsOf('record')}
      />
      {elsewhere.length > 0 && (
        <Checkbox
          name="also"
          value={elsewhere.join(',')}
          label={`And ${formatNoun(elsewhere.length, 'failure')} chosen before, not on this page of the list`}
          defaultChecked
        />
      )}
      <RadioRows
        name="what"
        label="What is to be put right"
        defaultValue={typed('what')}
        errors={errorsOf('what')}
        rows={[
          { value: 'void', label: 'They should not count (void)' },
          { value: 'restore', label: 'They should count after all (put back)' },
          { value: 'mode', label: 'What failed (mode)' },
          { value: 'outside-cause', label: 'Something outside did it, or did not' },
          { value: 'effect', label: 'Renewed or patched' },
          { value: 'date', label: 'The day' },
          { value: 'fitted', label: 'When the failed item had been fitted' },
        ]}
      />
      <p className="text-grey text-[0.9rem]">Fill in only what belongs to your choice.</p>
      <div className="grid gap-x-5 sm:grid-cols-2">
        <TextField
          name="reason"
          label="To void: why they should not count"
          defaultValue={typed('reason')}
          errors={errorsOf('reason')}
          maxLength={300}
        />
        <SelectField
          name="modeId"
          label="Mode"
          defaultValue={typed('modeId') ?? ''}
          emptyLabel="none"
          options={modes.map(({ id, name }) => ({ value: id, label: name }))}
          errors={errorsOf('modeId')}
        />
        <SelectField
          name="cause"
          label="Outside cause"
          hint={`What something outside did does not count against the ${itemPlural}.`}
          defaultValue={typed('cause') ?? ''}
          emptyLabel="none"
          options={outsideCauses.map((cause) => ({ value: cause, label: outsideCauseWords[cause] }))}
          errors={errorsOf('cause')}
        />
        <SelectField
          name="effect"
          label="What was done"
          defaultValue={typed('effect') ?? ''}
          emptyLabel="choose"
          options={[
            { value: 'renewed', label: 'renewed: a new one is in place' },
            { value: 'patched', label: 'patched: the same one goes on' },
          ]}
          errors={errorsOf('effect')}
        />
        <TextField
          type="date"
          name="failedOn"
          label="The day they failed"
          defaultValue={typed('failedOn')}
          errors={errorsOf('failedOn')}
        />
        <TextField
          type="date"
          name="fittedOn"
          label="The day the failed item was fitted"
          hint="Empty for not known."
          defaultValue={typed('fittedOn')}
          errors={errorsOf('fittedOn')}
        />
      </div>
      <Button name="intent" value="preview">
        See what it does
      </Button>
    </section>
  );
}
