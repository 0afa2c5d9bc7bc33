import type { ClassFacts } from '../class-facts';
import type { Caution } from '../conclusion';
import { agesUnknown } from './ages-unknown';
import { clockAssumed } from './clock-assumed';
import { endangersPeople } from './endangers-people';
import { fewFailures } from './few-failures';
import { loggingGap } from './logging-gap';
import { maskedBySchedule } from './masked-by-schedule';
import { statutory } from './statutory';

/** Every caution, in the order they are shown: what can hurt somebody first. */
const all: readonly ((facts: ClassFacts) => Caution | null)[] = [
  endangersPeople,
  statutory,
  fewFailures,
  maskedBySchedule,
  agesUnknown,
  loggingGap,
  clockAssumed,
];

/** The cautions that apply to a class, worst first. */
export function cautionsFor(facts: ClassFacts): Caution[] {
  return all.map((caution) => caution(facts)).filter((caution) => caution !== null);
}
