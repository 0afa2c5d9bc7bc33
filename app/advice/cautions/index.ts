import type { ClassFacts } from '../class-facts';
import type { Caution } from '../conclusion';
import { afterVisit } from './after-visit';
import { agesUnknown } from './ages-unknown';
import { beyondData } from './beyond-data';
import { clockAssumed } from './clock-assumed';
import { costsMissing } from './costs-missing';
import { endangersPeople } from './endangers-people';
import { fewBadPositions } from './few-bad-positions';
import { fewFailures } from './few-failures';
import { loggingGap } from './logging-gap';
import { maskedBySchedule } from './masked-by-schedule';
import { mixedAges } from './mixed-ages';
import { mixedModes } from './mixed-modes';
import { poorFit } from './poor-fit';
import { roundedDates } from './rounded-dates';
import { sameCause } from './same-cause';
import { statutory } from './statutory';
import { zeroLives } from './zero-lives';

/** Every caution, in the order they are shown: what can hurt somebody first, then what may turn the verdict round. */
const all: readonly ((facts: ClassFacts) => Caution | null)[] = [
  endangersPeople,
  statutory,
  mixedModes,
  fewBadPositions,
  mixedAges,
  maskedBySchedule,
  fewFailures,
  agesUnknown,
  sameCause,
  afterVisit,
  poorFit,
  beyondData,
  loggingGap,
  zeroLives,
  roundedDates,
  costsMissing,
  clockAssumed,
];

/** The cautions that apply to a class, worst first. */
export function cautionsFor(facts: ClassFacts): Caution[] {
  return all.map((caution) => caution(facts)).filter((caution) => caution !== null);
}
