import { everyYearAhead } from '~/models/year-ahead.server';
import { minorToPlain } from '~/models/money';
import { csvDownload } from '~/services/csv-download.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import { yearAheadSearch } from '~/components/year-ahead/search';
import type { Route } from './+types/year-ahead-csv';

/** Every row of the year ahead that the filter leaves. */
export function loader({ context, request }: Route.LoaderArgs) {
  requireRole(context, request, 'lead', 'manager', 'admin');
  const { currency } = organisation(context);
  const { site, months, by, sort, direction } = yearAheadSearch.parse(
    Object.fromEntries(new URL(request.url).searchParams),
  );
  return csvDownload(
    `expected failures ${months} months.csv`,
    [
      { header: 'class', cell: ({ className }) => className },
      { header: 'site', cell: ({ siteName }) => siteName ?? 'all sites' },
      { header: 'items', cell: ({ positions }) => positions },
      { header: `failures expected in ${months} months`, cell: ({ mean }) => Number(mean.toPrecision(4)) },
      { header: 'at least (90 % range)', cell: ({ low }) => low },
      { header: 'at most (90 % range)', cell: ({ high }) => high },
      { header: 'spares to hold', cell: ({ spares }) => spares },
      { header: 'lead time, days', cell: ({ leadTimeDays }) => leadTimeDays },
      {
        header: `cost of the failures, ${currency}`,
        cell: ({ costMinor }) => minorToPlain(costMinor, currency),
      },
    ],
    everyYearAhead(database(), { months, by, siteId: site }, { sort, direction }),
  );
}
