import { describe, expect, it } from 'vitest';
import { benjaminiHochberg } from '~/reliability/benjamini-hochberg';
import { constantRateBand } from '~/reliability/constant-rate-band';
import { failuresToSettle } from '~/reliability/failures-to-settle';

describe('Benjamini–Hochberg', () => {
  it('passes the fifteen p-values of the 1995 paper as the paper does', () => {
    // Benjamini & Hochberg 1995, section 3.2: the four smallest pass at 5 %.
    const p = [
      0.0001, 0.0004, 0.0019, 0.0095, 0.0201, 0.0278, 0.0298, 0.0344, 0.0459, 0.324, 0.4262, 0.5719, 0.6528,
      0.759, 1,
    ];
    expect(benjaminiHochberg(p, 0.05).filter(Boolean)).toHaveLength(4);
    expect(benjaminiHochberg(p.toReversed(), 0.05)).toEqual(benjaminiHochberg(p, 0.05).toReversed());
  });

  it('passes a value that fails its own line when a later one carries it', () => {
    expect(benjaminiHochberg([0.09, 0.08], 0.1)).toEqual([true, true]);
    expect(benjaminiHochberg([0.2, 0.08], 0.1)).toEqual([false, false]);
    expect(benjaminiHochberg([], 0.1)).toEqual([]);
  });
});

describe('band of a constant rate', () => {
  it('starts at nothing, ends at all and holds nine tenths between', () => {
    // R: qbinom(c(.05, .95), 12, .5) is 3 and 9.
    expect(constantRateBand(12, [0, 0.5, 1])).toEqual([
      { share: 0, low: 0, high: 0 },
      { share: 0.5, low: 3, high: 9 },
      { share: 1, low: 12, high: 12 },
    ]);
  });
});

describe('failures to settle a verdict', () => {
  it('takes 0.78/√n before there is a fit', () => {
    // (1.644854 + 0.841621) × 0.78/√n ≤ ln 1.5 from n = 23 on; below ln 2 from n = 8 on.
    expect(failuresToSettle(3, null)).toEqual({
      forMemoryless: 23,
      forWearOut: 8,
      total: 23,
      more: 20,
      governedBy: 'memoryless',
    });
  });

  it('scales the standard error of the present fit', () => {
    const settled = failuresToSettle(10, 0.4);
    const reach = 1.6448536269514722 + 0.8416212335729143;
    const halfWidth = (n: number) => reach * 0.4 * Math.sqrt(10 / n);
    expect(halfWidth(settled.forMemoryless)).toBeLessThanOrEqual(Math.log(1.5));
    expect(halfWidth(settled.forMemoryless - 1)).toBeGreaterThan(Math.log(1.5));
    expect(halfWidth(settled.forWearOut)).toBeLessThan(Math.log(2));
    expect(halfWidth(settled.forWearOut - 1)).toBeGreaterThanOrEqual(Math.log(2));
    expect(settled.more).toBe(settled.total - 10);
  });

  it('asks for no more where there are enough, and never for fewer than five in all', () => {
    expect(failuresToSettle(40, 0.1).more).toBe(0);
    expect(failuresToSettle(2, 0.01)).toMatchObject({ total: 5, more: 3 });
  });
});
