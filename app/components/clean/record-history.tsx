import { formatDateTime } from '~/format/date';
import type { RecordChange } from '~/models/last-change.server';
import { auditedChanges, deedWords, type ModeNames } from './correction-words';
import { FieldChanges } from './field-changes';

interface RecordHistoryProps {
  history: readonly RecordChange[];
  modes: ModeNames;
  clock: 'calendar-days' | 'operating-hours';
  timeZone: string;
}

/** Who changed a failure, when, and from what to what; nothing where nobody did. */
export function RecordHistory({ history, modes, clock, timeZone }: RecordHistoryProps) {
  if (history.length === 0) return null;
  return (
    <section aria-labelledby="history" className="mt-6">
      <h2 id="history">What was changed</h2>
      <ol className="mt-1">
        {history.map((change, index) => (
          <li key={index} className="border-hair border-b py-2">
            {change.personName ?? 'Intervale'} {deedWords(change.action)},{' '}
            {formatDateTime(change.at, timeZone)}
            <span className="text-grey text-[0.92rem]">
              <FieldChanges changes={auditedChanges(change, { modes, clock })} />
            </span>
          </li>
        ))}
      </ol>
    </section>
  );
}
