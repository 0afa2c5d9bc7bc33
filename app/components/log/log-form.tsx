import { getFormProps, type SubmissionResult, useForm } from '@conform-to/react';
import { useState } from 'react';
import { Form, useNavigation } from 'react-router';
import { outsideCauses } from '~/models/failure';

import { ActionBar } from '../action-bar';
import { Button } from '../button';
import { Disclosure } from '../disclosure';
import { ErrorSummary } from '../error-summary';
import { RadioRows } from '../radio-rows';
import { TextAreaField, TextField } from '../text-field';
import { ChoicePair } from './choice-pair';
import type { FittedQuestion } from './fitted-question';
import { type PerhapsSameFailure, PerhapsSame, perhapsSameSentence } from './perhaps-same';
import { effectWords, outsideCauseWords } from './words';

interface LogFormProps {
  /** Number of the entry this form makes, kept for as long as the form is. */
  newId: string;
  lastResult: SubmissionResult<string[]> | undefined;
  perhapsSame: readonly PerhapsSameFailure[];
  modes: readonly { id: string; name: string; failures: number }[];
  question: FittedQuestion;
  today: string;
  timeZone: string;
}

/** Fields of the form, in the order a person comes to them. */
const fieldOrder = [
  'mode',
  'otherText',
  'effect',
  'when',
  'failedOn',
  'failedTime',
  'fitted',
  'fittedOn',
  'outsideCause',
  'note',
];

/** The form of one failure: what failed, what was done, when, how old it was. */
export function LogForm(props: LogFormProps) {
  const { lastResult, perhapsSame, modes, question, today, timeZone } = props;
  const sent = textsOf(lastResult?.initialValue);
  const [id] = useState(sent.id ?? props.newId);
  const [shown] = useState(sent.fittedShown ?? question.on);
  const [form] = useForm({ id: 'log-failure', lastResult });
  const saving = useNavigation().state !== 'idle';
  const errors = lastResult?.error ?? {};
  const errorsOf = (name: string) => errors[name] ?? undefined;
  const perhaps = perhapsSame.length > 0;

  return (
    <Form method="post" {...getFormProps(form)} className="mt-2">
      <ErrorSummary errors={summaryOf(errors)} />
      {perhaps && <PerhapsSame failures={perhapsSame} timeZone={timeZone} />}
      <input type="hidden" name="id" value={id} />
      <input type="hidden" name="fittedShown" value={shown} />
      <input type="hidden" name="seen" value={perhapsSame.map((failure) => failure.id).join(',')} />

      <div className="group/mode">
        <RadioRows
          name="mode"
          label="What failed?"
          errors={errorsOf('mode')}
          defaultValue={sent.mode}
          rows={[
            ...modes.map((mode, index) => ({
              value: mode.id,
              label: mode.name,
              aside:
                mode.failures === 0 ? undefined : <TimesBefore times={mode.failures} inFull={index === 0} />,
            })),
            { value: 'other', label: 'Something else' },
          ]}
        />
        <div className="hidden group-has-[[value=other]:checked]/mode:block">
          <TextField
            name="otherText"
            label="What was it, in a few words?"
            hint="It is kept in the note; your lead can make it a choice of its own."
            errors={errorsOf('otherText')}
            defaultValue={sent.otherText}
            maxLength={200}
          />
        </div>
      </div>

      <div className="mt-7">
        <RadioRows
          name="effect"
          label="What did you do?"
          errors={errorsOf('effect')}
          defaultValue={sent.effect}
          rows={(['renewed', 'patched'] as const).map((value) => ({ value, label: effectWords[value] }))}
        />
      </div>

      <div className="group/when mt-7">
        <ChoicePair
          name="when"
          label="When?"
          errors={errorsOf('when')}
          defaultValue={sent.when ?? 'now'}
          choices={[
            { value: 'now', label: 'Just now' },
            { value: 'earlier', label: 'Earlier' },
          ]}
        />
        <div className="hidden gap-x-4 group-has-[[value=earlier]:checked]/when:grid md:grid-cols-2">
          <TextField
            name="failedOn"
            type="date"
            label="Day it failed"
            errors={errorsOf('failedOn')}
            defaultValue={sent.failedOn ?? (sent.when === undefined ? today : undefined)}
            max={today}
          />
          <TextField
            name="failedTime"
            type="time"
            label="Time, if you know it"
            errors={errorsOf('failedTime')}
            defaultValue={sent.failedTime}
          />
        </div>
      </div>

      <div className="group/fitted mt-7 mb-6">
        <ChoicePair
          name="fitted"
          label={question.label}
          hint={question.hint}
          errors={errorsOf('fitted')}
          defaultValue={sent.fitted ?? (question.presumed ? 'yes' : undefined)}
          choices={[
            { value: 'yes', label: 'Yes' },
            { value: 'no', label: 'No, or not sure' },
          ]}
        />
        <div className="hidden group-has-[[value=no]:checked]/fitted:block">
          <TextField
            name="fittedOn"
            type="date"
            label="Fitted on, if you know"
            hint="Leave it empty if you do not: the note will say that the recorded day is in doubt."
            errors={errorsOf('fittedOn')}
            defaultValue={sent.fittedOn}
            max={today}
          />
        </div>
      </div>

      <Disclosure summary="Something outside did it" open={Boolean(sent.outsideCause)}>
        <RadioRows
          name="outsideCause"
          label="What did it?"
          hint="It is kept, and does not count against the item."
          errors={errorsOf('outsideCause')}
          defaultValue={sent.outsideCause ?? ''}
          rows={[
            { value: '', label: 'Nothing outside' },
            ...outsideCauses.map((value) => ({ value, label: outsideCauseWords[value] })),
          ]}
        />
      </Disclosure>
      <Disclosure summary="Note" open={Boolean(sent.note) || Boolean(errorsOf('note'))}>
        <TextAreaField
          name="note"
          label="Anything the next person should know"
          errors={errorsOf('note')}
          defaultValue={sent.note}
          maxLength={3000}
        />
      </Disclosure>

      <ActionBar note={perhaps ? perhapsSameSentence(perhapsSame, timeZone) : undefined}>
        <Button disabled={saving} className="min-h-15 grow text-[1.1rem] md:grow-0">
          {saving ? 'Saving…' : perhaps ? 'It failed again: save' : 'Save'}
        </Button>
      </ActionBar>
    </Form>
  );
}

/** How often a mode was logged before; the word is shown once and read out each time. */
function TimesBefore({ times, inFull }: { times: number; inFull: boolean }) {
  return (
    <>
      {times}
      <span className={inFull ? undefined : 'sr-only'}> before</span>
    </>
  );
}

function textsOf(values: Record<string, unknown> | null | undefined): Partial<Record<string, string>> {
  const entries = Object.entries(values ?? {}).filter(
    (entry): entry is [string, string] => typeof entry[1] === 'string',
  );
  return Object.fromEntries(entries);
}

function summaryOf(errors: Record<string, string[] | null>) {
  const rank = (name: string) => (fieldOrder.includes(name) ? fieldOrder.indexOf(name) : -1);
  return Object.entries(errors)
    .sort(([a], [b]) => rank(a) - rank(b))
    .flatMap(([name, messages]) =>
      (messages ?? []).map((message) => ({ fieldId: fieldOrder.includes(name) ? name : null, message })),
    );
}
