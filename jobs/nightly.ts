import {
  allHold,
  conclude,
  decideRun,
  runTestsOf,
  type RunDecisions,
  type RunTests,
} from '~/advice/conclude';
import { computeFindings } from '~/advice/compute-findings';
import { advanceAlarmState } from '~/advice/advance-alarm-state';
import type { AlarmState } from '~/advice/alarm-findings';
import type { ClassMarks } from '~/advice/class-facts';
import {
  dropUnfinishedAssessments,
  finishRun,
  insertAssessment,
  rejudgeAssessment,
} from '~/models/assessments.server';
import { listClassIds, readRecordsOfClasses, type ClassRecords } from '~/models/class-records.server';
import { layOutClass } from '~/models/lay-out-class';
import { laterNightSettled, loadAlarmStates } from '~/models/alarms.server';
import { readFollowedChanges, saveFollowUps } from '~/models/change-follow-ups.server';
import { readChangedClasses } from '~/models/class-news.server';
import type { Organisation } from '~/models/organisation.server';
import { failRun, recordProblem, startRun } from '~/models/job-runs.server';
import { withJobLock } from '~/models/job-lock.server';
import type { Database } from '../db/connection';
import type { FollowUp } from '~/advice/follow-up';
import { settleAlarms } from './nightly-alarms';
import { followUpsOf } from './nightly-follow-ups';
import { settleNews } from './nightly-news';

export const nightlyJob = 'nightly';

export type NightlyOutcome =
  | { state: 'finished'; runId: string; classes: number; problems: number }
  /** Another process is at it; nothing was done. */
  | { state: 'busy' };

interface NightlyOptions {
  /** The last complete day whose records count, 'YYYY-MM-DD'. */
  asOf: string;
  /** Zone, money and service level. */
  organisation: Pick<Organisation, 'timeZone' | 'currency' | 'serviceLevel'>;
  /** Told about each class that could not be computed. */
  onProblem?: (classId: string, reason: string) => void;
}

/**
 * Assesses every class as of a day and puts the results in force together.
 *
 * Records are read a few classes at a time within one snapshot, so that memory does not grow with the number of
 * classes and all classes are seen at the same moment. A class that cannot be computed is recorded with
 * its reason and keeps its previous assessment. If the process dies, the previous night stays in force.
 * The same records as of the same day give the same numbers to the last bit.
 */
export async function runNightly(db: Database, options: NightlyOptions): Promise<NightlyOutcome> {
  const { asOf } = options;
  const outcome = await withJobLock(db, nightlyJob, async (snapshot) => {
    const runId = await startRun(db, nightlyJob, asOf);
    try {
      await dropUnfinishedAssessments(db);
      const { computed, problems } = await assessAll(db, snapshot, { runId, asOf }, options);
      if (computed.length === 0 && problems > 0) {
        throw new Error(`None of the ${problems} classes could be computed.`);
      }
      await settleRun(db, { runId, asOf }, computed, options);
      return { state: 'finished' as const, runId, classes: computed.length, problems };
    } catch (error) {
      await failRun(db, runId, reasonOf(error));
      throw error;
    }
  });
  return outcome ?? { state: 'busy' };
}

interface Run {
  runId: string;
  asOf: string;
}

interface ComputedClass {
  classId: string;
  marks: ClassMarks;
  tests: RunTests;
  alarmState: AlarmState;
  followUps: { changeId: string; followUp: FollowUp }[];
}

/** Classes read together: few enough that memory stays flat, enough that the way to the database does not count. */
const classesAtOnce = 20;

/** The records of one class after the other. */
async function* classRecords(
  snapshot: Database,
  options: { timeZone: string; asOf: string },
): AsyncGenerator<ClassRecords> {
  const ids = await listClassIds(snapshot);
  for (let start = 0; start < ids.length; start += classesAtOnce) {
    yield* await readRecordsOfClasses(snapshot, ids.slice(start, start + classesAtOnce), options);
  }
}

async function assessAll(
  db: Database,
  snapshot: Database,
  run: Run,
  { organisation, onProblem }: NightlyOptions,
): Promise<{ computed: ComputedClass[]; problems: number }> {
  const computed: ComputedClass[] = [];
  let problems = 0;
  const { timeZone, currency, serviceLevel } = organisation;
  const alarmStates = await loadAlarmStates(snapshot);
  const followed = await readFollowedChanges(snapshot, run.asOf);
  for await (const records of classRecords(snapshot, { timeZone, asOf: run.asOf })) {
    const classId = records.assetClass.id;
    try {
      const evidence = layOutClass(records, { asOf: run.asOf, serviceLevel });
      const positions = [...evidence.positions, ...evidence.rateOnlyPositions];
      const alarmState = advanceAlarmState(alarmStates.get(classId) ?? null, positions);
      const findings = computeFindings(evidence, alarmState);
      const marks = marksOf(evidence);
      const tests = runTestsOf(findings);
      const conclusion = conclude(findings, { marks, currency }, allHold(tests));
      const followUps = followUpsOf(evidence, followed.get(classId) ?? []);
      await insertAssessment(db, run, classId, { findings, conclusion });
      computed.push({ classId, marks, tests, alarmState, followUps });
    } catch (error) {
      problems += 1;
      const reason = reasonOf(error);
      await recordProblem(db, run.runId, classId, reason);
      onProblem?.(classId, reason);
    }
  }
  return { computed, problems };
}

/** Judges anew the classes whose tests do not hold up among all of the run, then puts the run in force. */
async function settleRun(
  db: Database,
  run: Run,
  computed: readonly ComputedClass[],
  { organisation: { currency, timeZone } }: NightlyOptions,
): Promise<void> {
  const decisions = decideRun(computed.map(({ tests }) => tests));
  for (const [index, { classId, marks }] of computed.entries()) {
    const decision = decisions[index];
    if (decision === undefined || everythingHolds(decision)) continue;
    await rejudgeAssessment(db, run.runId, classId, (findings) =>
      conclude(findings, { marks, currency }, decision),
    );
  }
  await db.transaction(async (transaction) => {
    const isNewest = !(await laterNightSettled(transaction, run.asOf));
    const changed = isNewest ? await readChangedClasses(transaction, run, timeZone) : [];
    await finishRun(transaction, run.runId, run.asOf);
    if (!isNewest) return;
    const raised = await settleAlarms(transaction, run, computed);
    const followUps = await saveFollowUps(
      transaction,
      run.asOf,
      computed.flatMap((one) => one.followUps),
    );
    await settleNews(transaction, run.asOf, { changed, raised, followUps });
  });
}

function everythingHolds({ wearOutPasses, laplacePasses, modesWearOutPass }: RunDecisions): boolean {
  return wearOutPasses && laplacePasses && modesWearOutPass.every(Boolean);
}

function marksOf({ itemSingular, itemPlural, statutory, endangersPeople }: ClassMarks): ClassMarks {
  return { itemSingular, itemPlural, statutory, endangersPeople };
}

function reasonOf(error: unknown): string {
  return error instanceof Error ? error.message : String(error);
}
