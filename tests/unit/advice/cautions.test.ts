import { describe, expect, it } from 'vitest';
import { calendarDay, isoDay } from '~/advice/calendar-day';
import { afterVisit } from '~/advice/cautions/after-visit';
import { beyondData } from '~/advice/cautions/beyond-data';
import { costsMissing } from '~/advice/cautions/costs-missing';
import { badPositions, fewBadPositions } from '~/advice/cautions/few-bad-positions';
import type { CautionFacts } from '~/advice/cautions/caution-facts';
import { mixedAges } from '~/advice/cautions/mixed-ages';
import { mixedModes } from '~/advice/cautions/mixed-modes';
import { poorFit } from '~/advice/cautions/poor-fit';
import { roundedDates } from '~/advice/cautions/rounded-dates';
import { sameCause } from '~/advice/cautions/same-cause';
import { zeroLives } from '~/advice/cautions/zero-lives';
import { findScatter } from '~/advice/find-scatter';
import type { ModeVerdict } from '~/advice/judge-modes';
import { scatterFindingsSchema, type ScatterFindings } from '~/advice/scatter-findings';
import { assetHistories } from '~/reliability/asset-histories';
import { lifeHistories } from '~/reliability/life-histories';
import { pooledExposure } from '~/reliability/pooled-exposure';
import type { Position } from '~/reliability/position';
import { fitPowerLaw } from '~/reliability/power-law';
import { dutyUsage } from '~/reliability/usage';
import { aPosition, anEvent } from '../../support/position';
import { seededRandom } from '../../support/seeded-random';
import { simulateClass, usualClass } from '../../support/simulate-class';

interface Extras {
  visits?: Record<string, number[]>;
  sites?: Record<string, string>;
  groups?: ScatterFindings['groups'];
}

function scatterOf(
  positions: readonly Position[],
  { visits = {}, sites = {}, groups }: Extras = {},
): ScatterFindings {
  const asset = assetHistories(positions).histories;
  const life = lifeHistories(positions).histories;
  const [slope, shape] = [fitPowerLaw(asset), fitPowerLaw(life)];
  const findings = findScatter({
    positions,
    placeOf: (id) => ({
      tag: id.toUpperCase(),
      siteId: sites[id] ?? 's1',
      siteName: sites[id] ?? 'Orrin Library',
    }),
    visitsOf: (id) => visits[id] ?? [],
    groups: groups ?? { assets: 0, items: 0, itemsOfUnknownAge: 0 },
    pooled: pooledExposure(positions),
    asset: { histories: asset, slope: slope.kind === 'fit' ? slope.shape : null },
    life: { histories: life, shape: shape.kind === 'fit' ? shape.shape : null },
  });
  return scatterFindingsSchema.parse(JSON.parse(JSON.stringify(findings)));
}

const quiet = scatterOf([aPosition()]);

function facts(
  differences: Partial<CautionFacts> & { scatter?: ScatterFindings; zeroLives?: number } = {},
): CautionFacts {
  const { scatter = quiet, zeroLives = 0, ...rest } = differences;
  return {
    marks: { itemSingular: 'seal', itemPlural: 'seals' },
    findings: { clock: 'calendar-days', extent: { zeroLives }, scatter },
    modeVerdicts: [],
    pricing: { missing: [], bestInterval: null, supportedAge: null },
    ...rest,
  };
}

/** So many positions watched for 1000 days, each failing on its days. */
function positionsFailing(...days: number[][]): Position[] {
  return days.map((own, index) => aPosition({ id: `p${index}`, events: own.map((day) => anEvent(day)) }));
}

const steady = simulateClass(seededRandom(11), { ...usualClass, shape: 1, scale: 300 });
const steadyScatter = scatterOf(steady);

describe('mixed ages', () => {
  it('gives the share of items of unknown age in groups', () => {
    const scatter = scatterOf([aPosition()], { groups: { assets: 2, items: 96, itemsOfUnknownAge: 48 } });
    const caution = mixedAges(facts({ scatter }));
    expect(caution?.code).toBe('mixed-ages');
    expect(caution?.sentence).toMatch(
      /^2 assets stand for several seals at once, and of 96 seals there the age of 48 \(50\u202f%\) is not known\./,
    );
  });

  it('is silent where every item in the group has a date', () => {
    const scatter = scatterOf([aPosition()], { groups: { assets: 1, items: 96, itemsOfUnknownAge: 0 } });
    expect(mixedAges(facts({ scatter }))).toBeNull();
  });
});

