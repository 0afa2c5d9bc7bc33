import { z } from 'zod';
import { ageRankTest, type AgeRankMark, type AgeRankTest } from '~/reliability/age-rank';
import type { Position } from '~/reliability/position';

/** Whether the old ones fail first, by the age-rank test. */
export const ageRankFindingsSchema = z.object({
  /** Failures with a known age among their peers. */
  failures: z.number().int(),
  meanShare: z.number().nullable(),
  /** The share of the others that were younger, on average; what "older than 78 % of the others" says. */
  meanYoungerPeers: z.number().nullable(),
  z: z.number().nullable(),
  p: z.number().nullable(),
  /** Failures at which all ages were equal, and failures of an item of unknown age. */
  weightless: z.number().int(),
  ageUnknown: z.number().int(),
});
export type AgeRankFindings = z.infer<typeof ageRankFindingsSchema>;

/**
 * Ranks each failed item's age among the positions under watch.
 *
 * @param options.mode only failures of this mode; all of them unless given.
 * @returns the findings, and the marks of the strip in order of time.
 */
export function findAgeRank(
  positions: readonly Position[],
  options: { mode?: string } = {},
): { findings: AgeRankFindings; marks: readonly AgeRankMark[] } {
  const test = ageRankTest(positions, options);
  return {
    findings: {
      failures: test.marks.length,
      meanShare: test.meanShare,
      meanYoungerPeers: meanYoungerPeers(test),
      z: test.z,
      p: test.pTwoSided,
      weightless: test.weightless,
      ageUnknown: test.unknownAge,
    },
    marks: test.marks,
  };
}

/** The rank counts half of the item itself; without it, r m − 1/2 of the m − 1 others were younger. */
function meanYoungerPeers({ marks }: AgeRankTest): number | null {
  const amongPeers = marks.filter(({ size }) => size > 1);
  if (amongPeers.length === 0) return null;
  const younger = amongPeers.reduce((sum, { share, size }) => sum + (share * size - 0.5) / (size - 1), 0);
  return younger / amongPeers.length;
}
