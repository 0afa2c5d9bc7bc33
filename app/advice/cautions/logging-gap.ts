import { formatClock, formatPercent } from '~/format/number';
import { clockUnit } from '../clock-unit';
import type { ClassFacts } from '../class-facts';
import type { Caution } from '../conclusion';

const unlikely = 0.01;

/** The present silence has a chance under 1 % at the fitted rate: logging may have stopped. */
export function loggingGap({ findings, marks }: ClassFacts): Caution | null {
  const { silence } = findings.trend;
  if (silence === null || silence.chance >= unlikely) return null;
  const running = formatClock(silence.exposure, clockUnit(findings.clock));
  return {
    code: 'logging-gap',
    severity: 'caution',
    sentence: `No failure in the last ${running} of running time of all ${marks.itemPlural} together. At the rate before, such a silence has a chance of ${formatPercent(silence.chance, 1)}.`,
    action: 'Ask the sites whether failures are still being logged before you take this for an improvement.',
  };
}
