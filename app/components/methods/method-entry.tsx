import { ScrollBox } from '~/components/scroll-box';
import type { Method } from './method';

/** A method with its formulas and symbols as MathML. */
export interface MethodShown extends Omit<Method, 'formulas' | 'symbols'> {
  readonly formulas: readonly string[];
  readonly symbols: readonly { readonly symbol: string; readonly meaning: string }[];
}

/** One method: what it decides first, then the formula and what stands behind it. */
export function MethodEntry({ method }: { method: MethodShown }) {
  const { id, name, decides, formulas, symbols, assumes, source, checks } = method;
  return (
    <section aria-labelledby={id} className="border-hair border-b py-6">
      <h3 id={id} className="text-[1.15rem]">
        {name}
      </h3>
      <p className="mt-1 max-w-[62ch]">{decides}</p>
      {formulas.map((formula) => (
        <div key={formula} className="my-3">
          <ScrollBox label={`Formula: ${name}`}>
            <MathMl markup={formula} />
          </ScrollBox>
        </div>
      ))}
      {symbols.length > 0 && (
        <dl className="mt-2 grid grid-cols-[minmax(4rem,auto)_1fr] gap-x-4 gap-y-1 text-[0.95rem]">
          {symbols.map(({ symbol, meaning }) => (
            <div key={meaning} className="col-span-2 grid grid-cols-subgrid">
              <dt>
                <MathMl markup={symbol} />
              </dt>
              <dd>{meaning}</dd>
            </div>
          ))}
        </dl>
      )}
      <ul className="mt-3 max-w-[62ch] list-disc pl-5 text-[0.95rem]">
        {assumes.map((sentence) => (
          <li key={sentence}>{sentence}</li>
        ))}
      </ul>
      <p className="text-grey mt-3 text-[0.92rem]">Source: {source}</p>
      {checks.length > 0 && (
        <table className="mt-3 w-full max-w-[46rem] text-left text-[0.92rem] [&_td]:py-1 [&_td]:pr-4 [&_td]:align-top [&_th]:py-1 [&_th]:pr-4">
          <caption className="sr-only">Values that {name} gives again</caption>
          <thead>
            <tr className="border-hair border-b">
              <th scope="col">Gives again</th>
              <th scope="col">Value</th>
              <th scope="col">Published in</th>
            </tr>
          </thead>
          <tbody>
            {checks.map((check) => (
              <tr key={check.id} className="border-hair border-b">
                <td>{check.what}</td>
                <td className="tabular whitespace-nowrap">{check.value.replace('-', '\u2212')}</td>
                <td className="text-grey">{check.source}</td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </section>
  );
}

/** Markup that our own server made of our own TeX. */
function MathMl({ markup }: { markup: string }) {
  return <span dangerouslySetInnerHTML={{ __html: markup }} />;
}
