import { z } from 'zod';

/** What may be proposed. Only start, shorten, lengthen, stop and trial change a schedule. */
export const actions = [
  'start',
  'shorten',
  'lengthen',
  'keep',
  'stop',
  'trial',
  'gather',
  'look-for-cause',
  'evidence-only',
] as const;
export type Action = (typeof actions)[number];

export const changingActions: readonly Action[] = ['start', 'shorten', 'lengthen', 'stop', 'trial'];

/** Which rule decided. */
export const reasons = [
  'marked',
  'rising-not-by-age',
  'falling',
  'modes-differ',
  'undecided',
  'early-life',
  'bad-positions',
  'nothing-to-prevent',
  'costs-missing',
  'not-priceable',
  'few-survivors',
  'schedule-pays',
  'shorter-pays',
  'longer-pays',
  'cheap-to-fail',
  'about-right',
  'too-close',
  'beyond-data',
  'past-what-was-seen',
] as const;
export type Reason = (typeof reasons)[number];

const interval = z.object({ interval: z.number().positive().nullable() });

export const proposalSchema = z.object({
  action: z.enum(actions),
  reason: z.enum(reasons),
  /** Clock units; null for no planned renewal. `to` differs from `from` only where the action changes a schedule. */
  from: interval,
  to: interval,
  /** For the whole class, integer minor units, with the middle 80 % of the draws; of a trial, if it holds for the whole class. */
  savingPerYearMinor: z
    .object({ value: z.number().int(), low: z.number().int(), high: z.number().int() })
    .nullable(),
  /** Share of the draws in which the change that was weighed saves money. */
  share: z.number().min(0).max(1).nullable(),
  /** Of a trial: on how many of the class's positions. */
  part: z.object({ positions: z.number().int(), of: z.number().int() }).nullable(),
  /** Set where the best interval lies beyond the longest age that the records support. */
  beyondData: z
    .object({ bestInterval: z.number(), supportedAge: z.number().nullable(), sentence: z.string() })
    .nullable(),
  words: z.object({
    title: z.string(),
    /** What it is worth, how sure; null where there is nothing to weigh. */
    worth: z.string().nullable(),
    why: z.array(z.string()),
    whatWouldMakeItWrong: z.array(z.string()),
    whatIsMissing: z.array(z.string()),
  }),
});
export type Proposal = z.infer<typeof proposalSchema>;
