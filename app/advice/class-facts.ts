import type { Findings } from './findings';
import type { ModeVerdict } from './judge-modes';
import type { Trend } from './trend';
import type { Verdict } from './verdict';

/** What the admin or the lead has set on the class; it decides words and duties, not estimates. */
export interface ClassMarks {
  readonly itemSingular: string;
  readonly itemPlural: string;
  readonly statutory: boolean;
  readonly endangersPeople: boolean;
}

/** What a judgement needs besides the findings. */
export interface JudgementContext {
  readonly marks: ClassMarks;
  /** ISO 4217, for the money in sentences. */
  readonly currency: string;
}

/** All that a caution or a sentence may look at. */
export interface ClassFacts {
  readonly marks: ClassMarks;
  readonly findings: Findings;
  readonly verdict: Verdict;
  readonly trend: Trend;
  readonly modeVerdicts: readonly ModeVerdict[];
  readonly pricing: Pricing;
}

/** What the cautions need of the third question. */
export interface Pricing {
  /** Costs that nobody has given. */
  readonly missing: readonly ('planned' | 'failure')[];
  /** The interval of least cost, clock units; null where none is best or it could not be priced. */
  readonly bestInterval: number | null;
  /** Longest age that at least five items were seen to reach, clock units; null with fewer items. */
  readonly supportedAge: number | null;
}
