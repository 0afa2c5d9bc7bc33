import { totalExposure, type History } from '~/reliability/history';
import type { LifeHistories } from '~/reliability/life-histories';
import type { Findings } from './findings';

const mostLives = 0.5;
const littleExposure = 0.05;
const mostRenewals = 0.75;

/** How planned renewals cut lives short: at which age, and how much was seen of older items. */
export function renewalHabits({ histories, plannedRenewalAges }: LifeHistories): Findings['renewals'] {
  const sorted = Float64Array.from(plannedRenewalAges).sort();
  const usualAge = sorted[Math.ceil(mostRenewals * sorted.length) - 1] ?? null;
  return {
    usualAge,
    exposureBeyondUsualAge: usualAge === null ? 0 : exposureBeyond(histories, usualAge),
    lifeExposure: totalExposure(histories),
  };
}

function exposureBeyond(histories: readonly History[], age: number): number {
  return histories.reduce((sum, { entry, exit }) => sum + Math.max(0, exit - Math.max(entry, age)), 0);
}

/**
 * The age beyond which the schedule hides what would happen, in clock units; null when it hides nothing.
 *
 * It does where planned renewals end at least half of all lives and under 5 % of the exposure lies beyond
 * the age by which three planned renewals in four have happened (Nowlan & Heap 1978 on the masking itself;
 * the numbers are common practice, no source).
 */
export function maskedAge({ extent, renewals }: Pick<Findings, 'extent' | 'renewals'>): number | null {
  const { usualAge, exposureBeyondUsualAge, lifeExposure } = renewals;
  if (usualAge === null || extent.lives === 0) return null;
  const masked =
    extent.livesEndedByPlannedRenewal >= mostLives * extent.lives &&
    exposureBeyondUsualAge < littleExposure * lifeExposure;
  return masked ? usualAge : null;
}
