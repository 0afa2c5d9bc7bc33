import { randomUUID } from 'node:crypto';
import type { Database } from '../../db/connection';
import { currentAsOf } from './assessments.server';
import { effectOfCorrection, type CorrectionEffect } from './correction-effect.server';
import {
  canBeSaved,
  planCorrection,
  type ChangedMeanwhile,
  type CorrectedRecord,
  type CorrectionPlan,
  type Present,
  type SeenRecord,
} from './correction-plan.server';
import type { Organisation } from './organisation.server';
import type { Correction } from './record-correction';

/** How many records a preview lists; the rest is counted. */
const listed = 50;

/** What a person is shown of a correction before it is saved, with all it takes to save it. */
export interface CorrectionPreview {
  readonly correctionId: string;
  readonly correction: Correction;
  /** "id:version" of all that were chosen, joined by commas. */
  readonly chosen: string;
  /** Whether they were chosen as all that match. */
  readonly all: boolean;
  /** The first of them, refused ones before the others; `total` is how many would be corrected. */
  readonly records: CorrectedRecord[];
  readonly total: number;
  readonly unchanged: number;
  readonly refused: number;
  readonly meanwhile: ChangedMeanwhile[];
  /** A mode it names is not on the class's list any more. */
  readonly modeGone: boolean;
  readonly maySave: boolean;
  /** Null where nothing would be written. */
  readonly effect: CorrectionEffect | null;
}

interface Wanted {
  readonly seen: readonly SeenRecord[];
  readonly correction: Correction;
  readonly all: boolean;
  /** Made anew where there is none yet. */
  readonly correctionId?: string;
}

interface Surroundings extends Present {
  organisation: Pick<Organisation, 'timeZone' | 'currency' | 'serviceLevel'>;
  personId: string;
}

/**
 * What a correction would do to the records of a class and to its verdict; nothing of it stays.
 *
 * @param options.leaveOut whether records that cannot be corrected so are left out of the choice.
 */
export async function previewCorrection(
  db: Database,
  classId: string,
  wanted: Wanted,
  { leaveOut = false, ...surroundings }: Surroundings & { leaveOut?: boolean },
): Promise<CorrectionPreview> {
  const plan = await planCorrection(db, classId, wanted, surroundings);
  if (leaveOut) {
    const refused = new Set(plan.records.filter(({ refusal }) => refusal !== null).map(({ id }) => id));
    const seen = wanted.seen.filter(({ id }) => !refused.has(id));
    return previewCorrection(db, classId, { ...wanted, seen, all: false }, surroundings);
  }
  const writable = plan.records.filter(({ refusal }) => refusal === null);
  if (writable.length === 0 || plan.modeGone) return previewOfPlan(plan, wanted);
  const asOf = (await currentAsOf(db, classId)) ?? surroundings.today;
  const effect = await effectOfCorrection(db, classId, writable, { ...surroundings, asOf });
  return { ...previewOfPlan(plan, wanted), effect };
}

/** The same without the verdict: for a correction that could not be saved as it was. */
export function previewOfPlan(
  plan: CorrectionPlan,
  { seen, correction, all, correctionId = randomUUID() }: Wanted,
): CorrectionPreview {
  const refused = plan.records.filter(({ refusal }) => refusal !== null);
  const others = plan.records.filter(({ refusal }) => refusal === null);
  return {
    correctionId,
    correction,
    chosen: seen.map(({ id, version }) => `${id}:${version}`).join(','),
    all,
    records: [...refused, ...others].slice(0, listed),
    total: plan.records.length,
    unchanged: plan.unchanged,
    refused: refused.length,
    meanwhile: plan.meanwhile,
    modeGone: plan.modeGone,
    maySave: canBeSaved(plan, correction),
    effect: null,
  };
}
