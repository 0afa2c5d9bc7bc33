import { href, Link } from 'react-router';
import { z } from 'zod';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { DataTable, type Column } from '~/components/data-table';
import { Disclosure } from '~/components/disclosure';
import { EmptyState } from '~/components/empty-state';
import { formatCalendarDate, formatDateTime } from '~/format/date';
import { formatCount, formatNoun } from '~/format/number';
import { Pagination } from '~/components/pagination';
import { readClassHead } from '~/models/class-list.server';
import { type GroupAsset, listGroupAssets } from '~/models/fitted-items.server';
import { listClassRecords, type ClassRecordRow } from '~/models/class-record-list.server';
import { organisation, requireViewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/class-records';

const pageSize = 100;
const searchSchema = z.object({
  kind: z.enum(['failure', 'planned-work']).optional().catch(undefined),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
});
type ListState = z.infer<typeof searchSchema>;

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Records of ${loaderData?.head.name ?? 'a class'} · Intervale` },
];

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireViewer(context, request);
  const db = database();
  const head = await readClassHead(db, viewer.siteIds, params.classId);
  if (head === null) throw new Response('There is no such class.', { status: 404 });
  const state = searchSchema.parse(Object.fromEntries(new URL(request.url).searchParams));
  const { rows, total } = await listClassRecords(db, viewer.siteIds, params.classId, { ...state, pageSize });
  const mayDateItems = viewer.roles.some((role) => role === 'lead' || role === 'admin');
  const groups = mayDateItems ? await listGroupAssets(db, params.classId, viewer.siteIds) : [];
  return { head, rows, total, groups, state, timeZone: organisation(context).timeZone };
}

const kinds: readonly { kind: ListState['kind']; label: string }[] = [
  { kind: undefined, label: 'All' },
  { kind: 'failure', label: 'Failures' },
  { kind: 'planned-work', label: 'Planned work' },
];

export default function ClassRecords({ loaderData }: Route.ComponentProps) {
  const { head, rows, total, groups, state, timeZone } = loaderData;
  const addressOf = ({ kind, page }: ListState) => {
    const search = new URLSearchParams();
    if (kind) search.set('kind', kind);
    if (page > 1) search.set('page', String(page));
    const query = search.toString();
    return href('/classes/:classId/records', { classId: head.id }) + (query && `?${query}`);
  };
  return (
    <>
      <Breadcrumbs
        crumbs={[
          { label: 'Classes', to: href('/classes') },
          { label: head.name, to: href('/classes/:classId', { classId: head.id }) },
          { label: 'Records' },
        ]}
      />
      <h1>Failures and planned work</h1>
      <p className="text-grey">
        Everything recorded for {head.itemPlural}, voided records too: nothing is ever deleted.
      </p>
      <GroupAssets groups={groups} itemPlural={head.itemPlural} />
      <ul className="my-3 flex gap-6">
        {kinds.map(({ kind, label }) => (
          <li key={label}>
            <Link
              to={addressOf({ kind, page: 1 })}
              aria-current={kind === state.kind ? 'true' : undefined}
              className="inline-flex min-h-11 items-center aria-[current]:font-bold"
            >
              {label}
            </Link>
          </li>
        ))}
      </ul>
      <DataTable
        caption={`Records of ${head.name}`}
        captionHidden
        columns={columnsIn(timeZone)}
        rows={rows}
        rowKey={({ id }) => id}
        empty={
          <EmptyState title="Nothing recorded yet">
            Failures come here as soon as somebody <Link to={href('/log')}>logs one</Link>.
          </EmptyState>
        }
      />
      <Pagination
        page={state.page}
        pageSize={pageSize}
        total={total}
        noun="records"
        hrefFor={(page) => addressOf({ ...state, page })}
      />
    </>
  );
}

/** Where the fitting days of items held by the dozen are kept. */
function GroupAssets({ groups, itemPlural }: { groups: readonly GroupAsset[]; itemPlural: string }) {
  if (groups.length === 0) return null;
  return (
    <Disclosure summary={`When the ${itemPlural} of ${formatNoun(groups.length, 'asset')} were fitted`}>
      <ul>
        {groups.map(({ id, tag, siteName, quantity, datedItems }) => (
          <li key={id}>
            <Link
              to={href('/assets/:assetId/fitted', { assetId: id })}
              className="inline-flex min-h-11 items-center"
            >
              {tag}, {siteName}
            </Link>{' '}
            <span className="text-grey">
              the day is known of {formatCount(datedItems)} of {formatCount(quantity)}
            </span>
          </li>
        ))}
      </ul>
    </Disclosure>
  );
}

function columnsIn(timeZone: string): Column<ClassRecordRow>[] {
  return [
    {
      key: 'day',
      header: 'When',
      rowHeader: true,
      cell: ({ id, kind, day, at }) => {
        const when = at === null ? formatCalendarDate(day, 'short') : formatDateTime(at, timeZone, 'short');
        return kind === 'failure' ? (
          <Link to={href('/failures/:failureId', { failureId: id })}>{when}</Link>
        ) : (
          when
        );
      },
    },
    { key: 'tag', header: 'Asset', cell: ({ tag, siteName }) => `${tag}, ${siteName}` },
    { key: 'what', header: 'What', cell: whatHappened },
    {
      key: 'result',
      header: 'Result',
      cell: ({ kind, renewed }) => (renewed ? 'renewed' : kind === 'failure' ? 'patched' : 'not renewed'),
    },
    {
      key: 'fitted',
      header: 'Item fitted',
      cell: ({ itemFittedOn }) => itemFittedOn && formatCalendarDate(itemFittedOn, 'short'),
    },
    { key: 'note', header: 'Note', cell: ({ note }) => note },
    {
      key: 'from',
      header: 'Logged by',
      cell: ({ loggedBy, importId }) => loggedBy ?? (importId === null ? 'not known' : 'import'),
    },
    {
      key: 'voided',
      header: 'Voided',
      cell: ({ voidReason }) => voidReason !== null && <span className="text-danger">{voidReason}</span>,
    },
  ];
}

function whatHappened({ kind, what, outsideCause }: ClassRecordRow): string {
  const words = kind === 'failure' ? (what ?? 'failure, no mode given') : `planned: ${what}`;
  return outsideCause === null ? words : `${words} (outside cause: ${outsideCause})`;
}
