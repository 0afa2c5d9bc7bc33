import { href, Link } from 'react-router';
import type { Column } from '~/components/data-table';
import { outsideCauseWords } from '~/components/log/words';
import { formatCalendarDate, formatDateTime } from '~/format/date';
import { formatClock } from '~/format/number';
import type { CorrectableRow } from '~/models/correctable-records.server';

interface ColumnOptions {
  timeZone: string;
  clock: 'calendar-days' | 'operating-hours';
  /** Ids of the failures that are ticked from the start. */
  ticked: ReadonlySet<string>;
}

/** The columns of the table of failures to correct, with a box to tick in each row. */
export function recordColumns({ timeZone, clock, ticked }: ColumnOptions): Column<CorrectableRow>[] {
  const ageUnit = clock === 'operating-hours' ? 'hours' : 'days';
  return [
    {
      key: 'choose',
      header: 'Choose',
      cell: ({ id, version, tag, failedOn }) => (
        <label className="flex min-h-11 min-w-11 items-center max-md:-my-2.5">
          <input
            type="checkbox"
            name="record"
            value={`${id}:${version}`}
            defaultChecked={ticked.has(id)}
            className="size-5"
          />
          <span className="sr-only">
            {tag}, {formatCalendarDate(failedOn)}
          </span>
        </label>
      ),
    },
    {
      key: 'day',
      header: 'When',
      sortable: true,
      firstDirection: 'desc',
      rowHeader: true,
      cell: ({ id, failedOn, failedAt, voidReason }) => (
        <>
          <Link to={href('/failures/:failureId', { failureId: id })} className="lg:whitespace-nowrap">
            {failedAt === null
              ? formatCalendarDate(failedOn, 'short')
              : formatDateTime(failedAt, timeZone, 'short')}
          </Link>
          {voidReason !== null && (
            <span className="text-danger block text-[0.92rem] font-normal">voided: {voidReason}</span>
          )}
        </>
      ),
    },
    { key: 'tag', header: 'Asset', sortable: true, cell: ({ tag, siteName }) => `${tag}, ${siteName}` },
    { key: 'mode', header: 'Mode', sortable: true, cell: ({ modeName }) => modeName ?? 'none' },
    {
      key: 'effect',
      header: 'Done',
      cell: ({ effect, outsideCause }) => (
        <>
          {effect}
          {outsideCause !== null && (
            <span className="block text-[0.92rem]">
              from outside: {outsideCauseWords[outsideCause].toLowerCase()}
            </span>
          )}
        </>
      ),
    },
    {
      key: 'fitted',
      header: 'Item fitted',
      sortable: true,
      firstDirection: 'desc',
      cell: ({ itemFittedOn, itemAge }) =>
        itemFittedOn !== null
          ? formatCalendarDate(itemFittedOn, 'short')
          : itemAge === null
            ? 'not given'
            : `age ${formatClock(itemAge, ageUnit)}`,
    },
    {
      key: 'logged',
      header: 'Logged',
      sortable: true,
      firstDirection: 'desc',
      cell: ({ loggedByName, note }) => (
        <>
          {note}
          <span className="text-grey block text-[0.92rem]">by {loggedByName ?? 'an import'}</span>
        </>
      ),
    },
  ];
}
