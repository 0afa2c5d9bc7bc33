import { cautionNames } from '~/advice/caution-names';
import { classesFilter, classesSearch } from '~/components/classes/search';
import { everyClass } from '~/models/class-list.server';
import { csvDownload } from '~/services/csv-download.server';
import { requireViewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/classes-csv';

/** Every class that the filter leaves, with what the night in force says of it. */
export function loader({ context, request }: Route.LoaderArgs) {
  const viewer = requireViewer(context, request);
  const state = classesSearch.parse(Object.fromEntries(new URL(request.url).searchParams));
  return csvDownload(
    'classes.csv',
    [
      { header: 'class', cell: ({ name }) => name },
      { header: 'statutory', cell: ({ statutory }) => (statutory ? 'yes' : 'no') },
      { header: 'endangers people', cell: ({ endangersPeople }) => (endangersPeople ? 'yes' : 'no') },
      { header: 'as of', cell: ({ assessment }) => assessment?.asOf ?? null },
      { header: 'verdict', cell: ({ assessment }) => assessment?.verdict ?? 'not assessed yet' },
      { header: 'trend', cell: ({ assessment }) => assessment?.trend ?? null },
      { header: 'failures', cell: ({ assessment }) => assessment?.failures ?? null },
      { header: 'exposure', cell: ({ assessment }) => assessment?.summary.exposure ?? null },
      { header: 'clock', cell: ({ assessment }) => assessment?.summary.clock ?? null },
      {
        header: 'failures in the last 12 months',
        cell: ({ assessment }) => assessment?.summary.failuresLastYear ?? null,
      },
      {
        header: 'mean time between failures',
        cell: ({ assessment }) => assessment?.summary.meanTime ?? null,
      },
      {
        header: 'at least (90 %)',
        cell: ({ assessment }) => assessment?.summary.meanTimeInterval.low ?? null,
      },
      {
        header: 'at most (90 %)',
        cell: ({ assessment }) => assessment?.summary.meanTimeInterval.high ?? null,
      },
      { header: 'slope', cell: ({ assessment }) => assessment?.summary.slope ?? null },
      { header: 'proposal', cell: ({ assessment }) => assessment?.summary.action ?? null },
      {
        header: 'cautions',
        cell: ({ assessment }) =>
          assessment?.cautionCodes.map((code) => cautionNames[code]).join(', ') ?? null,
      },
    ],
    everyClass(database(), viewer.siteIds, classesFilter(state)),
  );
}
