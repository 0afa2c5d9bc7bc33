import { href, Link } from 'react-router';
import { z } from 'zod';
import { PositionTimeline, TimelineKey } from '~/charts/position-timeline';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { DataTable, type Column } from '~/components/data-table';
import { EmptyState } from '~/components/empty-state';
import { Notice } from '~/components/notice';
import { Pagination } from '~/components/pagination';
import { formatCalendarDate } from '~/format/date';
import { formatCount } from '~/format/number';
import { currentAssessment } from '~/models/assessments.server';
import { readClassHead } from '~/models/class-list.server';
import { positionSorts } from '~/models/position-sorts';
import { listPositions, type PositionRow } from '~/models/positions.server';
import { today } from '~/services/clock.server';
import { organisation, requireViewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/class-positions';

const pageSize = 40;
const searchSchema = z.object({
  sort: z.enum(positionSorts).catch('failures'),
  direction: z.enum(['asc', 'desc']).catch('desc'),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
});
type ListState = z.infer<typeof searchSchema>;

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Place by place${loaderData ? `: ${loaderData.head.name}` : ''} · Intervale` },
];

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireViewer(context, request);
  const db = database();
  const head = await readClassHead(db, viewer.siteIds, params.classId);
  if (head === null) throw new Response('There is no such class.', { status: 404 });
  const state = searchSchema.parse(Object.fromEntries(new URL(request.url).searchParams));
  const day = today(organisation(context).timeZone);
  const [list, assessment] = await Promise.all([
    listPositions(db, viewer.siteIds, head.id, { ...state, pageSize, today: day }),
    currentAssessment(db, head.id),
  ]);
  const caution = assessment?.conclusion.cautions.find(({ code }) => code === 'few-bad-positions') ?? null;
  return { head, ...list, state, caution };
}

export default function ClassPositions({ loaderData }: Route.ComponentProps) {
  const { head, rows, total, state, caution } = loaderData;
  const addressOf = ({ sort, direction, page }: ListState) => {
    const search = new URLSearchParams();
    if (sort !== 'failures') search.set('sort', sort);
    if (direction !== 'desc') search.set('direction', direction);
    if (page > 1) search.set('page', String(page));
    const query = search.toString();
    return href('/classes/:classId/positions', { classId: head.id }) + (query && `?${query}`);
  };
  return (
    <>
      <Breadcrumbs
        crumbs={[
          { label: 'Classes', to: href('/classes') },
          { label: head.name, to: href('/classes/:classId', { classId: head.id }) },
          { label: 'Place by place' },
        ]}
      />
      <h1>Place by place</h1>
      <p className="text-grey">What each asset has been through; those that failed most stand first.</p>
      {caution !== null && (
        <Notice tone="warning" title={caution.sentence}>
          <p>{caution.action}</p>
        </Notice>
      )}
      <div className="my-3">
        <TimelineKey />
      </div>
      <DataTable
        caption={`Assets of ${head.name}`}
        captionHidden
        columns={columns}
        rows={rows}
        rowKey={({ id }) => id}
        sort={{ key: state.sort, direction: state.direction }}
        hrefFor={({ key, direction }) =>
          addressOf({
            sort: positionSorts.find((one) => one === key) ?? 'failures',
            direction,
            page: 1,
          })
        }
        empty={<EmptyState title="No asset yet">Assets come with the register.</EmptyState>}
      />
      <Pagination
        page={state.page}
        pageSize={pageSize}
        total={total}
        noun="assets"
        hrefFor={(page) => addressOf({ ...state, page })}
      />
    </>
  );
}

const columns: Column<PositionRow>[] = [
  {
    key: 'tag',
    header: 'Asset',
    sortable: true,
    rowHeader: true,
    cell: ({ id, tag, quantity, retiredOn }) => (
      <>
        <Link to={href('/assets/:assetId', { assetId: id })}>{tag}</Link>
        {quantity > 1 && <span className="text-grey block font-normal">{formatCount(quantity)} items</span>}
        {retiredOn !== null && <span className="text-grey block font-normal">retired</span>}
      </>
    ),
  },
  { key: 'site', header: 'Site', sortable: true, cell: ({ siteName }) => siteName },
  {
    key: 'failures',
    header: 'Failures',
    sortable: true,
    firstDirection: 'desc',
    align: 'end',
    cell: ({ failures }) => <b className="tabular">{formatCount(failures)}</b>,
  },
  {
    key: 'renewals',
    header: 'By plan',
    sortable: true,
    firstDirection: 'desc',
    align: 'end',
    cell: ({ plannedRenewals }) => formatCount(plannedRenewals),
  },
  {
    key: 'last',
    header: 'Last failure',
    sortable: true,
    firstDirection: 'desc',
    cell: ({ lastFailureOn }) =>
      lastFailureOn === null ? (
        'none'
      ) : (
        <span className="md:whitespace-nowrap">{formatCalendarDate(lastFailureOn, 'short')}</span>
      ),
  },
  { key: 'timeline', header: 'Over time', cell: ({ timeline }) => <PositionTimeline timeline={timeline} /> },
];
