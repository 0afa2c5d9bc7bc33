import { Form } from 'react-router';
import { Button } from '~/components/button';
import { Disclosure } from '~/components/disclosure';
import { formatDateTime } from '~/format/date';
import { formatNoun } from '~/format/number';
import type { MadeCorrection } from '~/models/record-corrections.server';
import { correctionWords, type ModeNames } from './correction-words';

interface CorrectionsMadeProps {
  corrections: readonly MadeCorrection[];
  modes: ModeNames;
  timeZone: string;
  action: string;
}

/** What was put right here of late, each with a way back. */
export function CorrectionsMade({ corrections, modes, timeZone, action }: CorrectionsMadeProps) {
  if (corrections.length === 0) return null;
  return (
    <section aria-label="Corrections made here" className="mt-4 max-w-[46rem]">
      <Disclosure summary="Corrections made here">
        <ul>
          {corrections.map(({ id, correction, personName, at, records, takenBackAt }) => (
            <li
              key={id}
              className="border-hair flex flex-wrap items-center justify-between gap-x-5 border-b py-2"
            >
              <span className="[overflow-wrap:anywhere]">
                <b>{correctionWords(correction, modes)}</b>
                <span className="text-grey block text-[0.92rem]">
                  {formatNoun(records, 'failure')}, {personName}, {formatDateTime(at, timeZone)}
                  {takenBackAt !== null && `; taken back ${formatDateTime(takenBackAt, timeZone)}`}
                </span>
              </span>
              {takenBackAt === null && (
                <Form method="post" action={action}>
                  <input type="hidden" name="correctionId" value={id} />
                  <Button
                    name="intent"
                    value="take-back"
                    tone="quiet"
                    aria-label={`Take back: ${correctionWords(correction, modes)}`}
                  >
                    Take back
                  </Button>
                </Form>
              )}
            </li>
          ))}
        </ul>
      </Disclosure>
    </section>
  );
}
