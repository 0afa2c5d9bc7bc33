import { z } from 'zod';
import { proposalSchema } from './proposal';
import { trends } from './trend';
import { verdicts } from './verdict';

export const cautionCodes = [
  'endangers-people',
  'statutory',
  'few-failures',
  'masked-by-schedule',
  'ages-unknown',
  'clock-assumed',
  'logging-gap',
  'mixed-ages',
  'same-cause',
  'few-bad-positions',
  'mixed-modes',
  'poor-fit',
  'beyond-data',
  'after-visit',
  'zero-lives',
  'rounded-dates',
  'costs-missing',
] as const;
export type CautionCode = (typeof cautionCodes)[number];

const caution = z.object({
  code: z.enum(cautionCodes),
  /** stop: evidence only, nothing may be changed on it; caution: may make the verdict wrong; note: good to know. */
  severity: z.enum(['note', 'caution', 'stop']),
  /** What is so, with its numbers. */
  sentence: z.string(),
  /** What to do about it. */
  action: z.string(),
});
export type Caution = z.infer<typeof caution>;

/** The judgement on one class's findings, in words ready to be read; frozen with the night. */
export const conclusionSchema = z.object({
  verdict: z.enum(verdicts),
  trend: z.enum(trends),
  /** What the class page opens with: the claim, then what it rests on. */
  headline: z.object({ claim: z.string(), support: z.string() }),
  /** Whether it fails more often than before, and whether the old ones go first: short answers with a sentence. */
  answers: z.object({
    trend: z.object({ short: z.string(), sentence: z.string() }),
    age: z.object({ short: z.string(), sentence: z.string() }),
    schedule: z.object({ short: z.string(), sentence: z.string() }),
  }),
  /** The two questions read together. */
  together: z.string(),
  cautions: z.array(caution),
  /** Of the failure modes with enough failures, in the order of the findings. */
  modes: z.array(z.object({ modeId: z.string(), verdict: z.enum(verdicts) })),
  proposal: proposalSchema,
});
export type Conclusion = z.infer<typeof conclusionSchema>;
