import { formatDateTime } from '~/format/date';
import { correctableFieldsSchema } from '~/models/record-correction';
import type { RecordChange } from '~/models/last-change.server';
import { fieldChanges, type ModeNames } from './correction-words';

interface RecordHistoryProps {
  history: readonly RecordChange[];
  modes: ModeNames;
  clock: 'calendar-days' | 'operating-hours';
  timeZone: string;
}

const deeds: Record<string, string> = {
  void: 'voided it',
  restore: 'put it back',
  correct: 'corrected it',
  'take-back': 'took a correction back',
};

/** What the audit trail holds of a failure's parts; older entries may hold other things. */
const partsOf = (held: unknown) => correctableFieldsSchema.partial().safeParse(held).data ?? {};

/** Who changed a failure, when, and from what to what; nothing where nobody did. */
export function RecordHistory({ history, modes, clock, timeZone }: RecordHistoryProps) {
  if (history.length === 0) return null;
  return (
    <section aria-labelledby="history" className="mt-6">
      <h2 id="history">What was changed</h2>
      <ol className="mt-1">
        {history.map(({ action, personName, at, before, after }, index) => (
          <li key={index} className="border-hair border-b py-2">
            {personName ?? 'An import'} {deeds[action] ?? 'changed it'}, {formatDateTime(at, timeZone)}
            {action === 'correct' &&
              fieldChanges(partsOf(before), partsOf(after), { modes, clock }).map(({ name, from, to }) => (
                <span key={name} className="text-grey block text-[0.92rem]">
                  {name}: from {from} to {to}
                </span>
              ))}
          </li>
        ))}
      </ol>
    </section>
  );
}
