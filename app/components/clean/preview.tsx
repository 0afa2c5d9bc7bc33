import { Form } from 'react-router';
import { Button, LinkButton } from '~/components/button';
import { Notice } from '~/components/notice';
import { formatCalendarDate, formatDateTime } from '~/format/date';
import { formatCount, formatNoun } from '~/format/number';
import type { CorrectionPreview } from '~/models/correction-preview.server';
import { auditedChanges, correctionWords, deedWords, fieldChanges, type ModeNames } from './correction-words';
import { EffectTable } from './effect-table';
import { FieldChanges } from './field-changes';
import { refusalWords } from './refusal-words';

interface Names {
  modes: ModeNames;
  clock: 'calendar-days' | 'operating-hours';
}

interface PreviewProps extends Names {
  preview: CorrectionPreview;
  /** The list with its filter, to go back to. */
  backTo: string;
  timeZone: string;
}

/** What a correction would do, to the records and to the verdict, before anything is saved. */
export function Preview({ preview, backTo, timeZone, ...names }: PreviewProps) {
  const { correction, total, unchanged, refused, meanwhile, effect } = preview;
  return (
    <section aria-labelledby="preview">
      <h2 id="preview" className="mt-5">
        {correctionWords(correction, names.modes)}
      </h2>
      <p>
        {formatNoun(total - refused, 'failure')} would be corrected
        {unchanged > 0 &&
          `; ${formatNoun(unchanged, 'failure')} chosen ${unchanged === 1 ? 'is' : 'are'} so already`}
        . Nothing is saved yet.
      </p>
      {preview.modeGone && (
        <Notice tone="danger" title="This mode is not on the list of the class any more" announce>
          <p>Somebody merged it meanwhile. Change the choice, and take another one.</p>
        </Notice>
      )}
      <Meanwhile meanwhile={meanwhile} timeZone={timeZone} {...names} />
      {refused > 0 && (
        <Notice tone="danger" title={`${formatNoun(refused, 'failure')} cannot be corrected so`} announce>
          <p>
            The reason stands beside each. Leave {refused === 1 ? 'it' : 'them'} out, or correct{' '}
            {refused === 1 ? 'it' : 'them'} another way.
          </p>
        </Notice>
      )}
      {effect !== null && <EffectTable effect={effect} without={refused} />}
      <Records preview={preview} {...names} />
      <Decision preview={preview} backTo={backTo} />
    </section>
  );
}

/** Carries the whole choice along, so that nothing is lost whichever way it goes on. */
function Decision({ preview, backTo }: Pick<PreviewProps, 'preview' | 'backTo'>) {
  const { total, refused, meanwhile, maySave, correction } = preview;
  return (
    <Form method="post" action={backTo} className="mt-6 flex flex-wrap gap-3">
      <input type="hidden" name="correctionId" value={preview.correctionId} />
      <input type="hidden" name="correction" value={JSON.stringify(correction)} />
      <input type="hidden" name="chosen" value={preview.chosen} />
      {preview.all && <input type="hidden" name="all" value="on" />}
      {maySave && (
        <Button name="intent" value="save">
          {total === 0 ? 'Merge them' : `Save ${formatNoun(total, 'correction')}`}
        </Button>
      )}
      {meanwhile.length > 0 && (
        <Button name="intent" value="preview-again">
          Look again with what they are now
        </Button>
      )}
      {meanwhile.length === 0 && refused > 0 && refused < total && correction.kind !== 'merge-mode' && (
        <Button name="intent" value="leave-out">
          Leave {refused === 1 ? 'it' : `these ${formatCount(refused)}`} out and look again
        </Button>
      )}
      <Button name="intent" value="choose-again" tone="quiet">
        Change the choice
      </Button>
      <LinkButton to={backTo} tone="quiet">
        Leave it
      </LinkButton>
    </Form>
  );
}

function Meanwhile({
  meanwhile,
  timeZone,
  ...names
}: Pick<CorrectionPreview, 'meanwhile'> & Names & { timeZone: string }) {
  if (meanwhile.length === 0) return null;
  return (
    <Notice tone="warning" title={`${formatNoun(meanwhile.length, 'failure')} changed meanwhile`} announce>
      <ul>
        {meanwhile.slice(0, 10).map(({ id, tag, failedOn, change }) => (
          <li key={id} className="py-1">
            {tag}, {formatCalendarDate(failedOn, 'short')}: {change?.personName ?? 'somebody'}{' '}
            {deedWords(change?.action ?? '')}
            {change !== null && (
              <>
                , {formatDateTime(change.at, timeZone)}
                <FieldChanges changes={auditedChanges(change, names)} />
              </>
            )}
          </li>
        ))}
      </ul>
      {meanwhile.length > 10 && <p>and {formatCount(meanwhile.length - 10)} more</p>}
      <p>Nothing was saved. Your choice and your correction are still here.</p>
    </Notice>
  );
}

function Records({ preview: { records, total }, ...names }: Pick<PreviewProps, 'preview'> & Names) {
  if (records.length === 0) return null;
  return (
    <div className="my-5">
      <h3>Record by record</h3>
      <ul className="mt-1">
        {records.map((record) => (
          <li key={record.id} className="border-hair border-t py-2">
            <b>{record.tag}</b>, {record.siteName}, {formatCalendarDate(record.before.failedOn, 'short')}
            <FieldChanges changes={fieldChanges(record.before, record.after, names)} />
            {record.refusal !== null && (
              <span className="text-danger block font-bold">{refusalWords(record.refusal, record)}</span>
            )}
          </li>
        ))}
      </ul>
      {total > records.length && <p>and {formatCount(total - records.length)} more in the same way</p>}
    </div>
  );
}
