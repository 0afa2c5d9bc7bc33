import { Form, href, Link } from 'react-router';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { Button } from '~/components/button';
import { recordsQuery, recordsSearch, type RecordsState } from '~/components/class-page/records-search';
import { DataTable, type Column } from '~/components/data-table';
import { Disclosure } from '~/components/disclosure';
import { EmptyState } from '~/components/empty-state';
import { formatCalendarDate, formatDateTime } from '~/format/date';
import { formatCount, formatNoun } from '~/format/number';
import { Pagination } from '~/components/pagination';
import { SelectField } from '~/components/select-field';
import { TextField } from '~/components/text-field';
import { readClassHead } from '~/models/class-list.server';
import { type GroupAsset, listGroupAssets } from '~/models/fitted-items.server';
import { listClassRecords, type ClassRecordRow } from '~/models/class-record-list.server';
import { classRecordSorts } from '~/models/class-record-sorts';
import { organisation, requireViewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/class-records';

const pageSize = 100;
export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Records of ${loaderData?.head.name ?? 'a class'} · Intervale` },
];

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireViewer(context, request);
  const db = database();
  const head = await readClassHead(db, viewer.siteIds, params.classId);
  if (head === null) throw new Response('There is no such class.', { status: 404 });
  const { site, ...rest } = recordsSearch.parse(Object.fromEntries(new URL(request.url).searchParams));
  const state = { ...rest, site };
  const { rows, total } = await listClassRecords(
    db,
    viewer.siteIds,
    params.classId,
    { ...rest, siteId: site },
    { ...rest, pageSize },
  );
  const mayDateItems = viewer.roles.some((role) => role === 'lead' || role === 'admin');
  const groups = mayDateItems ? await listGroupAssets(db, params.classId, viewer.siteIds) : [];
  return { head, rows, total, groups, state, timeZone: organisation(context).timeZone };
}

export default function ClassRecords({ loaderData }: Route.ComponentProps) {
  const { head, rows, total, groups, state, timeZone } = loaderData;
  const addressOf = (next: RecordsState) =>
    href('/classes/:classId/records', { classId: head.id }) + recordsQuery(next);
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
      <RecordsFilter state={state} sites={head.sites} />
      <DataTable
        caption={`Records of ${head.name}`}
        captionHidden
        columns={columnsIn(timeZone)}
        rows={rows}
        rowKey={({ id }) => id}
        sort={{ key: state.sort, direction: state.direction }}
        hrefFor={({ key, direction }) =>
          addressOf({
            ...state,
            sort: classRecordSorts.find((one) => one === key) ?? 'day',
            direction,
            page: 1,
          })
        }
        empty={
          <EmptyState title={isFiltered(state) ? 'No record matches' : 'Nothing recorded yet'}>
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
      {total > 0 && (
        <p className="no-print">
          <Link
            reloadDocument
            to={
              href('/classes/:classId/records.csv', { classId: head.id }) +
              recordsQuery({ ...state, page: 1 })
            }
            className="inline-flex min-h-11 items-center"
          >
            All {formatNoun(total, 'record')} as CSV
          </Link>
        </p>
      )}
    </>
  );
}

function isFiltered({ kind, site, from, to, voided }: RecordsState): boolean {
  return Boolean(kind ?? site ?? from ?? to ?? voided);
}

function RecordsFilter({
  state,
  sites,
}: {
  state: RecordsState;
  sites: readonly { id: string; name: string }[];
}) {
  return (
    <Form
      className="my-4 flex flex-wrap items-end gap-x-5 gap-y-2 [&_button]:mb-4"
      key={JSON.stringify(state)}
    >
      <SelectField
        name="kind"
        label="What"
        defaultValue={state.kind ?? ''}
        emptyLabel="All"
        options={[
          { value: 'failure', label: 'Failures' },
          { value: 'planned-work', label: 'Planned work' },
        ]}
      />
      <SelectField
        name="site"
        label="Site"
        defaultValue={state.site ?? ''}
        emptyLabel="All"
        options={sites.map(({ id, name }) => ({ value: id, label: name }))}
      />
      <TextField type="date" name="from" label="From" defaultValue={state.from} />
      <TextField type="date" name="to" label="Up to" defaultValue={state.to} />
      <SelectField
        name="voided"
        label="Voided"
        defaultValue={state.voided ?? ''}
        emptyLabel="All"
        options={[
          { value: 'no', label: 'Those that count' },
          { value: 'yes', label: 'Voided ones' },
        ]}
      />
      <Button tone="quiet">Show</Button>
    </Form>
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
      sortable: true,
      firstDirection: 'desc',
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
    { key: 'tag', header: 'Asset', sortable: true, cell: ({ tag, siteName }) => `${tag}, ${siteName}` },
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
      key: 'logged',
      header: 'Logged by',
      sortable: true,
      firstDirection: 'desc',
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
