import { formatCalendarDate, formatDateTime } from '~/format/date';
import { Notice } from '../notice';
import { effectWords } from './words';

export interface PerhapsSameFailure {
  id: string;
  modeName: string | null;
  effect: 'renewed' | 'patched';
  failedOn: string;
  failedAt: Date | null;
  loggedAt: Date;
  loggedByName: string | null;
}

/** Failures stored already that may be the one being logged now. */
export function PerhapsSame({
  failures,
  timeZone,
}: {
  failures: readonly PerhapsSameFailure[];
  timeZone: string;
}) {
  return (
    <Notice tone="warning" announce title="Is this one logged already?">
      <ul>
        {failures.map((failure) => (
          <li key={failure.id} className="mt-1">
            {failure.modeName ?? 'Something failed'},{' '}
            {failure.failedAt
              ? formatDateTime(failure.failedAt, timeZone)
              : formatCalendarDate(failure.failedOn)}
            : {effectWords[failure.effect].toLowerCase()}. Logged by {failure.loggedByName ?? 'an import'},{' '}
            {formatDateTime(failure.loggedAt, timeZone, 'short')}.
          </li>
        ))}
      </ul>
      <p className="mt-1">Nothing is stored yet. If it failed once more, save again.</p>
    </Notice>
  );
}

/** The same in one sentence, for beside the button. */
export function perhapsSameSentence(failures: readonly PerhapsSameFailure[], timeZone: string): string {
  const [latest] = failures;
  if (!latest) return '';
  const when = formatDateTime(latest.loggedAt, timeZone, 'short');
  const what = latest.modeName ? `“${latest.modeName}”` : 'a failure';
  return `${latest.loggedByName ?? 'An import'} logged ${what} here already (${when}). Save only if it failed again.`;
}
