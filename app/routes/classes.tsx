import { Form, href, Link, useNavigation } from 'react-router';
import { cautionNames } from '~/advice/caution-names';
import type { CautionCode } from '~/advice/conclusion';
import { clockUnit } from '~/advice/clock-unit';
import { verdicts } from '~/advice/verdict';
import { Button } from '~/components/button';
import { classesFilter, classesQuery, classesSearch, type ClassesState } from '~/components/classes/search';
import { DataTable, type Column } from '~/components/data-table';
import { EmptyState } from '~/components/empty-state';
import { Estimate } from '~/components/estimate';
import { formatCalendarDate } from '~/format/date';
import { formatClock, formatCount, formatFixed, formatNoun, formatTrimmed } from '~/format/number';
import { Pagination } from '~/components/pagination';
import { SelectField } from '~/components/select-field';
import { TrendWord } from '~/components/trend-word';
import { VerdictWord } from '~/components/verdict-word';
import { listClasses, type ClassListRow } from '~/models/class-list.server';
import { classSortKeys, type ClassSortKey } from '~/models/class-sort';
import { listSites } from '~/models/sites.server';
import { requireViewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/classes';

const pageSize = 50;

export const meta: Route.MetaFunction = () => [{ title: 'Classes · Intervale' }];

export async function loader({ context, request }: Route.LoaderArgs) {
  const viewer = requireViewer(context, request);
  const state = classesSearch.parse(Object.fromEntries(new URL(request.url).searchParams));
  const db = database();
  const [{ rows, total }, sites] = await Promise.all([
    listClasses(db, viewer.siteIds, { ...classesFilter(state), page: state.page, pageSize }),
    listSites(db, viewer.siteIds),
  ]);
  return { rows, total, sites, state };
}

function sortKeyOf(columnKey: string): ClassSortKey {
  return classSortKeys.find((key) => key === columnKey) ?? 'attention';
}

const addressOf = (state: ClassesState) => href('/classes') + classesQuery(state);

export default function Classes({ loaderData }: Route.ComponentProps) {
  const { rows, total, sites, state } = loaderData;
  const isFiltered = Boolean(state.site ?? state.verdict ?? state.statutory);
  const nights = rows.map(({ assessment }) => assessment?.asOf).filter((asOf) => asOf !== undefined);
  const newest = nights.sort().at(-1);
  return (
    <>
      <h1>Classes</h1>
      <p className="text-grey">
        {newest === undefined
          ? 'Nothing has been assessed yet; the first results come with the next night.'
          : `As of the end of ${formatCalendarDate(newest)}. Numbers are for all sites together.`}
      </p>
      <Filters sites={sites} state={state} />
      <DataTable
        caption="Asset classes with what the records say of them"
        captionHidden
        columns={columns}
        rows={rows}
        rowKey={({ id }) => id}
        sort={state.sort === 'attention' ? undefined : { key: state.sort, direction: state.direction }}
        hrefFor={({ key, direction }) => addressOf({ ...state, sort: sortKeyOf(key), direction, page: 1 })}
        empty={<Nothing isFiltered={isFiltered} />}
      />
      <Pagination
        page={state.page}
        pageSize={pageSize}
        total={total}
        noun="classes"
        hrefFor={(page) => addressOf({ ...state, page })}
      />
      {total > 0 && (
        <p className="no-print">
          <Link
            reloadDocument
            to={href('/classes.csv') + classesQuery({ ...state, page: 1 })}
            className="inline-flex min-h-11 items-center"
          >
            All {formatNoun(total, 'class', 'classes')} as CSV
          </Link>
        </p>
      )}
    </>
  );
}

function Filters({ sites, state }: { sites: readonly { id: string; name: string }[]; state: ClassesState }) {
  const isLoading = useNavigation().location?.pathname === href('/classes');
  return (
    <Form
      className="my-4 flex flex-wrap items-end gap-x-5 gap-y-2 [&_button]:mb-4"
      key={JSON.stringify(state)}
    >
      <SelectField
        label="Site"
        name="site"
        defaultValue={state.site ?? ''}
        options={[
          { value: '', label: 'All sites' },
          ...sites.map(({ id, name }) => ({ value: id, label: name })),
        ]}
      />
      <SelectField
        label="Verdict"
        name="verdict"
        defaultValue={state.verdict ?? ''}
        options={[
          { value: '', label: 'Any' },
          ...verdicts.map((verdict) => ({ value: verdict, label: verdict })),
          { value: 'not-assessed', label: 'not assessed yet' },
        ]}
      />
      <SelectField
        label="Statutory"
        name="statutory"
        defaultValue={state.statutory ?? ''}
        options={[
          { value: '', label: 'Either' },
          { value: 'yes', label: 'Statutory' },
          { value: 'no', label: 'Not statutory' },
        ]}
      />
      <Button type="submit" tone="quiet">
        {isLoading ? 'Loading …' : 'Show'}
      </Button>
    </Form>
  );
}

function Nothing({ isFiltered }: { isFiltered: boolean }) {
  return isFiltered ? (
    <EmptyState title="No class matches">
      <Link to={href('/classes')}>Show all classes</Link>
    </EmptyState>
  ) : (
    <EmptyState title="No classes yet">
      Classes come with the register of assets. An admin or a lead can{' '}
      <Link to={href('/imports/new')}>import a register</Link>.
    </EmptyState>
  );
}

const columns: Column<ClassListRow>[] = [
  {
    key: 'name',
    header: 'Class',
    sortable: true,
    rowHeader: true,
    cell: ({ id, name, statutory, endangersPeople }) => (
      <span className="block md:min-w-40">
        <Link to={href('/classes/:classId', { classId: id })}>{name}</Link>
        {(statutory || endangersPeople) && (
          <span className="text-danger block text-[0.85rem] font-normal">
            {[statutory && 'statutory', endangersPeople && 'endangers people'].filter(Boolean).join(', ')}
          </span>
        )}
      </span>
    ),
  },
  {
    key: 'verdict',
    header: 'Verdict',
    sortable: true,
    cell: ({ assessment }) =>
      assessment === null ? (
        <span className="text-grey">not assessed yet</span>
      ) : (
        <VerdictWord verdict={assessment.verdict} />
      ),
  },
  {
    key: 'trend',
    header: 'Trend',
    sortable: true,
    cell: ({ assessment }) => assessment && <TrendWord trend={assessment.trend} />,
  },
  {
    key: 'recent',
    header: 'Last 12 months',
    sortable: true,
    firstDirection: 'desc',
    align: 'end',
    cell: ({ assessment }) =>
      assessment && (
        <InExposure
          failures={assessment.summary.failuresLastYear}
          exposure={assessment.summary.exposureLastYear}
          clock={assessment.summary.clock}
        />
      ),
  },
  {
    key: 'failures',
    header: 'In all',
    sortable: true,
    firstDirection: 'desc',
    align: 'end',
    cell: ({ assessment }) =>
      assessment && (
        <InExposure
          failures={assessment.failures}
          exposure={assessment.summary.exposure}
          clock={assessment.summary.clock}
        />
      ),
  },
  {
    key: 'mtbf',
    header: 'One failure in (MTBF)',
    sortable: true,
    align: 'end',
    cell: ({ assessment }) => {
      if (assessment === null) return null;
      const { meanTime, meanTimeInterval, clock } = assessment.summary;
      return (
        <Estimate
          value={meanTime}
          low={meanTimeInterval.low}
          high={meanTimeInterval.high}
          format={(value) => formatClock(value, clockUnit(clock))}
          formatEnd={formatTrimmed}
        />
      );
    },
  },
  {
    key: 'slope',
    header: 'Slope',
    sortable: true,
    firstDirection: 'desc',
    align: 'end',
    cell: ({ assessment }) =>
      assessment && (
        <Estimate
          value={assessment.summary.slope}
          low={assessment.summary.slopeInterval.low}
          high={assessment.summary.slopeInterval.high}
          format={(value) => formatFixed(value, 2)}
        />
      ),
  },
  {
    key: 'cautions',
    header: 'Cautions',
    cell: ({ assessment }) =>
      assessment && <span className="text-[0.9rem]">{cautionsInShort(assessment.cautionCodes)}</span>,
  },
];

/** The marks of law and danger stand under the class's name already. */
function cautionsInShort(codes: readonly CautionCode[]): string {
  const names = codes
    .filter((code) => code !== 'statutory' && code !== 'endangers-people')
    .map((code) => cautionNames[code]);
  return names.length === 0 ? 'none' : names.join(', ');
}

function InExposure({
  failures,
  exposure,
  clock,
}: {
  failures: number;
  exposure: number;
  clock: 'calendar-days' | 'operating-hours';
}) {
  return (
    <>
      <b className="tabular">{formatCount(failures)}</b>
      <span className="text-grey block text-[0.85rem] whitespace-nowrap">
        in{' '}
        {clock === 'operating-hours'
          ? formatClock(exposure, 'hours')
          : formatNoun(Math.round(exposure / 365.25), 'item-year')}
      </span>
    </>
  );
}
