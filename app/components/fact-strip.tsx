import type { ReactNode } from 'react';

export interface Fact {
  value?: ReactNode;
  /** What the value is; alone, a plain remark such as "as of last night". */
  label: ReactNode;
}

/** The few figures a page rests on, in one ruled line that wraps. */
export function FactStrip({ facts }: { facts: readonly Fact[] }) {
  return (
    <ul className="border-hair my-4 flex flex-wrap items-baseline gap-x-8 gap-y-1 border-y py-2.5 text-[0.92rem]">
      {facts.map((fact, index) => (
        <li key={index}>
          {fact.value != null && <b className="tabular text-[1.1rem]">{fact.value} </b>}
          {fact.label}
        </li>
      ))}
    </ul>
  );
}
