import { advanceAlarmState } from '~/advice/advance-alarm-state';
import { computeFindings } from '~/advice/compute-findings';
import { allHold, conclude, runTestsOf } from '~/advice/conclude';
import type { Conclusion } from '~/advice/conclusion';
import type { Findings } from '~/advice/findings';
import type { Database } from '../../db/connection';
import { readClassRecords } from './class-records.server';
import { layOutClass } from './lay-out-class';
import type { Organisation } from './organisation.server';
import type { CorrectedRecord } from './correction-plan.server';
import { writeRecords } from './correction-write.server';
import { writesOf } from './record-corrections.server';

/** What people decide by, of a class as it stands in the records. */
export interface ClassStanding {
  readonly verdict: Conclusion['verdict'];
  readonly trend: Conclusion['trend'];
  readonly failures: number;
  readonly fit: Findings['life']['fit'];
  readonly proposal: string;
  readonly cautions: Conclusion['cautions'][number]['code'][];
}

/** The same class on its records as they are and as they would be. */
export interface CorrectionEffect {
  /** The day both are judged as of. */
  readonly asOf: string;
  readonly before: ClassStanding;
  readonly after: ClassStanding;
}

type Settings = Pick<Organisation, 'timeZone' | 'currency' | 'serviceLevel'>;

/**
 * A class judged on its records as they are and as a correction would leave them, both in the same way and as of the same
 * day. The correction is written within a transaction that is rolled back: nothing of it stays.
 *
 * What all classes together decide (the control of false discoveries) is left to the night, on both sides alike.
 */
export async function effectOfCorrection(
  db: Database,
  classId: string,
  records: readonly CorrectedRecord[],
  options: { asOf: string; organisation: Settings; personId: string; now: Date },
): Promise<CorrectionEffect> {
  const transaction = await db.transaction();
  try {
    const before = await standingOf(transaction, classId, options);
    await writeRecords(transaction, writesOf(records, options), options.now);
    return { asOf: options.asOf, before, after: await standingOf(transaction, classId, options) };
  } finally {
    await transaction.rollback();
  }
}

async function standingOf(
  db: Database,
  classId: string,
  { asOf, organisation }: { asOf: string; organisation: Settings },
): Promise<ClassStanding> {
  const { timeZone, currency, serviceLevel } = organisation;
  const records = await readClassRecords(db, classId, { timeZone, asOf });
  const evidence = layOutClass(records, { asOf, serviceLevel });
  const positions = [...evidence.positions, ...evidence.rateOnlyPositions];
  const findings = computeFindings(evidence, advanceAlarmState(null, positions));
  const { itemSingular, itemPlural, statutory, endangersPeople } = evidence;
  const marks = { itemSingular, itemPlural, statutory, endangersPeople };
  const conclusion = conclude(findings, { marks, currency }, allHold(runTestsOf(findings)));
  return {
    verdict: conclusion.verdict,
    trend: conclusion.trend,
    failures: findings.rate.overall.failures,
    fit: findings.life.fit,
    proposal: conclusion.proposal.words.title,
    cautions: conclusion.cautions.map(({ code }) => code),
  };
}
