import { parseWithZod } from '@conform-to/zod/v4';
import { data, href } from 'react-router';
import { z } from 'zod';
import { alarmTitle } from '~/advice/alarm-words';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { AlarmWords, ClearAlarmForm, longestClearReason } from '~/components/class-page/alarm-notices';
import { ErrorSummary } from '~/components/error-summary';
import { clearAlarm, findAlarm, type Alarm } from '~/models/alarms.server';
import { now } from '~/services/clock.server';
import { redirectWithToast } from '~/services/flash.server';
import { requireRole, type Viewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/alarm-clear';

const formSchema = z.object({
  reason: z
    .string({ error: 'Say why it can be cleared.' })
    .trim()
    .min(1, 'Say why it can be cleared.')
    .max(longestClearReason, `Keep it to ${longestClearReason} characters.`),
});

/** The page is met only by its own address, or after a refusal: the form itself stands on the class page. */
export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireRole(context, request, 'lead');
  const alarm = await alarmToClear(viewer, params.alarmId);
  if (alarm.clearedAt !== null) throw await backToClass(alarm, 'already-cleared');
  return { alarm };
}

export async function action({ context, request, params }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'lead');
  const alarm = await alarmToClear(viewer, params.alarmId);
  const submission = parseWithZod(await request.formData(), { schema: formSchema });
  if (submission.status !== 'success') return data(submission.reply(), { status: 400 });

  const { outcome } = await clearAlarm(database(), {
    alarmId: alarm.id,
    personId: viewer.id,
    reason: submission.value.reason,
    now: now(),
  });
  return backToClass(alarm, outcome === 'cleared' ? 'cleared' : 'already-cleared');
}

/** @throws a 404 answer for no such alarm, and the same one for a class the viewer sees nothing of. */
async function alarmToClear(viewer: Viewer, alarmId: string): Promise<Alarm> {
  const alarm = z.uuid().safeParse(alarmId).success
    ? await findAlarm(database(), viewer.siteIds, alarmId)
    : undefined;
  if (!alarm) throw new Response('There is nothing here.', { status: 404, statusText: 'Not found' });
  return alarm;
}

function backToClass({ classId }: Alarm, outcome: 'cleared' | 'already-cleared'): Promise<Response> {
  return redirectWithToast(
    href('/classes/:classId', { classId }),
    outcome === 'cleared'
      ? { message: 'Alarm cleared. A new one needs new evidence.' }
      : { message: 'Somebody has cleared this alarm already; their reason stands.', kind: 'warning' },
  );
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Clear an alarm${loaderData ? ` of ${loaderData.alarm.className}` : ''} · Intervale` },
];

export default function AlarmClearPage({ loaderData, actionData }: Route.ComponentProps) {
  const { alarm } = loaderData;
  const errors = actionData?.error?.reason ?? [];
  const typed = actionData?.initialValue?.reason;
  return (
    <div className="max-w-[40rem]">
      <Breadcrumbs
        crumbs={[
          { label: 'Classes', to: href('/classes') },
          { label: alarm.className, to: href('/classes/:classId', { classId: alarm.classId }) },
        ]}
      />
      <h1>Clear an alarm</h1>
      <ErrorSummary
        errors={errors.map((message) => ({ fieldId: `reason-${alarm.id}`, message }))}
        title="Nothing was changed"
      />
      <p className="font-bold">{alarmTitle(alarm.kind, alarm.itemPlural)}</p>
      <AlarmWords alarm={alarm} />
      <ClearAlarmForm
        alarmId={alarm.id}
        reason={typeof typed === 'string' ? typed : undefined}
        errors={errors}
      />
    </div>
  );
}
