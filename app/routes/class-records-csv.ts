import { recordsSearch } from '~/components/class-page/records-search';
import { readClassHead } from '~/models/class-list.server';
import { everyClassRecord } from '~/models/class-record-list.server';
import { csvDownload } from '~/services/csv-download.server';
import { requireViewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/class-records-csv';

/** Every record of a class that the filter leaves, within the viewer's sites. */
export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireViewer(context, request);
  const db = database();
  const head = await readClassHead(db, viewer.siteIds, params.classId);
  if (head === null) throw new Response('There is no such class.', { status: 404 });
  const { site, sort, direction, ...filter } = recordsSearch.parse(
    Object.fromEntries(new URL(request.url).searchParams),
  );
  return csvDownload(
    `${head.name} records.csv`,
    [
      { header: 'kind', cell: ({ kind }) => (kind === 'failure' ? 'failure' : 'planned work') },
      { header: 'day', cell: ({ day }) => day },
      { header: 'at', cell: ({ at }) => at?.toISOString() ?? null },
      { header: 'tag', cell: ({ tag }) => tag },
      { header: 'site', cell: ({ siteName }) => siteName },
      { header: 'what', cell: ({ what }) => what },
      {
        header: 'result',
        cell: ({ kind, renewed }) => (renewed ? 'renewed' : kind === 'failure' ? 'patched' : 'not renewed'),
      },
      { header: 'outside cause', cell: ({ outsideCause }) => outsideCause },
      { header: 'item fitted', cell: ({ itemFittedOn }) => itemFittedOn },
      { header: 'note', cell: ({ note }) => note },
      {
        header: 'logged by',
        cell: ({ loggedBy, importId }) => loggedBy ?? (importId === null ? null : 'import'),
      },
      { header: 'voided because', cell: ({ voidReason }) => voidReason },
    ],
    everyClassRecord(db, viewer.siteIds, head.id, { ...filter, siteId: site }, { sort, direction }),
  );
}
