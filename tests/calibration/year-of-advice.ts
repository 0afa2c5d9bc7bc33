/**
 * What following the advice is worth: the same simulated estate under four policies, from the same seeds.
 *
 *     npm run calibrate:advice
 *
 * Writes tests/calibration/year-of-advice.md.
 */
import { writeFileSync } from 'node:fs';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { conclude, decideRun, runTestsOf } from '~/advice/conclude';
import { bestAgeReplacement } from '~/reliability/age-replacement';
import { anEvidence, findingsOf } from '../support/class-evidence';
import { estateOf, LivedClass, type EstateClass } from './estate';

const historyDays = 3 * 365;
const monthDays = 365 / 12;

export interface AdviceSetting {
  readonly classes: number;
  readonly seed: number;
  /** Months lived through after three years of records. */
  readonly months: number;
  /** Months between two looks at the proposals. */
  readonly every: number;
}

export const policies = ['follow', 'never-change', 'calendar', 'best-possible'] as const;
export type AdvicePolicy = (typeof policies)[number];

export interface AdviceResult {
  /** Minor units over the months, by policy. */
  readonly cost: Record<AdvicePolicy, number>;
  /** How many classes had their schedule changed on advice, and how many of these are statutory. */
  readonly changed: number;
  readonly changedStatutory: number;
}

/** Lives through one estate four times. */
export function yearOfAdvice(setting: AdviceSetting): AdviceResult {
  const estate = estateOf(setting.classes);
  const open = () => {
    const lived = estate.map((truth, index) => new LivedClass(truth, setting.seed * 100 + index));
    for (const one of lived) one.liveUntil(historyDays);
    return lived;
  };
  const end = historyDays + setting.months * monthDays;
  const costOf = (lived: readonly LivedClass[]) =>
    lived.reduce((sum, one) => sum + one.costSince(historyDays), 0);
  const under = (intervalOf: (truth: EstateClass) => number | null) => {
    const lived = open();
    for (const one of lived) {
      one.setInterval(intervalOf(one.truth));
      one.liveUntil(end);
    }
    return costOf(lived);
  };
  const followed = open();
  const changed = follow(followed, setting);
  return {
    cost: {
      follow: costOf(followed),
      'never-change': under(({ interval }) => interval),
      calendar: under(() => 365),
      'best-possible': under((truth) =>
        bestAgeReplacement(truth, { planned: truth.plannedMinor, failure: truth.failureMinor }),
      ),
    },
    changed: changed.size,
    changedStatutory: [...changed].filter(({ statutory }) => statutory).length,
  };
}

/** Looks at the proposals every so often and does what they say; a trial goes to a quarter of the places. */
function follow(lived: readonly LivedClass[], { months, every }: AdviceSetting): Set<EstateClass> {
  const current = new Map(lived.map(({ truth }) => [truth, truth.interval]));
  const onTrial = new Set<EstateClass>();
  const changed = new Set<EstateClass>();
  for (let month = 0; month < months; month += every) {
    const now = historyDays + month * monthDays;
    const night = lived.map((one) => {
      one.liveUntil(now);
      const evidence = evidenceOf(one, current.get(one.truth)!, now);
      return { one, evidence, findings: findingsOf(evidence) };
    });
    const decisions = decideRun(night.map(({ findings }) => runTestsOf(findings)));
    for (const [index, { one, evidence, findings }] of night.entries()) {
      const { proposal } = conclude(findings, { marks: evidence, currency: 'GBP' }, decisions[index]!);
      const { action, to } = proposal;
      if (action === 'trial' && !onTrial.has(one.truth)) {
        one.setInterval(to.interval, 0.25);
        onTrial.add(one.truth);
        changed.add(one.truth);
      } else if (action === 'start' || action === 'shorten' || action === 'lengthen' || action === 'stop') {
        one.setInterval(to.interval);
        current.set(one.truth, to.interval);
        changed.add(one.truth);
      }
    }
  }
  for (const one of lived) one.liveUntil(historyDays + months * monthDays);
  return changed;
}

function evidenceOf(one: LivedClass, interval: number | null, now: number) {
  const { plannedMinor, failureMinor, statutory } = one.truth;
  return anEvidence(one.positions(), {
    now,
    statutory,
    costs: { plannedMinor, failureMinor, groupPlannedMinor: null },
    currentTask: interval === null ? null : { name: 'Replace', interval },
  });
}

/** The costs of many seeds beside the best possible, as Markdown. */
function report(seeds: number, classes: number): string {
  const rows = [12, 36].map((months) => {
    const results = Array.from({ length: seeds }, (_, seed) =>
      yearOfAdvice({ classes, seed: seed + 1, months, every: 1 }),
    );
    const cell = (policy: AdvicePolicy) => {
      const ratios = results.map(({ cost }) => cost[policy] / cost['best-possible']);
      const mean = ratios.reduce((sum, ratio) => sum + ratio, 0) / seeds;
      const variance = ratios.reduce((sum, ratio) => sum + (ratio - mean) ** 2, 0) / (seeds - 1);
      return `${(100 * mean).toFixed(1)} % ± ${(100 * Math.sqrt(variance / seeds)).toFixed(1)}`;
    };
    const changed = results.reduce((sum, one) => sum + one.changed, 0) / seeds;
    const statutory = results.reduce((sum, one) => sum + one.changedStatutory, 0);
    return `| ${[String(months), ...policies.map(cell), changed.toFixed(1), String(statutory)].join(' | ')} |`;
  });
  return `# A year of advice

${classes} simulated classes of 24 places, every other one wearing out, three years of records, then so many months;
schedules to start with are too short, too long, needless or missing, and two classes in twenty are statutory. Cost
beside the best possible (the true best interval from the first day), mean of ${seeds} seeds ± one standard error.
Proposals are looked at every month. \`npm run calibrate:advice\` makes this page anew.

| months | follow the proposals | never change | every year, everywhere | best possible | classes changed | of these statutory |
| --- | --- | --- | --- | --- | --- | --- |
${rows.join('\n')}
`;
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
  const page = report(6, 40);
  writeFileSync(fileURLToPath(new URL('year-of-advice.md', import.meta.url)), page);
  console.log(page);
}
