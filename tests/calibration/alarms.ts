import { alarmKinds, type AlarmFindings, type AlarmKind } from '~/advice/alarm-findings';
import { raiseAlarms } from '~/advice/raise-alarms';
import { ageAlarm, appendToAgeAlarm, emptyAgeAlarm } from '~/reliability/age-alarm';
import { forEachAgeRiskSet } from '~/reliability/age-risk-sets';
import { pooledExposure } from '~/reliability/pooled-exposure';
import type { Position } from '~/reliability/position';
import { appendToTrendAlarm, emptyTrendAlarm, trendAlarm } from '~/reliability/trend-alarm';
import type { Random } from '../support/seeded-random';
import { simulateClass, usualClass } from '../support/simulate-class';
import { quantileOf, shareOf, type Share } from './share';

type LogE = Record<AlarmKind, number>;

interface Step {
  readonly at: number;
  readonly logE: Partial<LogE>;
}

const threshold = Math.log(20);
const silent: LogE = { 'rate-rising': 0, 'rate-falling': 0, 'old-first': 0, 'young-first': 0 };

/** ln E after every failure, as a night would see it. */
function steps(positions: readonly Position[]): Step[] {
  const found: Step[] = [];
  let trend = emptyTrendAlarm;
  for (const { exposure, at } of pooledExposure(positions).failures) {
    trend = appendToTrendAlarm(trend, exposure);
    const { rising, falling } = trendAlarm(trend);
    found.push({ at, logE: { 'rate-rising': rising.logE, 'rate-falling': falling.logE } });
  }
  let age = emptyAgeAlarm;
  forEachAgeRiskSet(positions, (riskSet) => {
    age = appendToAgeAlarm(age, riskSet);
    const { oldFirst, youngFirst } = ageAlarm(age);
    found.push({ at: riskSet.at, logE: { 'old-first': oldFirst.logE, 'young-first': youngFirst.logE } });
  });
  return found.sort((a, b) => a.at - b.at);
}

/**
 * Memoryless classes with a year of records already, looked at every night of the year after: how many ever
 * reach E = 20 by themselves, kind by kind, and how many ever have an alarm raised by the run's e-BH.
 */
export function falseAlarms(
  random: Random,
  classes: number,
): { plain: Record<AlarmKind, Share>; raised: Share } {
  const year = 365;
  const paths = Array.from({ length: classes }, () =>
    steps(simulateClass(random, { ...usualClass, shape: 1, watchedDays: 2 * year })),
  );
  const plain = (kind: AlarmKind) =>
    shareOf(paths.map((path) => path.some(({ at, logE }) => at > year && (logE[kind] ?? 0) >= threshold)));

  const now = paths.map((): LogE => ({ ...silent }));
  const next = paths.map(() => 0);
  const everRaised = paths.map(() => false);
  for (let night = 1; night <= 2 * year; night += 1) {
    for (const [index, path] of paths.entries()) {
      while (next[index]! < path.length && path[next[index]!]!.at <= night) {
        Object.assign(now[index]!, path[next[index]!]!.logE);
        next[index]! += 1;
      }
    }
    if (night <= year) continue;
    const raised = raiseAlarms(
      now.map((logE, index) => ({
        classId: String(index),
        alarms: { failures: { rate: 0, age: 0 }, logE: { ...logE } } satisfies AlarmFindings,
        standing: { open: new Set<AlarmKind>(), logEAtClearing: {} },
      })),
    );
    for (const { classId } of raised) everRaised[Number(classId)] = true;
  }
  return {
    plain: Object.fromEntries(alarmKinds.map((kind) => [kind, plain(kind)])) as Record<AlarmKind, Share>,
    raised: shareOf(everRaised),
  };
}

export interface TimeToAlarm {
  readonly nights: { readonly quarter: number; readonly median: number; readonly threeQuarters: number };
  readonly failures: { readonly median: number };
  readonly raisedWithinWatch: Share;
}

/** Nights and failures from the first night on until a class of 30 positions that wears out raises its age alarm. */
export function timeToAlarm(random: Random, shape: number, runs: number): TimeToAlarm {
  const watchedDays = 5 * 365;
  const nights: number[] = [];
  const failures: number[] = [];
  for (let run = 0; run < runs; run += 1) {
    const path = steps(simulateClass(random, { ...usualClass, shape, watchedDays })).filter(
      ({ logE }) => logE['old-first'] !== undefined,
    );
    const index = path.findIndex(({ logE }) => logE['old-first']! >= threshold);
    nights.push(index < 0 ? Infinity : Math.ceil(path[index]!.at));
    failures.push(index < 0 ? Infinity : index + 1);
  }
  return {
    nights: {
      quarter: quantileOf(nights, 0.25),
      median: quantileOf(nights, 0.5),
      threeQuarters: quantileOf(nights, 0.75),
    },
    failures: { median: quantileOf(failures, 0.5) },
    raisedWithinWatch: shareOf(nights.map(Number.isFinite)),
  };
}
