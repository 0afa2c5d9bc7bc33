import type { SubmissionResult } from '@conform-to/react';
import type { ReactNode } from 'react';
import { Form } from 'react-router';
import { Button, type ButtonTone } from '~/components/button';
import { Disclosure } from '~/components/disclosure';
import { TextAreaField, TextField } from '~/components/text-field';

/** Longest answer, question or reason that is kept. */
export const longestWords = 2000;

/** What came back of a form that was refused. */
export type Refused = SubmissionResult<string[]> | undefined;

interface WordsFormProps {
  intent: string;
  version: number;
  label: string;
  hint?: string;
  required?: boolean;
  button: string;
  tone?: ButtonTone;
  refused: Refused;
  children?: ReactNode;
}

/** A form of some words and a button; what was typed is still there after a refusal. */
export function WordsForm(props: WordsFormProps) {
  const { intent, version, label, hint, required, button, tone, refused, children } = props;
  const own = refused?.initialValue?.intent === intent ? refused : undefined;
  const typed = own?.initialValue?.words;
  return (
    <Form method="post">
      <input type="hidden" name="version" value={version} />
      {children}
      <TextAreaField
        name="words"
        id={`words-${intent}`}
        label={label}
        hint={hint}
        required={required}
        maxLength={longestWords}
        defaultValue={typeof typed === 'string' ? typed : undefined}
        errors={own?.error?.words ?? undefined}
      />
      <Button name="intent" value={intent} tone={tone}>
        {button}
      </Button>
    </Form>
  );
}

interface ManagerFormProps {
  version: number;
  refused: Refused;
}

const isOf = (refused: Refused, intent: string): boolean => refused?.initialValue?.intent === intent;

/** Approving: two taps, with today as the day unless another is given. */
export function ApproveForm({ version, today, refused }: ManagerFormProps & { today: string }) {
  const own = isOf(refused, 'approve') ? refused : undefined;
  const day = own?.initialValue?.day;
  return (
    <Form method="post" className="mt-4">
      <input type="hidden" name="version" value={version} />
      <TextField
        type="date"
        name="day"
        label="From which day"
        hint="The task’s interval changes on that day; until then everything stays as it is."
        min={today}
        defaultValue={typeof day === 'string' ? day : today}
        errors={own?.error?.day ?? undefined}
      />
      <Button name="intent" value="approve">
        Approve
      </Button>
    </Form>
  );
}

/** Saying no, or asking first, each with some words. */
export function DeclineOrAsk({
  may,
  version,
  refused,
}: ManagerFormProps & { may: { decline: boolean; askBack: boolean } }) {
  if (!may.decline) return null;
  return (
    <div className="mt-6">
      <Disclosure summary="Decline" open={isOf(refused, 'decline')}>
        <WordsForm
          intent="decline"
          version={version}
          label="Why not"
          required
          button="Decline"
          tone="danger"
          refused={refused}
        />
      </Disclosure>
      {may.askBack && (
        <Disclosure summary="Ask back" open={isOf(refused, 'ask-back')}>
          <WordsForm
            intent="ask-back"
            version={version}
            label="What do you need to know?"
            required
            button="Ask"
            tone="quiet"
            refused={refused}
          />
        </Disclosure>
      )}
    </div>
  );
}
