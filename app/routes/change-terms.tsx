import { parseWithZod } from '@conform-to/zod/v4';
import { data, href } from 'react-router';
import { z } from 'zod';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { PutForwardFields, startAt } from '~/components/changes/put-forward-fields';
import { putForwardRefusal } from '~/components/changes/put-forward-refusal';
import { putForwardSchema } from '~/components/changes/put-forward-schema';
import { Notice } from '~/components/notice';
import { currentAssessment } from '~/models/assessments.server';
import { readClassHead } from '~/models/class-list.server';
import { openStates } from '~/models/schedule-change';
import { reviseChange, type ReviseResult } from '~/models/schedule-changes-put-forward.server';
import { termsOf } from '~/models/schedule-changes-terms.server';
import { findChange } from '~/models/schedule-changes.server';
import { findRenewingTask } from '~/models/schedule-effect.server';
import { listSitesOfClass } from '~/models/trial-part.server';
import { now, today } from '~/services/clock.server';
import { redirectWithToast } from '~/services/flash.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/change-terms';

/** Who comes second is shown what the first one did, so a refusal too reads it again. */
export const shouldRevalidate = () => true;

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Put it differently${loaderData ? `: ${loaderData.change.className}` : ''} · Intervale` },
];

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireRole(context, request, 'lead');
  const db = database();
  const { change, head, assessment } = await standingOf(params.changeId);
  const { timeZone, currency } = organisation(context);
  const [task, sites] = await Promise.all([
    findRenewingTask(db, change.classId, today(timeZone)),
    listSitesOfClass(db, change.classId),
  ]);
  return {
    change: {
      id: change.id,
      className: change.className,
      version: change.version,
      isOpen: openStates.includes(change.state),
      isOwn: change.putForwardById === viewer.id,
      isMarked: change.isMarked,
    },
    start: {
      ...startAt({ to: change.to, onPart: change.action === 'trial' }, change.clock),
      tags: change.part.map(({ tag }) => tag).join(', '),
      reason: change.reason,
    },
    head: { itemSingular: head.itemSingular, itemPlural: head.itemPlural },
    standing: assessment && {
      clock: assessment.findings.clock,
      today: assessment.findings.schedule.current.interval,
      cautions: assessment.conclusion.cautions,
      proposal: assessment.conclusion.proposal,
    },
    taskId: task?.id ?? null,
    sites,
    currency,
  };
}

export async function action({ context, request, params }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'lead');
  const db = database();
  const { change, head, assessment } = await standingOf(params.changeId);
  const submission = parseWithZod(await request.formData(), { schema: putForwardSchema });
  if (submission.status !== 'success') return data(submission.reply(), { status: 400 });
  const form = submission.value;
  const refuse = (sentence: string) => data(submission.reply({ formErrors: [sentence] }), { status: 409 });
  if (assessment === null) return refuse(putForwardRefusal({ outcome: 'not-assessed' }));

  const classOf = { classId: change.classId, itemPlural: head.itemPlural, assessment };
  const wanted = await termsOf(db, classOf, form);
  if (wanted.outcome === 'refused') {
    return data(submission.reply({ fieldErrors: { [wanted.about]: [wanted.sentence] } }), { status: 400 });
  }
  const { timeZone } = organisation(context);
  const result = await reviseChange(db, {
    changeId: change.id,
    version: form.version ?? 0,
    terms: wanted.terms,
    origin: wanted.origin,
    taskId: form.taskId,
    personId: viewer.id,
    words: null,
    now: now(),
    today: today(timeZone),
  });
  if (result.outcome === 'done') {
    return redirectWithToast(href('/changes/:changeId', { changeId: change.id }), {
      message: 'Put differently. It waits for a decision.',
    });
  }
  return refuse(refusalOf(result));
}

function refusalOf(result: Exclude<ReviseResult, { outcome: 'done' }>): string {
  switch (result.outcome) {
    case 'moved-on':
      return 'Somebody has moved this change on meanwhile, or it was changed in another window. What you typed is still here; look at the change again before you send it.';
    case 'not-yours':
      return 'Only the person who put it forward may do that.';
    default:
      return putForwardRefusal(result);
  }
}

/** @throws a 404 answer for no such change. */
async function standingOf(changeId: string) {
  const db = database();
  const change = z.uuid().safeParse(changeId).success ? await findChange(db, changeId) : undefined;
  const head = change && (await readClassHead(db, 'all', change.classId));
  if (!change || !head) {
    throw new Response('There is no such change.', { status: 404, statusText: 'Not found' });
  }
  return { change, head, assessment: await currentAssessment(db, change.classId) };
}

export default function ChangeTerms({ loaderData, actionData }: Route.ComponentProps) {
  const { change, start, head, standing, taskId, sites, currency } = loaderData;
  const whyNot = whyNotOf(change);
  return (
    <div className="max-w-[44rem]">
      <Breadcrumbs
        crumbs={[
          { label: 'Changes', to: href('/changes') },
          { label: change.className, to: href('/changes/:changeId', { changeId: change.id }) },
          { label: 'Put it differently' },
        ]}
      />
      <h1>Put it differently</h1>
      {whyNot !== null && <Notice title="This cannot be changed here">{whyNot}</Notice>}
      {standing !== null && (whyNot === null || actionData !== undefined) && (
        <>
          <p className="mt-2">
            It then rests on the evidence as it stands today, and waits for a decision again.
          </p>
          <PutForwardFields
            head={head}
            standing={standing}
            sites={sites}
            currency={currency}
            start={start}
            hidden={{ id: change.id, taskId, version: change.version }}
            refused={actionData}
            button="Put it forward like this"
            refusedTitle="Nothing was changed"
          />
        </>
      )}
    </div>
  );
}

function whyNotOf({
  isOwn,
  isOpen,
  isMarked,
}: Pick<Route.ComponentProps['loaderData']['change'], 'isOwn' | 'isOpen' | 'isMarked'>): string | null {
  if (!isOwn) return 'Only the person who put it forward can put it differently.';
  if (!isOpen) return 'It does not wait for a decision any more. Put a new change forward instead.';
  return isMarked ? putForwardRefusal({ outcome: 'marked' }) : null;
}
