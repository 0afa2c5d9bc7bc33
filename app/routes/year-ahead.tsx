import { Form, href, Link } from 'react-router';
import { Button } from '~/components/button';
import { DataTable, type Column } from '~/components/data-table';
import { EmptyState } from '~/components/empty-state';
import { Pagination } from '~/components/pagination';
import { SelectField } from '~/components/select-field';
import { yearAheadQuery, yearAheadSearch, type YearAheadState } from '~/components/year-ahead/search';
import { formatRoughMoney } from '~/advice/rough-money';
import { formatCount, formatNoun, formatPercent, formatTrimmed } from '~/format/number';
import { listSites } from '~/models/sites.server';
import { yearAheadSorts } from '~/models/year-ahead-sorts';
import { listYearAhead, type YearAheadRow, type YearAheadSum } from '~/models/year-ahead.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/year-ahead';

const pageSize = 50;

export const meta: Route.MetaFunction = () => [{ title: 'The year ahead · Intervale' }];

export async function loader({ context, request }: Route.LoaderArgs) {
  requireRole(context, request, 'lead', 'manager', 'admin');
  const state = yearAheadSearch.parse(Object.fromEntries(new URL(request.url).searchParams));
  const db = database();
  const [list, sites] = await Promise.all([
    listYearAhead(db, { ...state, siteId: state.site }, { ...state, pageSize }),
    listSites(db, 'all'),
  ]);
  const { currency, serviceLevel } = organisation(context);
  return { ...list, sites, state, currency, serviceLevel };
}

const addressOf = (state: YearAheadState) => href('/year-ahead') + yearAheadQuery(state);

export default function YearAhead({ loaderData }: Route.ComponentProps) {
  const { rows, total, sum, sites, state, currency, serviceLevel } = loaderData;
  const months = formatNoun(Number(state.months), 'month');
  return (
    <>
      <h1>The year ahead</h1>
      <p className="text-grey max-w-[62ch]">
        Failures to expect, from the ages of the items in place where age matters and from the rate where it
        does not, planned renewals included. Ranges hold 90 % of what may happen; spares last a lead time in{' '}
        {formatPercent(serviceLevel)} of cases.
      </p>
      <Form
        className="my-4 flex flex-wrap items-end gap-x-5 gap-y-2 [&_button]:mb-4"
        key={JSON.stringify(state)}
      >
        <SelectField
          label="Within"
          name="months"
          defaultValue={state.months}
          options={[
            { value: '1', label: '1 month' },
            { value: '3', label: '3 months' },
            { value: '12', label: '12 months' },
          ]}
        />
        <SelectField
          label="A row for each"
          name="by"
          defaultValue={state.by}
          options={[
            { value: 'class', label: 'class' },
            { value: 'site', label: 'class and site' },
          ]}
        />
        <SelectField
          label="Site"
          name="site"
          defaultValue={state.site ?? ''}
          emptyLabel="All sites"
          options={sites.map(({ id, name }) => ({ value: id, label: name }))}
        />
        <Button tone="quiet">Show</Button>
      </Form>
      {total > 0 && <Sum sum={sum} months={months} currency={currency} />}
      <DataTable
        caption={`Failures expected within ${months}`}
        captionHidden
        columns={columnsIn(state, currency)}
        rows={rows}
        rowKey={({ classId, siteName }) => `${classId} ${siteName}`}
        sort={{ key: state.sort, direction: state.direction }}
        hrefFor={({ key, direction }) =>
          addressOf({
            ...state,
            sort: yearAheadSorts.find((one) => one === key) ?? 'expected',
            direction,
            page: 1,
          })
        }
        empty={
          <EmptyState title="Nothing to go by yet">
            What is to come follows from the first night that assesses a class with something in service.
          </EmptyState>
        }
      />
      <Pagination
        page={state.page}
        pageSize={pageSize}
        total={total}
        noun="rows"
        hrefFor={(page) => addressOf({ ...state, page })}
      />
      {total > 0 && (
        <p className="no-print">
          <Link
            reloadDocument
            to={`${href('/year-ahead.csv')}${yearAheadQuery({ ...state, page: 1 })}`}
            className="inline-flex min-h-11 items-center"
          >
            All {formatCount(total)} rows as CSV
          </Link>
        </p>
      )}
    </>
  );
}

function Sum({ sum, months, currency }: { sum: YearAheadSum; months: string; currency: string }) {
  const { mean, low, high, costMinor, withoutCost } = sum;
  return (
    <p className="mb-3 max-w-[62ch]">
      <strong>
        About {formatTrimmed(mean)} failures in all within {months}
      </strong>{' '}
      ({formatCount(low)} to {formatCount(high)} if classes fail independently of each other; the ranges below
      do not add up).
      {costMinor !== null && ` They would cost about ${formatRoughMoney(costMinor, currency)}`}
      {costMinor !== null &&
        (withoutCost > 0 ? `, ${formatNoun(withoutCost, 'row')} without a cost left out.` : '.')}
    </p>
  );
}

function columnsIn({ by, site }: YearAheadState, currency: string): Column<YearAheadRow>[] {
  return [
    {
      key: 'class',
      header: 'Class',
      sortable: true,
      rowHeader: true,
      cell: ({ classId, className }) => (
        <Link to={href('/classes/:classId', { classId })} className="block md:min-w-40">
          {className}
        </Link>
      ),
    },
    ...(by === 'site' || site !== undefined
      ? [
          {
            key: 'site',
            header: 'Site',
            sortable: true,
            cell: ({ siteName }: YearAheadRow) => siteName,
          },
        ]
      : []),
    {
      key: 'positions',
      header: 'Items',
      sortable: true,
      firstDirection: 'desc',
      align: 'end',
      cell: ({ positions }) => formatCount(positions),
    },
    {
      key: 'expected',
      header: 'Failures expected',
      sortable: true,
      firstDirection: 'desc',
      align: 'end',
      cell: ({ mean, low, high }) => (
        <>
          <b className="tabular">{formatTrimmed(mean)}</b>{' '}
          <span className="text-grey whitespace-nowrap">
            ({formatCount(low)} to {formatCount(high)})
          </span>
        </>
      ),
    },
    {
      key: 'spares',
      header: 'Spares to hold',
      sortable: true,
      firstDirection: 'desc',
      align: 'end',
      cell: ({ spares, leadTimeDays }) =>
        spares === null ? (
          <span className="text-grey">no lead time given</span>
        ) : (
          <>
            <b className="tabular">{formatCount(spares)}</b>
            <span className="text-grey"> for {formatNoun(leadTimeDays ?? 0, 'day')}</span>
          </>
        ),
    },
    {
      key: 'cost',
      header: 'They would cost',
      sortable: true,
      firstDirection: 'desc',
      align: 'end',
      cell: ({ costMinor }) =>
        costMinor === null ? (
          <span className="text-grey">no cost given</span>
        ) : (
          formatRoughMoney(costMinor, currency)
        ),
    },
  ];
}
