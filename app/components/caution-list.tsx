export type CautionSeverity = 'note' | 'caution' | 'stop';

export interface CautionItem {
  code: string;
  /** What is the case, with its numbers in it. */
  sentence: string;
  /** What to do about it. */
  action: string;
  severity: CautionSeverity;
}

const RULE: Record<CautionSeverity, string> = {
  note: 'border-hair',
  caution: 'border-amber',
  stop: 'border-danger',
};

const WORD: Record<CautionSeverity, { text: string; className: string } | null> = {
  note: null,
  caution: { text: 'Caution.', className: 'text-amber' },
  stop: { text: 'Evidence only.', className: 'text-danger' },
};

/** The cautions that are part of the advice, in the order given; stands above any button. */
export function CautionList({ cautions }: { cautions: readonly CautionItem[] }) {
  if (cautions.length === 0) return <p className="text-grey">No caution applies.</p>;
  return (
    <ul className="grid gap-3">
      {cautions.map(({ code, sentence, action, severity }) => {
        const word = WORD[severity];
        return (
          <li key={code} data-caution={code} className={`border-l-[3px] py-1 pl-4 ${RULE[severity]}`}>
            <p className="font-bold">
              {word !== null && <span className={word.className}>{word.text} </span>}
              {sentence}
            </p>
            <p>{action}</p>
          </li>
        );
      })}
    </ul>
  );
}
