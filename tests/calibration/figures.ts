import { alarmKinds } from '~/advice/alarm-findings';
import { verdicts } from '~/advice/verdict';
import { intervals, type CoverageRow } from './coverage';
import type { Figures } from './run';
import type { Share } from './share';

const percent = (share: number) => `${(100 * share).toFixed(1)} %`;
const withError = ({ share, standardError }: Share) =>
  `${percent(share)} ± ${(100 * standardError).toFixed(1)}`;

function table(header: readonly string[], rows: readonly (readonly string[])[]): string {
  const line = (cells: readonly string[]) => `| ${cells.join(' | ')} |`;
  return [line(header), line(header.map(() => '---')), ...rows.map(line)].join('\n');
}

const nominal = (interval: CoverageRow['interval']) => (interval === 'saving' ? 0.8 : 0.9);

/** The figures of a calibration run as Markdown. */
export function figuresInMarkdown({
  coverage,
  testSizes,
  verdicts: judged,
  alarms,
  regret,
}: Figures): string {
  const counts = [...new Set(coverage.map(({ failures }) => failures))];
  const shapes = [...new Set(coverage.map(({ shape }) => shape))];
  const cell = (interval: string, shape: number, failures: number) => {
    const row = coverage.find(
      (one) => one.interval === interval && one.shape === shape && one.failures === failures,
    );
    return row === undefined ? '' : withError(row);
  };
  const missed = coverage.filter(
    ({ interval, failures, share }) => failures >= 20 && Math.abs(share - nominal(interval)) > 0.02,
  );
  const { memorylessYear, untilWearOut } = alarms;
  return `# Calibration

By simulation from fixed seeds; \`npm run calibrate\` makes this page anew. Positions with staggered ages, watched
for three years, mean scale 900 days; ± is one Monte-Carlo standard error.

## How often the intervals hold the truth

90 % nominal, the saving 80 %. Columns: failures expected in the class. The hazard bands rest on exact Poisson
limits, which hold more than they say. A saving is named only where wear-out is claimed; at shape 1 that claim is
wrong (its share stands among the verdicts below) and no saving named there can be right.

${table(
  ['interval', 'shape', ...counts.map(String)],
  intervals.flatMap((interval) =>
    shapes
      .filter((shape) => coverage.some((row) => row.interval === interval && row.shape === shape))
      .map((shape) => [
        interval,
        String(shape),
        ...counts.map((failures) => cell(interval, shape, failures)),
      ]),
  ),
)}

${
  missed.length === 0
    ? 'From 20 failures on every interval holds the truth within two percent of its level.'
    : `More than two percent off their level from 20 failures on:\n\n${missed
        .map((row) => `- ${row.interval}, shape ${row.shape}, ${row.failures} failures: ${withError(row)}`)
        .join('\n')}`
}

## Tests and verdicts

${table(
  ['what', 'seen', 'should be'],
  [
    ['Laplace test rejects at 5 % without a trend', withError(testSizes.laplace), '5 %'],
    ['age-rank test rejects at 5 % without memory', withError(testSizes.ageRank), '5 %'],
    ...verdicts.map((verdict) => [
      `verdict ${verdict} at shape 1`,
      withError(judged.memoryless[verdict]),
      '',
    ]),
    ...verdicts.map((verdict) => [`verdict ${verdict} at shape 2`, withError(judged.wearOut[verdict]), '']),
    [
      'false among those called wear-out, half of 40 classes wearing',
      `${percent(judged.falseDiscovery.mean)} ± ${(100 * judged.falseDiscovery.standardError).toFixed(1)}`,
      'at most 10 %',
    ],
  ],
)}

## Alarms

${table(
  ['what', 'seen', 'should be'],
  [
    ...alarmKinds.map((kind) => [
      `500 memoryless classes, a year of nights: E of ${kind} ever at 20`,
      withError(memorylessYear.plain[kind]),
      'at most 5 %',
    ]),
    ['the same: an alarm ever raised', withError(memorylessYear.raised), 'at most 5 %'],
    [
      'nights until the age alarm at shape 2, 30 positions: quarter, median, three quarters',
      `${untilWearOut.nights.quarter}, ${untilWearOut.nights.median}, ${untilWearOut.nights.threeQuarters}`,
      '',
    ],
    ['failures until then, median', String(untilWearOut.failures.median), ''],
    ['raised within five years', withError(untilWearOut.raisedWithinWatch), ''],
  ],
)}

## What following the advice costs beyond the true best

A failure costs ten times a planned renewal; nothing is proposed under 80 % of draws.

${table(
  ['shape', 'failures', 'median', 'nine in ten within', 'run to failure'],
  regret.map((row) => [
    String(row.shape),
    String(row.failures),
    percent(row.median),
    percent(row.nineInTen),
    percent(row.runToFailure),
  ]),
)}
`;
}
