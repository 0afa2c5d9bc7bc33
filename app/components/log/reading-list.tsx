import { Form } from 'react-router';
import { formatCalendarDate } from '~/format/date';

import { Button } from '../button';
import { hoursWords } from './hours-words';

export interface ListedReading {
  readonly id: string;
  readonly readOn: string;
  readonly hours: number;
  readonly meterChanged: boolean;
  readonly loggedByName: string | null;
  readonly voidReason: string | null;
  readonly version: number;
  readonly mayUndo: boolean;
}

/** Readings of one meter, the latest first, each with what takes it back. */
export function ReadingList({ readings }: { readings: readonly ListedReading[] }) {
  if (readings.length === 0) return <p className="text-grey">Nobody has read this meter yet.</p>;
  return (
    <ul>
      {readings.map((reading) => (
        <li
          key={reading.id}
          className="border-hair flex flex-wrap items-center justify-between gap-x-4 gap-y-2 border-b py-2"
        >
          <p className="min-w-0 [overflow-wrap:anywhere]">
            <span className={reading.voidReason === null ? 'font-bold' : 'line-through'}>
              {hoursWords(reading.hours)}
            </span>{' '}
            {formatCalendarDate(reading.readOn)}
            <span className="text-grey block text-[0.9rem]">{asideOf(reading)}</span>
          </p>
          {reading.mayUndo && (
            <Form method="post" className="max-md:w-full">
              <input type="hidden" name="readingId" value={reading.id} />
              <input type="hidden" name="version" value={reading.version} />
              <Button
                name="intent"
                value={reading.voidReason === null ? 'void' : 'restore'}
                tone="quiet"
                aria-label={`${deedOf(reading)}: ${hoursWords(reading.hours)} on ${formatCalendarDate(reading.readOn)}`}
              >
                {deedOf(reading)}
              </Button>
            </Form>
          )}
        </li>
      ))}
    </ul>
  );
}

const deedOf = ({ voidReason }: ListedReading) => (voidReason === null ? 'Undo' : 'Put it back');

function asideOf({ meterChanged, loggedByName, voidReason }: ListedReading): string {
  return [
    meterChanged ? 'first reading of a new meter' : null,
    `by ${loggedByName ?? 'an import'}`,
    voidReason === null ? null : `undone, does not count: ${voidReason}`,
  ]
    .filter((part) => part !== null)
    .join('; ');
}
