import { Form, href } from 'react-router';
import { cautionNames } from '~/advice/caution-names';
import { Button, LinkButton } from '~/components/button';
import { refusalSentence } from '~/components/log/refusal-words';
import { Notice } from '~/components/notice';
import { VerdictWord } from '~/components/verdict-word';
import { formatDateTime } from '~/format/date';
import { formatCount, formatFixed, formatInterval, formatNoun } from '~/format/number';
import type { ClassStanding } from '~/models/correction-effect.server';
import type { ChangedMeanwhile, CorrectedRecord } from '~/models/record-corrections.server';
import type { Correction } from '~/models/record-correction';
import { correctionWords, fieldChanges, type ModeNames } from './correction-words';

export interface CorrectionPreview {
  correctionId: string;
  correction: Correction;
  /** "id:version" of all that were chosen, joined by commas. */
  chosen: string;
  /** The first of them; `total` is how many would be corrected. */
  records: CorrectedRecord[];
  total: number;
  unchanged: number;
  refused: number;
  meanwhile: ChangedMeanwhile[];
  /** Null where nothing would be written. */
  effect: { before: ClassStanding; after: ClassStanding } | null;
}

interface PreviewProps {
  preview: CorrectionPreview;
  classId: string;
  modes: ModeNames;
  clock: 'calendar-days' | 'operating-hours';
  /** The list with its filter, to go back to. */
  backTo: string;
  timeZone: string;
}

/** What a correction would do, to the records and to the verdict, before anything is saved. */
export function Preview({ preview, classId, modes, clock, backTo, timeZone }: PreviewProps) {
  const { correction, records, total, unchanged, refused, meanwhile, effect } = preview;
  const maySave = total > 0 && refused === 0 && meanwhile.length === 0;
  return (
    <section aria-labelledby="preview">
      <h2 id="preview">{correctionWords(correction, modes)}</h2>
      <p>
        {formatNoun(total, 'failure')} would be corrected
        {unchanged > 0 &&
          `; ${formatNoun(unchanged, 'failure')} chosen ${unchanged === 1 ? 'is' : 'are'} so already`}
        . Nothing is saved yet.
      </p>
      <Meanwhile meanwhile={meanwhile} timeZone={timeZone} />
      {refused > 0 && (
        <Notice tone="danger" title={`${formatNoun(refused, 'failure')} cannot be corrected so`} announce>
          <p>The reason stands beside each. Go back and choose without them, or correct them another way.</p>
        </Notice>
      )}
      {effect !== null && <Effect effect={effect} />}
      <Records records={records} total={total} modes={modes} clock={clock} />
      <Form
        method="post"
        action={href('/classes/:classId/clean', { classId })}
        className="mt-6 flex flex-wrap gap-3"
      >
        <input type="hidden" name="correctionId" value={preview.correctionId} />
        <input type="hidden" name="correction" value={JSON.stringify(correction)} />
        <input type="hidden" name="chosen" value={preview.chosen} />
        {maySave && (
          <Button name="intent" value="save">
            Save {formatNoun(total, 'correction')}
          </Button>
        )}
        {meanwhile.length > 0 && (
          <Button name="intent" value="preview-again">
            Look again with what they are now
          </Button>
        )}
        <LinkButton to={backTo} tone="quiet">
          Back to the list
        </LinkButton>
      </Form>
    </section>
  );
}

function Meanwhile({ meanwhile, timeZone }: Pick<CorrectionPreview, 'meanwhile'> & { timeZone: string }) {
  if (meanwhile.length === 0) return null;
  return (
    <Notice tone="warning" title={`${formatNoun(meanwhile.length, 'failure')} changed meanwhile`} announce>
      <ul>
        {meanwhile.slice(0, 10).map(({ id, tag, personName, at }) => (
          <li key={id}>
            {tag}: {personName ?? 'somebody'}
            {at !== null && `, ${formatDateTime(at, timeZone)}`}
          </li>
        ))}
      </ul>
      <p>Nothing was saved. Your choice and your correction are still here.</p>
    </Notice>
  );
}

function Effect({ effect: { before, after } }: { effect: NonNullable<CorrectionPreview['effect']> }) {
  const appeared = after.cautions.filter((code) => !before.cautions.includes(code));
  const gone = before.cautions.filter((code) => !after.cautions.includes(code));
  const rows: { name: string; of: (standing: ClassStanding) => React.ReactNode }[] = [
    { name: 'Verdict', of: ({ verdict }) => <VerdictWord verdict={verdict} /> },
    { name: 'Trend', of: ({ trend }) => trend },
    { name: 'Failures', of: ({ failures }) => formatCount(failures) },
    { name: 'Shape β', of: ({ fit }) => shapeWords(fit) },
    { name: 'Proposal', of: ({ proposal }) => proposal },
  ];
  const same =
    before.verdict === after.verdict && before.trend === after.trend && before.proposal === after.proposal;
  return (
    <div className="my-5">
      <h3>What it does to the verdict</h3>
      <p className="mt-1 font-bold">
        {same
          ? 'Verdict, trend and proposal stay as they are.'
          : before.verdict === after.verdict
            ? 'The verdict stays; what follows from it changes.'
            : `The verdict changes from ${before.verdict} to ${after.verdict}.`}
      </p>
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
      {(appeared.length > 0 || gone.length > 0) && (
        <p className="mt-2">
          {appeared.length > 0 && `New cautions: ${appeared.map((code) => cautionNames[code]).join(', ')}. `}
          {gone.length > 0 && `No longer: ${gone.map((code) => cautionNames[code]).join(', ')}.`}
        </p>
      )}
      <p className="text-grey mt-2 text-[0.92rem]">
        Both on the same day and in the same way. The night also weighs all classes together, and may be
        stricter.
      </p>
    </div>
  );
}

function shapeWords(fit: ClassStanding['fit']): string {
  if (fit.kind !== 'fit') return 'cannot be estimated';
  const two = (value: number) => formatFixed(value, 2);
  return `${two(fit.shape)} (${formatInterval(fit.shapeInterval.low, fit.shapeInterval.high, two)}), n = ${fit.failures}`;
}

function Records({
  records,
  total,
  modes,
  clock,
}: Pick<CorrectionPreview, 'records' | 'total'> & Pick<PreviewProps, 'modes' | 'clock'>) {
  if (records.length === 0) return null;
  return (
    <div className="my-5">
      <h3>Record by record</h3>
      <ul className="mt-1">
        {records.map((record) => (
          <li key={record.id} className="border-hair border-t py-2">
            <b>{record.tag}</b>, {record.siteName}
            {fieldChanges(record.before, record.after, { modes, clock }).map(({ name, from, to }) => (
              <span key={name} className="block [overflow-wrap:anywhere]">
                {name}: {from} <span aria-label="to">→</span> {to}
              </span>
            ))}
            {record.refusal !== null && (
              <span className="text-danger block font-bold">{refusalSentence(record.refusal, record)}</span>
            )}
          </li>
        ))}
      </ul>
      {total > records.length && <p>and {formatCount(total - records.length)} more in the same way</p>}
    </div>
  );
}
