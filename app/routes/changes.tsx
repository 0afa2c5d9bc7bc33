import { Form, href, Link } from 'react-router';
import { changeInWords } from '~/advice/change-words';
import { Button } from '~/components/button';
import { followUpNames, savingWords, stateWords } from '~/components/changes/change-words';
import { changesFilter, changesQuery, changesSearch, type ChangesState } from '~/components/changes/search';
import { DataTable, type Column } from '~/components/data-table';
import { EmptyState } from '~/components/empty-state';
import { Pagination } from '~/components/pagination';
import { SelectField } from '~/components/select-field';
import { formatCalendarDate, formatDate } from '~/format/date';
import { formatNoun, formatPercent } from '~/format/number';
import { changeSorts, type ChangeRow } from '~/models/schedule-change';
import { listChanges } from '~/models/schedule-changes.server';
import { listSites } from '~/models/sites.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/changes';

const pageSize = 50;

export const meta: Route.MetaFunction = () => [{ title: 'Changes · Intervale' }];

export async function loader({ context, request }: Route.LoaderArgs) {
  requireRole(context, request, 'lead', 'manager', 'admin');
  const state = changesSearch.parse(Object.fromEntries(new URL(request.url).searchParams));
  const db = database();
  const [{ rows, total }, sites] = await Promise.all([
    listChanges(db, { ...changesFilter(state), page: state.page, pageSize }),
    listSites(db, 'all'),
  ]);
  const { currency, timeZone } = organisation(context);
  return { rows, total, sites, state, currency, timeZone };
}

const addressOf = (state: ChangesState) => href('/changes') + changesQuery(state);

export default function Changes({ loaderData }: Route.ComponentProps) {
  const { rows, total, sites, state, currency, timeZone } = loaderData;
  const isFiltered = Boolean(state.group ?? state.site ?? state.class);
  return (
    <>
      <h1>Changes</h1>
      <p className="text-grey">
        What was put forward for a schedule, what was decided, and what came of it. Those that wait stand
        first.
      </p>
      {state.class && (
        <p className="mt-2">
          Those of {rows[0]?.className ?? 'one class'} alone.{' '}
          <Link to={href('/changes')}>Of all classes</Link>
        </p>
      )}
      <Form
        className="my-4 flex flex-wrap items-end gap-x-5 gap-y-2 [&_button]:mb-4"
        key={JSON.stringify(state)}
      >
        {state.class && <input type="hidden" name="class" value={state.class} />}
        {state.sort !== 'state' && (
          <>
            <input type="hidden" name="sort" value={state.sort} />
            <input type="hidden" name="direction" value={state.direction} />
          </>
        )}
        <SelectField
          label="State"
          name="group"
          defaultValue={state.group ?? ''}
          options={[
            { value: '', label: 'All' },
            { value: 'open', label: 'Waiting' },
            { value: 'to-decide', label: 'Waiting for a decision' },
            { value: 'followed', label: 'In effect' },
            { value: 'past', label: 'Past' },
          ]}
        />
        <SelectField
          label="Site"
          name="site"
          defaultValue={state.site ?? ''}
          options={[
            { value: '', label: 'All sites' },
            ...sites.map(({ id, name }) => ({ value: id, label: name })),
          ]}
        />
        <Button tone="quiet">Show</Button>
      </Form>
      <DataTable
        caption="Changes to schedules"
        captionHidden
        columns={columnsIn(currency, timeZone)}
        rows={rows}
        rowKey={({ id }) => id}
        sort={{ key: state.sort, direction: state.direction }}
        hrefFor={({ key, direction }) =>
          addressOf({
            ...state,
            sort: changeSorts.find((one) => one === key) ?? 'state',
            direction,
            page: 1,
          })
        }
        empty={<Nothing isFiltered={isFiltered} />}
      />
      <Pagination
        page={state.page}
        pageSize={pageSize}
        total={total}
        noun="changes"
        hrefFor={(page) => addressOf({ ...state, page })}
      />
      {total > 0 && (
        <p className="no-print">
          <Link
            reloadDocument
            to={href('/changes.csv') + changesQuery({ ...state, page: 1 })}
            className="inline-flex min-h-11 items-center"
          >
            All {formatNoun(total, 'change')} as CSV
          </Link>
        </p>
      )}
    </>
  );
}

function Nothing({ isFiltered }: { isFiltered: boolean }) {
  return isFiltered ? (
    <EmptyState title="No change matches">
      <Link to={href('/changes')}>Show all changes</Link>
    </EmptyState>
  ) : (
    <EmptyState title="No change has been put forward yet">
      A lead puts a change forward from the page of a <Link to={href('/classes')}>class</Link>, under “What to
      do”. A manager then decides here.
    </EmptyState>
  );
}

function columnsIn(currency: string, timeZone: string): Column<ChangeRow>[] {
  return [
    {
      key: 'class',
      header: 'Change',
      sortable: true,
      rowHeader: true,
      cell: ({ id, className, clock, assets, ...change }) => (
        <span className="block md:min-w-48">
          <Link to={href('/changes/:changeId', { changeId: id })}>{className}</Link>
          <span className="block font-normal">
            {changeInWords(change, clock)}
            {assets > 0 && ` (${formatNoun(assets, 'asset')})`}
          </span>
        </span>
      ),
    },
    {
      key: 'saving',
      header: 'Expected saving',
      sortable: true,
      firstDirection: 'desc',
      cell: (change) => (
        <>
          {savingWords(change, currency)}
          {change.action === 'trial' && change.saving !== null && (
            <span className="text-grey block text-[0.85rem]">if it held for the whole class</span>
          )}
          {change.share !== null && (
            <span className="text-grey block text-[0.85rem]">sure: {formatPercent(change.share)}</span>
          )}
        </>
      ),
    },
    {
      key: 'put-forward',
      header: 'Put forward',
      sortable: true,
      firstDirection: 'desc',
      cell: ({ putForwardByName, putForwardAt }) =>
        `${putForwardByName}, ${formatDate(putForwardAt, timeZone, 'short')}`,
    },
    {
      key: 'state',
      header: 'State',
      sortable: true,
      cell: (change) => (
        <>
          <b>{stateWords[change.state]}</b>
          {change.decidedByName !== null && change.decidedAt !== null && (
            <span className="text-grey block text-[0.85rem]">
              {change.decidedByName}, {formatDate(change.decidedAt, timeZone, 'short')}
            </span>
          )}
        </>
      ),
    },
    {
      key: 'follow-up',
      header: 'What came of it',
      cell: ({ state, followUp, takesEffectOn }) => {
        if (followUp !== null) return followUpNames[followUp.word];
        if (state !== 'approved' || takesEffectOn === null) {
          return <span className="text-grey">not in effect</span>;
        }
        return `in effect from ${formatCalendarDate(takesEffectOn, 'short')}; the next night begins to follow it`;
      },
    },
  ];
}
