import { z } from 'zod';
import { ageRankFindingsSchema } from './age-rank-findings';
import { lifeEstimatesSchema } from './life-estimates';

/** One failure mode of a class, with the other modes as censoring. */
const modeFindingsSchema = z.object({
  modeId: z.string(),
  name: z.string(),
  /** On record under watch, whether the item's age was known or not; `life.fit.failures` counts the known. */
  failures: z.number().int(),
  life: lifeEstimatesSchema,
  ageRank: ageRankFindingsSchema,
});
export type ModeFindings = z.infer<typeof modeFindingsSchema>;

export const modesFindingsSchema = z.object({
  /** Modes with at least five failures, in the order of the class's own list. */
  each: z.array(modeFindingsSchema),
  /** Modes with fewer, down to one: counted, not analysed. */
  rare: z.array(z.object({ modeId: z.string(), name: z.string(), failures: z.number().int() })),
  /** Failures nobody gave a mode. */
  failuresWithoutMode: z.number().int(),
});
export type ModesFindings = z.infer<typeof modesFindingsSchema>;
