import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { currentAssessment, insertAssessment } from '~/models/assessments.server';
import { withJobLock } from '~/models/job-lock.server';
import { currentProblem, lastFinishedDay, listProblems, listRuns, startRun } from '~/models/job-runs.server';
import { nightlyJob, runNightly } from '../../jobs/nightly';
import type { Database } from '../../db/connection';
import { addSite } from '../support/people';
import { addAsset, addClass, addFailure, addPlannedWork } from '../support/records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';

let test: TestDatabase;
let db: Database;
let siteId: string;

beforeAll(async () => {
  test = await createTestDatabase();
  db = test.database;
  siteId = await addSite(db, 'Saltmarsh Depot');
});
afterAll(() => test.drop());

let classId: string;
beforeEach(async () => {
  classId = await addClass(db, `Circulation pump ${Math.floor(performance.now() * 1000)}`);
});
afterEach(async () => {
  await db.raw('truncate failures, planned_work, assets, asset_classes, job_runs, assessments cascade');
});

const organisation = { timeZone: 'Europe/London', currency: 'GBP', serviceLevel: 0.95 };
const night = { asOf: '2026-06-30', organisation };

/** Pumps that fail at ages around a year and a half, with a planned renewal here and there. */
async function fillClass(): Promise<string[]> {
  const assetIds: string[] = [];
  for (let index = 0; index < 8; index += 1) {
    const assetId = await addAsset(db, { classId, siteId }, `SD-PUMP-${index}-${classId.slice(0, 8)}`);
    await addFailure(db, { assetId, classId }, `2025-0${1 + (index % 6)}-1${index}`);
    await addFailure(db, { assetId, classId }, `2026-0${1 + (index % 5)}-2${index}`);
    if (index % 3 === 0) await addPlannedWork(db, { assetId, classId }, `2025-11-0${index + 1}`);
    assetIds.push(assetId);
  }
  return assetIds;
}