describe('same cause', () => {
  const storm = positionsFailing(
    ...Array.from({ length: 10 }, (_, index) => (index < 4 ? [500.25 + index / 10] : [70 * index])),
  );

  it('names the day, the failures and what would be usual', () => {
    const caution = sameCause(facts({ scatter: scatterOf(storm) }));
    // Day 500 after 1970-01-01 is 16 May 1971; 10 failures in 1000 days, four on one.
    expect(caution?.sentence).toBe(
      '4 failures on 16 May 1971, where 0.010 would be usual: they hardly came about independently (p < 0.001).',
    );
  });

  it('finds a day of one site that the class as a whole hides', () => {
    const atSite = (site: string, count: number, days: (index: number) => number[]) =>
      Array.from({ length: count }, (_, index) =>
        aPosition({ id: `${site}${index}`, events: days(index).map((day) => anEvent(day + 0.1)) }),
      );
    // 300 positions fail here and there, three of the five at the small site on one day.
    const positions = [
      ...atSite('big', 300, (index) => [(index * 331) % 1000]),
      ...atSite('small', 5, (index) => [index < 3 ? 501 : 90 * index]),
    ];
    const sites = Object.fromEntries(
      positions.map(({ id }) => [id, id.startsWith('big') ? 'Tarn House' : 'Saltmarsh Depot']),
    );
    const together = scatterOf(positions).sameCause;
    const scatter = scatterOf(positions, { sites });
    expect(together.found).toBe(0);
    expect(scatter.sameCause.clusters).toMatchObject([
      { day: 501, siteName: 'Saltmarsh Depot', failures: 3 },
    ]);
    expect(sameCause(facts({ scatter }))?.sentence).toMatch(/^3 failures at Saltmarsh Depot on 17 May 1971/);
  });

  it('is silent about chance, and about two on one day', () => {
    expect(sameCause(facts({ scatter: steadyScatter }))).toBeNull();
    expect(sameCause(facts({ scatter: scatterOf(positionsFailing([500], [500], [300])) }))).toBeNull();
  });

  it('does with a watch that ends as the day of the failures begins', () => {
    const scatter = scatterOf(
      [0, 1, 2].map((index) => aPosition({ id: `p${index}`, events: [anEvent(1000)] })),
    );
    expect(scatter.sameCause.clusters[0]?.p).toBeGreaterThan(0);
  });
});

describe('few bad positions', () => {
  const often = Array.from({ length: 12 }, (_, index) => 40 + 80 * index);
  const uneven = positionsFailing(
    often,
    ...Array.from({ length: 39 }, (_, index) => (index % 3 === 0 ? [25 * index + 10] : [])),
  );

  it('names the position, its failures and its share', () => {
    const scatter = scatterOf(uneven);
    const caution = fewBadPositions(facts({ scatter }));
    // 25 failures at 40 positions of equal exposure: 0.625 each.
    expect(caution?.sentence).toMatch(
      /^25 failures at 40 positions are spread more unevenly than chance allows \(p < 0\.001\)\. Standing out: P0 \(12 where 0\.6 would be its share\)\. /,
    );
    expect(badPositions(scatter)).toEqual(['P0']);
  });

  it('is silent where counts are as even as chance makes them', () => {
    expect(fewBadPositions(facts({ scatter: steadyScatter }))).toBeNull();
    expect(badPositions(steadyScatter)).toEqual([]);
    expect(quiet.perPosition).toBeNull();
  });

  it('takes a failure at a clock that stood still', () => {
    const still = aPosition({ id: 'still', usage: { at: () => 5 }, events: [anEvent(500)] });
    expect(scatterOf([still, ...positionsFailing([100], [200])]).perPosition?.failures).toBe(3);
  });
});

describe('mixed modes', () => {
  const mode = (name: string, verdict: ModeVerdict['verdict'], low: number, high: number): ModeVerdict => ({
    modeId: name,
    name,
    failures: 12,
    verdict,
    shapeInterval: { low, high },
  });

  it('names the modes with their verdicts', () => {
    const modeVerdicts = [mode('Burnt', 'wear-out', 1.8, 3.1), mode('Broken', 'memoryless', 0.8, 1.4)];
    expect(mixedModes(facts({ modeVerdicts }))?.sentence).toBe(
      'The verdict on all failures together mixes modes that are unlike: Burnt wears out (12 failures); Broken is memoryless (12 failures).',
    );
  });

  it('takes an undecided mode as unlike only where the intervals do not meet', () => {
    const wear = mode('Burnt', 'wear-out', 1.8, 3.1);
    expect(mixedModes(facts({ modeVerdicts: [wear, mode('Broken', 'undecided', 0.7, 1.7)] }))).not.toBeNull();
    expect(mixedModes(facts({ modeVerdicts: [wear, mode('Broken', 'undecided', 0.7, 1.9)] }))).toBeNull();
  });

  it('is silent where modes agree, or there is but one', () => {
    const alike = [mode('Burnt', 'wear-out', 1.8, 3.1), mode('Broken', 'wear-out', 1.1, 1.4)];
    expect(mixedModes(facts({ modeVerdicts: alike }))).toBeNull();
    expect(mixedModes(facts({ modeVerdicts: [alike[0]!] }))).toBeNull();
  });
});

