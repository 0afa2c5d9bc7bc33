import type { Database } from '../../db/connection';

export type JobRunState = 'running' | 'finished' | 'failed' | 'abandoned';

export interface JobRun {
  id: string;
  job: string;
  asOf: string | null;
  state: JobRunState;
  startedAt: Date;
  finishedAt: Date | null;
  classesComputed: number;
  problem: string | null;
}

export interface JobRunProblem {
  classId: string;
  className: string;
  reason: string;
}

const columns = `id, job, as_of as "asOf", state, started_at as "startedAt", finished_at as "finishedAt",
  classes_computed as "classesComputed", problem`;

/**
 * Starts a run and marks earlier runs of the job that never ended as abandoned. Call it only while
 * holding the job's lock: then nobody else can be running.
 */
export async function startRun(db: Database, job: string, asOf: string): Promise<string> {
  await db.raw(
    `update job_runs set state = 'abandoned', finished_at = now(),
            problem = 'The run was cut off before it ended. What it had computed was not used.'
      where job = ? and state = 'running'`,
    [job],
  );
  const { rows } = await db.raw<{ rows: { id: string }[] }>(
    `insert into job_runs (job, as_of, state) values (?, ?, 'running') returning id`,
    [job, asOf],
  );
  return rows[0]!.id;
}

export async function failRun(db: Database, runId: string, problem: string): Promise<void> {
  await db.raw(`update job_runs set state = 'failed', finished_at = now(), problem = ? where id = ?`, [
    problem,
    runId,
  ]);
}

/** Records that one class could not be computed; the run goes on. */
export async function recordProblem(
  db: Database,
  runId: string,
  classId: string,
  reason: string,
): Promise<void> {
  await db.raw(`insert into job_run_problems (run_id, class_id, reason) values (?, ?, ?)`, [
    runId,
    classId,
    reason,
  ]);
}

/** The day up to which the job has last finished, or null when it never has. */
export async function lastFinishedDay(db: Database, job: string): Promise<string | null> {
  const { rows } = await db.raw<{ rows: { asOf: string | null }[] }>(
    `select max(as_of) as "asOf" from job_runs where job = ? and state = 'finished'`,
    [job],
  );
  return rows[0]?.asOf ?? null;
}

/** Newest first. */
export async function listRuns(db: Database, limit: number): Promise<JobRun[]> {
  const { rows } = await db.raw<{ rows: JobRun[] }>(
    `select ${columns} from job_runs order by started_at desc, id limit ?`,
    [limit],
  );
  return rows;
}

export async function listProblems(
  db: Database,
  runIds: readonly string[],
): Promise<Map<string, JobRunProblem[]>> {
  const { rows } = await db.raw<{ rows: (JobRunProblem & { runId: string })[] }>(
    `select p.run_id as "runId", p.class_id as "classId", c.name as "className", p.reason
       from job_run_problems p join asset_classes c on c.id = p.class_id
      where p.run_id = any(?) order by lower(c.name)`,
    [[...runIds]],
  );
  const byRun = new Map<string, JobRunProblem[]>(runIds.map((id) => [id, []]));
  for (const { runId, ...problem } of rows) byRun.get(runId)?.push(problem);
  return byRun;
}

/** What the newest finished run could not compute of one class; null when it could. */
export async function currentProblem(db: Database, classId: string): Promise<string | null> {
  const { rows } = await db.raw<{ rows: { reason: string }[] }>(
    `select p.reason from job_run_problems p
      where p.class_id = :classId and p.run_id =
        (select id from job_runs where job = 'nightly' and state = 'finished'
          order by as_of desc, finished_at desc limit 1)`,
    { classId },
  );
  return rows[0]?.reason ?? null;
}

export interface LastNight {
  asOf: string;
  finishedAt: Date | null;
  classes: number;
  /** Classes it could not compute. */
  problems: number;
}

/** The night that is in force; null before the first. */
export async function lastNight(db: Database): Promise<LastNight | null> {
  const { rows } = await db.raw<{ rows: LastNight[] }>(
    `select r.as_of as "asOf", r.finished_at as "finishedAt", r.classes_computed as classes,
            (select count(*) from job_run_problems p where p.run_id = r.id) as problems
       from job_runs r
      where r.job = 'nightly' and r.state = 'finished'
      order by r.as_of desc, r.finished_at desc limit 1`,
  );
  return rows[0] ?? null;
}
