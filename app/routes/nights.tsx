import { href, Link } from 'react-router';
import { EmptyState } from '~/components/empty-state';
import { formatCalendarDate, formatDateTime } from '~/format/date';
import { formatCount, formatNoun, formatTrimmed } from '~/format/number';
import { DataTable, type Column } from '~/components/data-table';
import { listProblems, listRuns, type JobRun, type JobRunProblem } from '~/models/job-runs.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/nights';

const shown = 60;

export const meta: Route.MetaFunction = () => [{ title: 'Nights · Intervale' }];

export async function loader({ context, request }: Route.LoaderArgs) {
  requireRole(context, request, 'lead', 'admin');
  const db = database();
  const runs = await listRuns(db, shown);
  const problems = await listProblems(
    db,
    runs.map(({ id }) => id),
  );
  return {
    runs: runs.map((run) => ({ ...run, problems: problems.get(run.id) ?? [] })),
    timeZone: organisation(context).timeZone,
  };
}

type Night = JobRun & { problems: JobRunProblem[] };

export default function Nights({ loaderData }: Route.ComponentProps) {
  const { runs, timeZone } = loaderData;
  return (
    <>
      <h1>Nights</h1>
      <p className="text-grey">
        Each night every class is assessed anew. The newest {formatCount(shown)} runs, and what they could not
        compute.
      </p>
      <DataTable
        caption="Nightly runs"
        captionHidden
        columns={columnsIn(timeZone)}
        rows={runs}
        rowKey={({ id }) => id}
        empty={
          <EmptyState title="No night yet">
            The first assessment runs by itself in the coming night, or now with{' '}
            <code>npm run job -- nightly</code>.
          </EmptyState>
        }
      />
    </>
  );
}

function columnsIn(timeZone: string): Column<Night>[] {
  return [
    {
      key: 'as-of',
      header: 'As of the end of',
      rowHeader: true,
      cell: ({ asOf }) => (asOf === null ? 'not known' : formatCalendarDate(asOf, 'short')),
    },
    {
      key: 'started',
      header: 'Started',
      cell: ({ startedAt }) => formatDateTime(startedAt, timeZone, 'short'),
    },
    { key: 'took', header: 'Took', align: 'end', cell: took },
    {
      key: 'state',
      header: 'State',
      cell: ({ state, problem }) => (
        <>
          <span className={state === 'finished' || state === 'running' ? undefined : 'text-danger font-bold'}>
            {stateWords[state]}
          </span>
          {problem !== null && <span className="text-grey block text-[0.9rem]">{problem}</span>}
        </>
      ),
    },
    {
      key: 'classes',
      header: 'Classes',
      align: 'end',
      cell: ({ classesComputed }) => formatCount(classesComputed),
    },
    {
      key: 'problems',
      header: 'Not computed',
      cell: ({ problems }) =>
        problems.length === 0 ? (
          'none'
        ) : (
          <details>
            <summary>{formatNoun(problems.length, 'class', 'classes')}</summary>
            <ul>
              {problems.map(({ classId, className, reason }) => (
                <li key={classId}>
                  <Link to={href('/classes/:classId', { classId })}>{className}</Link>: {reason}
                </li>
              ))}
            </ul>
          </details>
        ),
    },
  ];
}

const stateWords: Record<JobRun['state'], string> = {
  running: 'running',
  finished: 'finished',
  failed: 'failed; the night before stays in force',
  abandoned: 'cut off; the night before stays in force',
};

function took({ startedAt, finishedAt, state }: Night): string {
  if (finishedAt === null || state === 'abandoned') return '';
  return `${formatTrimmed((finishedAt.getTime() - startedAt.getTime()) / 1000)} s`;
}
