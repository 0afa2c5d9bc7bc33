import { ageMethods } from '~/components/methods/age-methods';
import { scheduleMethods } from '~/components/methods/schedule-methods';
import { trendMethods } from '~/components/methods/trend-methods';
import { formatCalendarDate, formatDateTime } from '~/format/date';

/** What a printed class page begins with: whose evidence it is, of which night, printed when. */
export function SheetHead({
  organisationName,
  asOf,
  printedAt,
  timeZone,
}: {
  organisationName: string;
  asOf: string;
  printedAt: Date;
  timeZone: string;
}) {
  return (
    <p className="print-only mb-2 border-b pb-1 text-[0.9rem]">
      Evidence sheet of {organisationName}, made with Intervale. Records up to the end of{' '}
      {formatCalendarDate(asOf)}; printed {formatDateTime(printedAt, timeZone)}.
    </p>
  );
}

/** The methods behind a printed class page with their sources. */
export function SheetSources() {
  const methods = [trendMethods, ageMethods, scheduleMethods].flatMap((group) => group.methods);
  return (
    <section className="print-only mt-3 border-t pt-2 text-[0.82rem] leading-snug">
      <h2 className="text-[1rem]">Methods and sources</h2>
      <p>
        {methods.map(({ name, source }) => `${name}: ${source}`).join('. ')}. Intervals hold 90 % unless said
        otherwise, savings 80 %. How often they do, by simulation, stands on the page Methods.
      </p>
    </section>
  );
}
