import { Form, href } from 'react-router';
import { alarmAction, alarmEvidence, alarmTitle } from '~/advice/alarm-words';
import type { AlarmKind } from '~/advice/alarm-findings';
import { Button } from '~/components/button';
import { Disclosure } from '~/components/disclosure';
import { formatNoun } from '~/format/number';
import { formatCalendarDate, formatDate } from '~/format/date';
import { Notice } from '~/components/notice';
import { TextAreaField } from '~/components/text-field';

/** Longest reason that is kept. */
export const longestClearReason = 1000;

/** What the notices show of an alarm. */
export interface AlarmShown {
  id: string;
  kind: AlarmKind;
  /** Whether the class is statutory or endangers people. */
  isMarked: boolean;
  raisedAsOf: string;
  logE: number;
  failures: number;
  clearedAt: Date | null;
  clearedByName: string | null;
  clearReason: string | null;
}

interface AlarmNoticesProps {
  alarms: readonly AlarmShown[];
  itemPlural: string;
  /** Whether the viewer may clear alarms. */
  mayClear: boolean;
  timeZone: string;
}

/** The class's open alarms, each with a form to clear it, and the cleared ones behind a disclosure. */
export function AlarmNotices({ alarms, itemPlural, mayClear, timeZone }: AlarmNoticesProps) {
  const open = alarms.filter(({ clearedAt }) => clearedAt === null);
  const cleared = alarms.filter(({ clearedAt }) => clearedAt !== null);
  if (alarms.length === 0) return null;
  return (
    <section aria-label="Alarms">
      {open.map((alarm) => (
        <Notice key={alarm.id} tone="warning" title={`Alarm: ${alarmTitle(alarm.kind, itemPlural)}`}>
          <AlarmWords alarm={alarm} />
          {mayClear && (
            <Disclosure summary="Clear this alarm">
              <ClearAlarmForm alarmId={alarm.id} />
            </Disclosure>
          )}
        </Notice>
      ))}
      {cleared.length > 0 && (
        <Disclosure summary={formatNoun(cleared.length, 'cleared alarm')}>
          <ul className="grid gap-3">
            {cleared.map((alarm) => (
              <li key={alarm.id}>
                <p className="font-bold">{alarmTitle(alarm.kind, itemPlural)}</p>
                <p>
                  Raised for {formatCalendarDate(alarm.raisedAsOf)}, cleared{' '}
                  {alarm.clearedAt && formatDate(alarm.clearedAt, timeZone)}
                  {alarm.clearedByName === null ? '' : ` by ${alarm.clearedByName}`}:{' '}
                  <span className="[overflow-wrap:anywhere]">{alarm.clearReason}</span>
                </p>
              </li>
            ))}
          </ul>
        </Disclosure>
      )}
    </section>
  );
}

/** When it was raised, how strong the evidence is, and what to do. */
export function AlarmWords({
  alarm,
}: {
  alarm: Pick<AlarmShown, 'kind' | 'isMarked' | 'raisedAsOf' | 'logE' | 'failures'>;
}) {
  return (
    <>
      <p>
        Raised for {formatCalendarDate(alarm.raisedAsOf)}. {alarmEvidence(alarm)}
      </p>
      <p>{alarmAction(alarm.kind, alarm.isMarked)}</p>
    </>
  );
}

interface ClearAlarmFormProps {
  alarmId: string;
  /** What was typed, and what is wrong with it, after a refusal. */
  reason?: string;
  errors?: readonly string[];
}

/** The form that clears an alarm; works without JavaScript. */
export function ClearAlarmForm({ alarmId, reason, errors }: ClearAlarmFormProps) {
  return (
    <Form method="post" action={href('/alarms/:alarmId/clear', { alarmId })}>
      <TextAreaField
        name="reason"
        id={`reason-${alarmId}`}
        label="Why it can be cleared"
        hint="What was found, or what was done about it. A new alarm then needs new evidence."
        defaultValue={reason}
        errors={errors}
        required
        maxLength={longestClearReason}
      />
      <Button tone="quiet">Clear the alarm</Button>
    </Form>
  );
}
