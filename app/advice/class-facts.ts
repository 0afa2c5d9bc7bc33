import type { Findings } from './findings';
import type { Trend } from './trend';
import type { Verdict } from './verdict';

/** What the admin or the lead has set on the class; it decides words and duties, not estimates. */
export interface ClassMarks {
  readonly itemSingular: string;
  readonly itemPlural: string;
  readonly statutory: boolean;
  readonly endangersPeople: boolean;
}

/** All that a caution or a sentence may look at. */
export interface ClassFacts {
  readonly marks: ClassMarks;
  readonly findings: Findings;
  readonly verdict: Verdict;
  readonly trend: Trend;
}