describe('poor fit', () => {
  it('gives the check that fails: ages at failure in two heaps', () => {
    const twoHeaps = Array.from({ length: 40 }, (_, index) =>
      aPosition({
        id: `p${index}`,
        watchTo: index % 2 ? 20 + index / 10 : 900 + index / 10,
        events: [anEvent(index % 2 ? 20 + index / 10 : 900 + index / 10)],
      }),
    );
    const scatter = scatterOf(twoHeaps);
    expect(scatter.fit.life?.p).toBeLessThan(0.01);
    expect(poorFit(facts({ scatter }))?.sentence).toMatch(
      /^The fitted life does not follow the ages at failure: in \d age bands of 40 failures the hazard goes another way \(p /,
    );
  });

  it('gives the check that fails: a spell of failures in the middle of the watch', () => {
    const spell = positionsFailing(...Array.from({ length: 20 }, (_, index) => [480 + index, 510 + index]));
    const scatter = scatterOf(spell);
    expect(scatter.fit.trend?.rejected).toBe(true);
    const { statistic, criticalAtFivePercent } = scatter.fit.trend!;
    expect(poorFit(facts({ scatter }))?.sentence).toContain(
      `The fitted trend does not follow the 40 failures in time (Cramér–von Mises ${statistic.toFixed(3)}, at most ${criticalAtFivePercent.toFixed(3)} would pass).`,
    );
  });

  it('is silent where the curves follow, or nothing can be checked', () => {
    expect(steadyScatter.fit.life).not.toBeNull();
    expect(poorFit(facts({ scatter: steadyScatter }))).toBeNull();
    expect(quiet.fit).toEqual({ trend: null, life: null });
    expect(poorFit(facts())).toBeNull();
  });
});

describe('beyond the data', () => {
  it('gives the interval and the age that is supported', () => {
    const pricing = { missing: [], bestInterval: 700, supportedAge: 450 };
    expect(beyondData(facts({ pricing }))?.sentence).toBe(
      'The interval of least cost comes out at 700 days, but only up to 450 days have at least five seals been seen to last. Beyond that the curve is a guess.',
    );
    expect(beyondData(facts({ pricing: { ...pricing, supportedAge: null } }))?.sentence).toContain(
      'fewer than five seals',
    );
  });

  it('is silent within the data, and without an interval', () => {
    expect(beyondData(facts({ pricing: { missing: [], bestInterval: 450, supportedAge: 450 } }))).toBeNull();
    expect(beyondData(facts({ pricing: { missing: [], bestInterval: null, supportedAge: 450 } }))).toBeNull();
  });
});

describe('after a visit', () => {
  // Ten positions visited on day 500; eight of them fail within the 30 days after, four at another time.
  const positions = positionsFailing(
    ...Array.from({ length: 10 }, (_, index) => [
      ...(index < 8 ? [502 + 3 * index] : []),
      ...(index >= 6 ? [100 * index] : []),
    ]),
  );
  const visits = Object.fromEntries(positions.map(({ id }) => [id, [500]]));

  it('gives both rates and the ratio with its interval', () => {
    const scatter = scatterOf(positions, { visits });
    // 8 in 300 item-days against 4 in 9700: ratio 64.67; rates a year by 365.25.
    expect(scatter.afterVisit).toMatchObject({
      visits: 10,
      after: { failures: 8, exposure: 300 },
      otherwise: { failures: 4, exposure: 9700 },
    });
    expect(scatter.afterVisit?.ratio).toBeCloseTo(64.6667, 4);
    const caution = afterVisit(facts({ scatter }));
    expect(caution?.sentence).toMatch(
      /^In the 30 days after 10 planned visits seals failed 65 times \(\d+ to \d+\) as often as at other times: 8 failures there, 9\.7 a year each, against 4 at other times, 0\.2 a year each\.$/,
    );
  });

  it('counts planned renewals as visits, and days on the calendar whatever the clock', () => {
    const renewed = positions.map((position) => ({
      ...position,
      usage: dutyUsage(3),
      events: [...position.events, anEvent(500, 'planned-renewal')].sort((a, b) => a.at - b.at),
    }));
    expect(scatterOf(renewed).afterVisit).toMatchObject({
      visits: 10,
      after: { failures: 8, exposure: 300 },
    });
  });

  it('is silent where visits do no harm, and where there are none', () => {
    const elsewhere = Object.fromEntries(positions.map(({ id }) => [id, [300]]));
    expect(afterVisit(facts({ scatter: scatterOf(positions, { visits: elsewhere }) }))).toBeNull();
    expect(scatterOf(positions).afterVisit).toBeNull();
    expect(afterVisit(facts())).toBeNull();
  });
});

describe('zero lives', () => {
  it('gives the number', () => {
    expect(zeroLives(facts({ zeroLives: 3 }))?.sentence).toMatch(
      /^3 failures came on the very day the seal was fitted\./,
    );
    expect(zeroLives(facts({ zeroLives: 1 }))?.sentence).toMatch(
      /^1 failure came .* It counts at half a day/,
    );
  });
  it('is silent without one', () => expect(zeroLives(facts())).toBeNull());
});

describe('rounded dates', () => {
  // Days 31, 59, 90, 120, 151 are the firsts of February to June 1970.
  const firsts = positionsFailing([31], [59], [90], [120], [151], [200], [300]);

  it('gives the share of firsts of a month', () => {
    const caution = roundedDates(facts({ scatter: scatterOf(firsts) }));
    expect(caution?.sentence).toMatch(/^5 of 7 failures \(71\u202f%\) are dated the first of a month/);
    expect(caution?.sentence).toContain('7 of them have no time of day.');
  });

  it('gives the share of ties', () => {
    const scatter = scatterOf(positionsFailing([101], [101], [222], [222], [333], [444]));
    expect(roundedDates(facts({ scatter }))?.sentence).toMatch(
      /^4 of 6 failures \(67\u202f%\) share their date with another, where chance makes about 0\./,
    );
  });

  it('is silent about odd dates, few dates, and the ties that chance makes among many', () => {
    expect(
      roundedDates(facts({ scatter: scatterOf(positionsFailing([33], [67], [91], [125], [166])) })),
    ).toBeNull();
    expect(roundedDates(facts({ scatter: scatterOf(positionsFailing([31], [31])) }))).toBeNull();
    const random = seededRandom(4);
    const many = scatterOf(
      positionsFailing(...Array.from({ length: 900 }, () => [Math.floor(1 + 999 * random())])),
    );
    expect(many.dates.tied).toBeGreaterThan(300);
    expect(Math.abs(many.dates.tied - many.dates.tiedByChance)).toBeLessThan(60);
    expect(roundedDates(facts({ scatter: many }))).toBeNull();
  });

  it('takes failures with different times on one day as not tied', () => {
    const scatter = scatterOf(positionsFailing([101.2], [101.6], [222.1], [222.9], [333.5]));
    expect(scatter.dates).toMatchObject({ tied: 0, withoutTime: 0, tiedByChance: 0 });
  });
});

describe('costs missing', () => {
  const missing = (...which: ('planned' | 'failure')[]) =>
    costsMissing(facts({ pricing: { missing: which, bestInterval: null, supportedAge: null } }))?.sentence;

  it('says which', () => {
    expect(missing('planned', 'failure')).toMatch(
      /^Neither the cost of a planned renewal nor that of a failure is given/,
    );
    expect(missing('failure')).toMatch(/^The cost of a failure is not given/);
    expect(missing('planned')).toMatch(/^The cost of a planned renewal is not given/);
  });
  it('is silent where both are given', () => expect(missing()).toBeUndefined());
});

describe('the calendar day of a day number', () => {
  it('agrees with the platform over four centuries and before 1970', () => {
    for (let day = -150_000; day <= 150_000; day += 17) {
      expect(isoDay(day)).toBe(new Date(day * 86_400_000).toISOString().slice(0, 10));
    }
    expect(calendarDay(59 + 365 * 2 + 0.7)).toEqual({ year: 1972, month: 2, day: 29 });
  });
});

describe('scatter of no position, of one without a failure, of a hundred thousand', () => {
  it('is all nulls and zeros', () => {
    for (const positions of [[], [aPosition()]]) {
      const scatter = scatterOf(positions);
      expect(scatter).toMatchObject({
        perPosition: null,
        afterVisit: null,
        sameCause: { found: 0, clusters: [] },
      });
      expect(scatter.dates).toEqual({
        failures: 0,
        onFirstOfMonth: 0,
        tied: 0,
        tiedByChance: 0,
        withoutTime: 0,
      });
    }
  });

  it('comes in seconds', () => {
    const random = seededRandom(8);
    const positions = Array.from({ length: 100_000 }, (_, index) => {
      const inServiceAt = -Math.floor(2000 * random());
      const events = index % 100 === 0 ? [anEvent(1 + Math.floor(998 * random()))] : [];
      return aPosition({ id: `p${index}`, inServiceAt, fittedAt: inServiceAt, events });
    });
    const started = performance.now();
    expect(scatterOf(positions).perPosition?.failures).toBe(1000);
    expect(performance.now() - started).toBeLessThan(20_000);
  }, 60_000);
});
