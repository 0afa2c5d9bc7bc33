import { ageAlarm, appendToAgeAlarm, emptyAgeAlarm } from '~/reliability/age-alarm';
import { forEachAgeRiskSet, type AgeRiskSet } from '~/reliability/age-risk-sets';
import { pooledExposure, type PooledFailure } from '~/reliability/pooled-exposure';
import type { Position } from '~/reliability/position';
import { appendToTrendAlarm, emptyTrendAlarm, trendAlarm } from '~/reliability/trend-alarm';
import type { AlarmFindings, AlarmState } from './alarm-findings';
import { Fingerprint } from './fingerprint';

/**
 * Takes into a class's alarms the failures that came after those already taken in.
 *
 * The ones already taken in are held against the fingerprint: exposure, position and moment of each, and for
 * the age alarm all ages it was compared with. If anything of the past is not what it was (a void, a late or
 * back-dated entry, a corrected fitting date, a failure on a moment already taken in, which is split anew),
 * everything is computed from scratch. Both ways fold the same numbers in the same order, so that they agree
 * to the last bit.
 *
 * @param previous what the last night left; null to compute from scratch.
 */
export function advanceAlarmState(previous: AlarmState | null, positions: readonly Position[]): AlarmState {
  const { failures } = pooledExposure(positions);
  return (previous && continued(previous, failures, positions)) ?? continued(nothing, failures, positions)!;
}

/** ln E of each kind of alarm over all that a state has taken in. */
export function alarmFindings({ trend, age }: AlarmState): AlarmFindings {
  const { rising, falling } = trendAlarm(trend);
  const { oldFirst, youngFirst } = ageAlarm(age);
  return {
    failures: { rate: trend.failures, age: age.failures },
    logE: {
      'rate-rising': rising.logE,
      'rate-falling': falling.logE,
      'old-first': oldFirst.logE,
      'young-first': youngFirst.logE,
    },
  };
}

const nothing: AlarmState = {
  fingerprint: fingerprintOf(new Fingerprint(), new Fingerprint()),
  trend: emptyTrendAlarm,
  age: { ...emptyAgeAlarm, oldFirst: [...emptyAgeAlarm.oldFirst], youngFirst: [...emptyAgeAlarm.youngFirst] },
};

/** Null where the past is not the one that `previous` has taken in. */
function continued(
  previous: AlarmState,
  failures: readonly PooledFailure[],
  positions: readonly Position[],
): AlarmState | null {
  const trendPrint = new Fingerprint();
  const taken = previous.trend.failures;
  if (failures.length < taken) return null;
  for (const failure of failures.slice(0, taken)) addFailure(trendPrint, failure);
  // Before the longer walk through the ages: the usual changes of the past show here already.
  if (!previous.fingerprint.startsWith(trendPrint.digest())) return null;

  const agePrint = new Fingerprint();
  let age: AlarmState['age'] = previous.age;
  let seen = 0;
  let printBefore = previous.age.failures === 0 ? agePrint.digest() : null;
  forEachAgeRiskSet(positions, (riskSet) => {
    addRiskSet(agePrint, riskSet);
    seen += 1;
    if (seen > previous.age.failures) age = mutable(appendToAgeAlarm(age, riskSet));
    else if (seen === previous.age.failures) printBefore = agePrint.digest();
  });
  if (printBefore === null || !previous.fingerprint.endsWith(printBefore)) return null;

  let trend = previous.trend;
  for (const failure of failures.slice(taken)) {
    addFailure(trendPrint, failure);
    trend = appendToTrendAlarm(trend, failure.exposure);
  }
  return { fingerprint: fingerprintOf(trendPrint, agePrint), trend, age };
}

function fingerprintOf(trend: Fingerprint, age: Fingerprint): string {
  return `${trend.digest()}-${age.digest()}`;
}

function addFailure(print: Fingerprint, { exposure, positionId, at }: PooledFailure): void {
  print.addNumber(exposure);
  print.addText(positionId);
  print.addNumber(at);
}

function addRiskSet(print: Fingerprint, riskSet: AgeRiskSet): void {
  const { at, positionId, failedAge, halfResolution, groups, ages, counts } = riskSet;
  for (const number of [at, failedAge, halfResolution, groups]) print.addNumber(number);
  print.addText(positionId);
  print.addNumbers(ages, groups);
  print.addNumbers(counts, groups);
}

function mutable({ failures, oldFirst, youngFirst }: ReturnType<typeof appendToAgeAlarm>): AlarmState['age'] {
  return { failures, oldFirst: [...oldFirst], youngFirst: [...youngFirst] };
}
