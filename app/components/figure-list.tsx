import { Fragment, type ReactNode } from 'react';

/** Named figures under each other: the name in grey, the figure lined up. */
export function FigureList({ items }: { items: readonly { name: ReactNode; value: ReactNode }[] }) {
  return (
    <dl className="mt-3 grid grid-cols-[minmax(7rem,auto)_1fr] gap-x-4 gap-y-0.5 text-[0.92rem]">
      {items.map(({ name, value }, index) => (
        <Fragment key={index}>
          <dt className="text-grey">{name}</dt>
          <dd className="tabular">{value}</dd>
        </Fragment>
      ))}
    </dl>
  );
}
