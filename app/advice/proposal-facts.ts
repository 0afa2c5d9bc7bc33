import type { ClassMarks } from './class-facts';
import type { ClockKind } from './class-evidence';
import type { ScheduleFindings } from './schedule-findings';
import type { Trend } from './trend';
import type { Verdict } from './verdict';

/** All that a proposal rests on. */
export interface ProposalFacts {
  readonly marks: ClassMarks;
  readonly clock: ClockKind;
  /** ISO 4217. */
  readonly currency: string;
  readonly verdict: Verdict;
  readonly trend: Trend;
  readonly schedule: ScheduleFindings;
  /** Age beyond which today's schedule hides what would happen, clock units; null where it hides nothing. */
  readonly maskedAge: number | null;
  readonly failuresToSettle: { readonly more: number } | null;
  /** Whether two failure modes differ in verdict: then the verdict on all of them together decides nothing. */
  readonly modesDiffer: boolean;
  /** Positions that fail far more often than the rest, by the name people know them by; empty where none does. */
  readonly badPositions: readonly string[];
}
