import type { FieldChange } from './correction-words';

/** What is different about a record, a line a part: "Mode: leaking → cracked". */
export function FieldChanges({ changes }: { changes: readonly FieldChange[] }) {
  return changes.map(({ name, from, to }) => (
    <span key={name} className="block [overflow-wrap:anywhere]">
      {name}: {from} <span aria-hidden="true">→</span>
      <span className="sr-only">to</span> {to}
    </span>
  ));
}
