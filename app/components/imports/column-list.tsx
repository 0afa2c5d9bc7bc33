import { columnsOf } from '~/models/import-columns';
import type { ImportKind } from '~/models/import-types';
import { Disclosure } from '../disclosure';

const examples: Record<ImportKind, Readonly<Record<string, string>>> = {
  register: {
    site: 'Fenwick Baths',
    area: 'Plant room',
    class: 'Circulation pump seal',
    clock: 'days',
    item: 'seal',
    items: 'seals',
    tag: 'FB-PMP-01',
    quantity: '1',
    'in service': '2021-03-01',
  },
  history: {
    tag: 'FB-PMP-01',
    date: '2024-03-14',
    time: '09:05',
    event: 'failure',
    result: 'renewed',
    'failure mode': 'Leaking',
    record: '1001',
  },
};

/** The columns a file of one kind may have, and such a file to start from. */
export function ColumnList({ kind }: { kind: ImportKind }) {
  return (
    <Disclosure summary={`Columns of a ${kind} file`}>
      <dl className="grid gap-x-6 gap-y-2 md:grid-cols-[11rem_1fr]">
        {columnsOf(kind).map(({ name, required, meaning }) => (
          <div key={name} className="contents">
            <dt className="font-bold">
              {name}
              {required && <span className="text-grey font-normal"> (needed)</span>}
            </dt>
            <dd className="max-md:mb-2">{meaning}</dd>
          </div>
        ))}
      </dl>
      <p className="mt-4">
        Days are written as 2026-03-14, decimals with a point. Columns may stand in any order, parted by
        commas, semicolons or tabs. A column that is left out leaves what is held alone; an empty cell clears
        it.
      </p>
      <p className="mt-2">
        <a download={`${kind}.csv`} href={exampleAddress(kind)} className="inline-flex min-h-11 items-center">
          Download a {kind} file to start from
        </a>
      </p>
    </Disclosure>
  );
}

function exampleAddress(kind: ImportKind): string {
  const names = columnsOf(kind).map(({ name }) => name);
  const lines = [names, names.map((name) => examples[kind][name] ?? '')].map((cells) => cells.join(','));
  return `data:text/csv;charset=utf-8,${encodeURIComponent(`${lines.join('\r\n')}\r\n`)}`;
}
