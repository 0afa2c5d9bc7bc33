import type { SubmissionResult } from '@conform-to/react';
import { Form } from 'react-router';
import { Button } from '~/components/button';
import { Disclosure } from '~/components/disclosure';
import { SelectField } from '~/components/select-field';
import { formatNoun } from '~/format/number';

interface MergeFormProps {
  modes: readonly { id: string; name: string; failures: number }[];
  action: string;
  refused: SubmissionResult<string[]> | null;
}

/** Two names for one thing become one: all failures of the first go to the second. */
export function MergeForm({ modes, action, refused }: MergeFormProps) {
  if (modes.length < 2) return null;
  const own = refused?.initialValue?.intent === 'preview-merge' ? refused : null;
  const typed = (name: string) => {
    const value = own?.initialValue?.[name];
    return typeof value === 'string' ? value : '';
  };
  const options = modes.map(({ id, name, failures }) => ({
    value: id,
    label: `${name} (${formatNoun(failures, 'failure')})`,
  }));
  return (
    <section aria-labelledby="merge" className="mt-8 max-w-[46rem]">
      <h2 id="merge" className="sr-only">
        Merge modes
      </h2>
      <Disclosure summary="Merge two modes that mean the same" open={own !== null}>
        <Form method="post" action={action}>
          <SelectField
            name="from"
            label="The one that goes"
            defaultValue={typed('from')}
            emptyLabel="choose"
            options={options}
            errors={own?.error?.from ?? undefined}
          />
          <SelectField
            name="into"
            label="The one that stays"
            defaultValue={typed('into')}
            emptyLabel="choose"
            options={options}
            errors={own?.error?.into ?? undefined}
          />
          <Button name="intent" value="preview-merge" tone="quiet">
            See what it does
          </Button>
        </Form>
      </Disclosure>
    </section>
  );
}
