import { getFormProps, type SubmissionResult, useForm } from '@conform-to/react';
import { useState } from 'react';
import { Form, useNavigation } from 'react-router';

import { ActionBar } from '../action-bar';
import { Button } from '../button';
import { Checkbox } from '../checkbox';
import { ErrorSummary } from '../error-summary';
import { TextField } from '../text-field';

interface ReadingFormProps {
  /** Number of the reading this form makes, kept for as long as the form is. */
  newId: string;
  lastResult: SubmissionResult<string[]> | undefined;
  today: string;
}

const fieldOrder = ['hours', 'readOn', 'meterChanged'];

/** The form of one reading: what the meter shows, when, and whether it is a new meter. */
export function ReadingForm({ newId, lastResult, today }: ReadingFormProps) {
  const sent = lastResult?.initialValue ?? {};
  const text = (name: string) => (typeof sent[name] === 'string' ? sent[name] : undefined);
  const [id] = useState(text('id') ?? newId);
  const [form] = useForm({ id: 'log-reading', lastResult });
  const saving = useNavigation().state !== 'idle';
  const errors = lastResult?.error ?? {};
  const errorsOf = (name: string) => errors[name] ?? undefined;
  const summary = Object.entries(errors).flatMap(([name, messages]) =>
    (messages ?? []).map((message) => ({ fieldId: fieldOrder.includes(name) ? name : null, message })),
  );
  return (
    <Form method="post" {...getFormProps(form)} className="mt-2">
      <ErrorSummary errors={summary} />
      <input type="hidden" name="id" value={id} />
      <TextField
        name="hours"
        label="Hours the meter shows"
        inputMode="decimal"
        autoComplete="off"
        defaultValue={text('hours')}
        errors={errorsOf('hours')}
        maxLength={16}
      />
      <TextField
        name="readOn"
        type="date"
        label="Day it was read"
        defaultValue={text('readOn') ?? today}
        errors={errorsOf('readOn')}
        max={today}
      />
      <Checkbox
        name="meterChanged"
        label="The meter was changed"
        hint="Tick it for the first reading of a new meter, which may show less than the old one did."
        defaultChecked={sent.meterChanged !== undefined}
        errors={errorsOf('meterChanged')}
      />
      <ActionBar>
        <Button name="intent" value="add" disabled={saving} className="min-h-15 grow text-[1.1rem] md:grow-0">
          {saving ? 'Saving…' : 'Save'}
        </Button>
      </ActionBar>
    </Form>
  );
}