async function storedRows(): Promise<string> {
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select class_id, as_of, verdict, trend, failures, caution_codes, summary::text, detail::text
       from assessments order by class_id`,
  );
  return JSON.stringify(rows);
}

describe('the nightly job', () => {
  it('assesses every class and puts the result in force', async () => {
    await fillClass();
    const outcome = await runNightly(db, night);
    expect(outcome).toMatchObject({ state: 'finished', classes: 1, problems: 0 });
    const assessment = await currentAssessment(db, classId);
    expect(assessment?.asOf).toBe(night.asOf);
    expect(assessment?.findings.rate.overall.failures).toBe(16);
    expect(await lastFinishedDay(db, nightlyJob)).toBe(night.asOf);
  });

  it('counts as records stand: voided out, outside causes as censoring, only up to the day asked for', async () => {
    const [first, second, third] = await fillClass();
    await addFailure(db, { assetId: first!, classId }, '2026-06-05', {
      voided_at: new Date(),
      void_reason: 'wrong pump',
    });
    await addFailure(db, { assetId: second!, classId }, '2026-06-06', { outside_cause: 'flooded' });
    await addFailure(db, { assetId: third!, classId }, '2026-07-01');
    await runNightly(db, night);
    const { findings } = (await currentAssessment(db, classId))!;
    expect(findings.rate.overall.failures).toBe(16);
    expect(Object.fromEntries(findings.leftOut.map(({ reason, count }) => [reason, count]))).toMatchObject({
      voided: 1,
      'outside-cause': 1,
      'after-watch': 1,
    });
  });

  it('stores the same numbers to the last bit when run again as of the same day', async () => {
    await fillClass();
    await runNightly(db, night);
    const first = await storedRows();
    await runNightly(db, night);
    expect(await storedRows()).toBe(first);
  });

  it('keeps an earlier night asked for later from taking the place of the newest', async () => {
    await fillClass();
    await runNightly(db, night);
    await runNightly(db, { ...night, asOf: '2026-03-31' });
    expect((await currentAssessment(db, classId))?.asOf).toBe(night.asOf);
    const { rows } = await db.raw<{ rows: { asOf: string }[] }>(
      'select as_of as "asOf" from assessments order by as_of',
    );
    expect(rows.map(({ asOf }) => asOf)).toEqual(['2026-03-31', night.asOf]);
  });

  it('records a class that cannot be computed with its reason, and computes the others', async () => {
    await fillClass();
    const odd = await addClass(db, 'Odd class');
    await db.raw(`alter table assessments add constraint refuse check (class_id <> '${odd}')`);
    const told: string[] = [];
    const outcome = await runNightly(db, { ...night, onProblem: (id) => told.push(id) });
    if (outcome.state !== 'finished') throw new Error('expected a finished run');
    await db.raw('alter table assessments drop constraint refuse');
    const problems = (await listProblems(db, [outcome.runId])).get(outcome.runId) ?? [];
    expect(outcome).toMatchObject({ classes: 1, problems: 1 });
    expect(told).toEqual([odd]);
    expect(problems).toMatchObject([{ classId: odd, className: 'Odd class' }]);
    expect(problems[0]?.reason).toContain('refuse');
    expect(await currentProblem(db, odd)).toBe(problems[0]?.reason);
    expect(await currentAssessment(db, odd)).toBeNull();
    expect(await currentAssessment(db, classId)).not.toBeNull();
  });

  it('fails whole when not one class can be computed', async () => {
    await fillClass();
    await db.raw(`alter table assessments add constraint refuse check (as_of < '2026-01-01')`);
    try {
      await expect(runNightly(db, night)).rejects.toThrow('None of the 1 classes could be computed.');
      expect((await listRuns(db, 1))[0]).toMatchObject({ state: 'failed' });
    } finally {
      await db.raw('alter table assessments drop constraint refuse');
    }
  });

  it('leaves the previous night in force when a run is cut off, and the next one completes', async () => {
    await fillClass();
    await runNightly(db, night);
    const before = await currentAssessment(db, classId);
    // What a process leaves behind that dies half-way: a run that never ends, with some of its assessments.
    const cutOff = await startRun(db, nightlyJob, '2026-07-01');
    await insertAssessment(db, { runId: cutOff, asOf: '2026-07-01' }, classId, before!);
    expect(await currentAssessment(db, classId)).toEqual(before);

    await runNightly(db, { ...night, asOf: '2026-07-01' });
    expect((await currentAssessment(db, classId))?.asOf).toBe('2026-07-01');
    const runs = await listRuns(db, 10);
    expect(runs.map(({ state }) => state)).toEqual(['finished', 'abandoned', 'finished']);
    const { rows } = await db.raw<{ rows: { total: number }[] }>(
      'select count(*) as total from assessments where run_id = ?',
      [cutOff],
    );
    expect(rows[0]?.total).toBe(0);
  });

  it('leaves the work to the one already at it', async () => {
    await fillClass();
    const outcome = await withJobLock(db, nightlyJob, () => runNightly(db, night));
    expect(outcome).toEqual({ state: 'busy' });
    expect(await listRuns(db, 10)).toEqual([]);
  });

  it('says that it failed when the database is lost, and leaves the previous night in force', async () => {
    await fillClass();
    await runNightly(db, night);
    const before = await currentAssessment(db, classId);
    await db.raw('alter table job_run_problems rename to elsewhere');
    await db.raw(`alter table assessments add constraint refuse check (as_of < '2026-07-01')`);
    try {
      await expect(runNightly(db, { ...night, asOf: '2026-07-01' })).rejects.toThrow();
      expect((await listRuns(db, 1))[0]).toMatchObject({ state: 'failed' });
      expect(await currentAssessment(db, classId)).toEqual(before);
    } finally {
      await db.raw('alter table elsewhere rename to job_run_problems');
      await db.raw('alter table assessments drop constraint refuse');
    }
  });
});

describe('numbers at the edge, from records to assessment', () => {
  async function assessed(): Promise<NonNullable<Awaited<ReturnType<typeof currentAssessment>>>> {
    await runNightly(db, night);
    return (await currentAssessment(db, classId))!;
  }

  it('a class without assets, without a failure, with one failure', async () => {
    expect((await assessed()).findings.extent.positions).toBe(0);
    const assetId = await addAsset(db, { classId, siteId }, 'SD-A-1');
    expect((await assessed()).findings.rate.overall).toMatchObject({ failures: 0, meanTime: null });
    await addFailure(db, { assetId, classId }, '2025-05-05');
    expect((await assessed()).conclusion.verdict).toBe('undecided');
  });

  it('two failures of one position on one day count both, the second at half a day of age', async () => {
    const assetId = await addAsset(db, { classId, siteId }, 'SD-A-2');
    await addFailure(db, { assetId, classId }, '2025-05-05');
    await addFailure(db, { assetId, classId }, '2025-05-05');
    const { findings } = await assessed();
    expect(findings.rate.overall.failures).toBe(2);
    expect(findings.extent.zeroLives).toBe(1);
  });

  it('a failure on the day of going into service, all failures on one day', async () => {
    for (const tag of ['SD-B-1', 'SD-B-2', 'SD-B-3', 'SD-B-4', 'SD-B-5']) {
      const assetId = await addAsset(db, { classId, siteId }, tag);
      await addFailure(db, { assetId, classId }, '2024-01-01');
    }
    const { findings, conclusion } = await assessed();
    expect(findings.extent.zeroLives).toBe(5);
    expect(conclusion.verdict).toBeDefined();
    expect(JSON.stringify(findings)).not.toMatch(/null,"scale"|NaN|Infinity/);
  });

  it('a million operating hours', async () => {
    await db('asset_classes').where({ id: classId }).update({ clock: 'operating-hours' });
    for (const tag of ['SD-C-1', 'SD-C-2', 'SD-C-3']) {
      const assetId = await addAsset(db, { classId, siteId }, tag, {
        in_service_on: '1900-01-01',
        watched_from: '1900-01-01',
        duty_hours_per_day: 24,
      });
      await addFailure(db, { assetId, classId }, '2015-01-01');
      await addFailure(db, { assetId, classId }, '2020-01-01');
    }
    const { findings } = await assessed();
    expect(findings.life.longestAge).toBeGreaterThan(1e6);
    expect(findings.life.fit.kind).toBe('fit');
  });
});
