import type { ReactNode } from 'react';
import { cautionNames } from '~/advice/caution-names';
import { TrendWord } from '~/components/trend-word';
import { VerdictWord } from '~/components/verdict-word';
import { formatCalendarDate } from '~/format/date';
import { formatCount, formatFixed, formatInterval, formatNoun } from '~/format/number';
import type { ClassStanding, CorrectionEffect } from '~/models/correction-effect.server';
import { effectSentence } from './effect-words';

const rows: { name: string; of: (standing: ClassStanding) => ReactNode }[] = [
  { name: 'Verdict', of: ({ verdict }) => <VerdictWord verdict={verdict} /> },
  { name: 'Trend', of: ({ trend }) => <TrendWord trend={trend} /> },
  { name: 'Failures', of: ({ failures }) => formatCount(failures) },
  { name: 'Shape β, 90 %', of: ({ fit }) => shapeWords(fit) },
  { name: 'Proposal', of: ({ proposal }) => proposal },
];

/** A class judged on its records as they are and as a correction would leave them, side by side. */
export function EffectTable({
  effect: { asOf, before, after },
  without,
}: {
  effect: CorrectionEffect;
  /** How many of those chosen cannot be corrected, and are not in it. */
  without: number;
}) {
  return (
    <section aria-labelledby="effect" className="my-5">
      <h3 id="effect">What it does to the verdict</h3>
      <p className="mt-1 font-bold">{effectSentence(before, after)}</p>
      <table className="mt-2 w-full text-left text-[0.95rem] [&_td]:py-1 [&_td]:pr-4 [&_td]:align-top [&_th]:py-1 [&_th]:pr-4 [&_th]:align-top">
        <caption className="sr-only">The class on its records as they are and as they would be</caption>
        <thead>
          <tr className="border-hair border-b">
            <td />
            <th scope="col">As it is</th>
            <th scope="col">As it would be</th>
          </tr>
        </thead>
        <tbody>
          {rows.map(({ name, of }) => (
            <tr key={name} className="border-hair border-b">
              <th scope="row" className="text-grey font-normal">
                {name}
              </th>
              <td>{of(before)}</td>
              <td>{of(after)}</td>
            </tr>
          ))}
        </tbody>
      </table>
      <Cautions before={before.cautions} after={after.cautions} />
      {without > 0 && (
        <p className="mt-2">Without the {formatNoun(without, 'failure')} that cannot be corrected.</p>
      )}
      <p className="text-grey mt-2 max-w-[60ch] text-[0.92rem]">
        Both are judged as of {formatCalendarDate(asOf)}, in the same way, and this class by itself. How it
        stands among all classes is settled at night, which may be stricter.
      </p>
    </section>
  );
}

function Cautions({ before, after }: Record<'before' | 'after', ClassStanding['cautions']>) {
  const parts = [
    { title: 'New cautions', codes: after.filter((code) => !before.includes(code)) },
    { title: 'Cautions that go', codes: before.filter((code) => !after.includes(code)) },
    { title: 'Cautions that stay', codes: after.filter((code) => before.includes(code)) },
  ].filter(({ codes }) => codes.length > 0);
  return parts.map(({ title, codes }) => (
    <p key={title} className="mt-2">
      {title}: {codes.map((code) => cautionNames[code]).join(', ')}.
    </p>
  ));
}

function shapeWords(fit: ClassStanding['fit']): string {
  if (fit.kind !== 'fit') return 'cannot be estimated';
  const two = (value: number) => formatFixed(value, 2);
  return `${two(fit.shape)} (${formatInterval(fit.shapeInterval.low, fit.shapeInterval.high, two)}), n = ${fit.failures}`;
}
