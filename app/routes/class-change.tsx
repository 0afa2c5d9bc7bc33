import { parseWithZod } from '@conform-to/zod/v4';
import { randomUUID } from 'node:crypto';
import { data, href, Link } from 'react-router';
import { z } from 'zod';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { CautionList } from '~/components/caution-list';
import { PutForwardFields, proposedStart, startAt } from '~/components/changes/put-forward-fields';
import { putForwardRefusal } from '~/components/changes/put-forward-refusal';
import { putForwardSchema } from '~/components/changes/put-forward-schema';
import { EmptyState } from '~/components/empty-state';
import { Notice } from '~/components/notice';
import { formatCalendarDate } from '~/format/date';
import { currentAssessment } from '~/models/assessments.server';
import { readClassHead } from '~/models/class-list.server';
import { putForward } from '~/models/schedule-changes-put-forward.server';
import { termsOf } from '~/models/schedule-changes-terms.server';
import { findOpenChange } from '~/models/schedule-changes.server';
import { findRenewingTask } from '~/models/schedule-effect.server';
import { listSitesOfClass } from '~/models/trial-part.server';
import { now, today } from '~/services/clock.server';
import { redirectWithToast } from '~/services/flash.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/class-change';

/** A number tried on the class page, in clock units; 0 for run to failure. */
const searchSchema = z.object({ to: z.coerce.number().min(0).max(1_000_000).optional().catch(undefined) });

/** Who comes second is shown what the first one did, so a refusal too reads it again. */
export const shouldRevalidate = () => true;

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Put a change forward${loaderData ? ` for ${loaderData.head.name}` : ''} · Intervale` },
];

export async function loader({ context, request, params }: Route.LoaderArgs) {
  requireRole(context, request, 'lead');
  const db = database();
  const { head, assessment } = await standingOf(params.classId);
  const { timeZone, currency } = organisation(context);
  const [task, openChangeId, sites] = await Promise.all([
    findRenewingTask(db, head.id, today(timeZone)),
    findOpenChange(db, head.id),
    listSitesOfClass(db, head.id),
  ]);
  const { to } = searchSchema.parse(Object.fromEntries(new URL(request.url).searchParams));
  return {
    head,
    currency,
    openChangeId: openChangeId ?? null,
    endsOn: task?.endsOn ?? null,
    sites,
    form: {
      id: randomUUID(),
      taskId: task?.id ?? null,
      tried: to === undefined ? null : { to: to === 0 ? null : to },
    },
    standing: assessment && {
      clock: assessment.findings.clock,
      today: assessment.findings.schedule.current.interval,
      cautions: assessment.conclusion.cautions,
      proposal: assessment.conclusion.proposal,
    },
  };
}

export async function action({ context, request, params }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'lead');
  const db = database();
  const { head, assessment } = await standingOf(params.classId);
  const submission = parseWithZod(await request.formData(), { schema: putForwardSchema });
  if (submission.status !== 'success') return data(submission.reply(), { status: 400 });
  const form = submission.value;
  const refuse = (sentence: string) => data(submission.reply({ formErrors: [sentence] }), { status: 409 });
  if (assessment === null) return refuse(putForwardRefusal({ outcome: 'not-assessed' }));

  const wanted = await termsOf(db, { classId: head.id, itemPlural: head.itemPlural, assessment }, form);
  if (wanted.outcome === 'refused') {
    return data(submission.reply({ fieldErrors: { [wanted.about]: [wanted.sentence] } }), { status: 400 });
  }
  const { timeZone } = organisation(context);
  const result = await putForward(db, {
    id: form.id,
    classId: head.id,
    terms: wanted.terms,
    origin: wanted.origin,
    taskId: form.taskId,
    personId: viewer.id,
    now: now(),
    today: today(timeZone),
  });
  if (result.outcome === 'stored' || result.outcome === 'already-stored') {
    return redirectWithToast(href('/changes/:changeId', { changeId: form.id }), {
      message: 'Put forward. A manager decides.',
    });
  }
  return refuse(putForwardRefusal(result));
}

async function standingOf(classId: string) {
  const head = await readClassHead(database(), 'all', classId);
  if (head === null) throw new Response('There is no such class.', { status: 404 });
  return { head, assessment: await currentAssessment(database(), head.id) };
}

export default function PutForward({ loaderData, actionData }: Route.ComponentProps) {
  const { head } = loaderData;
  return (
    <div className="max-w-[44rem]">
      <Breadcrumbs
        crumbs={[
          { label: 'Classes', to: href('/classes') },
          { label: head.name, to: href('/classes/:classId', { classId: head.id }) },
          { label: 'Put a change forward' },
        ]}
      />
      <h1>Put a change forward</h1>
      <FormOrWhyNot loaderData={loaderData} refused={actionData} />
    </div>
  );
}

type Loaded = Route.ComponentProps['loaderData'];

interface FormProps {
  loaderData: Loaded;
  refused: Route.ComponentProps['actionData'];
}

function FormOrWhyNot({ loaderData, refused }: FormProps) {
  const { head, standing, openChangeId, endsOn, sites, currency, form } = loaderData;
  if (head.statutory || head.endangersPeople) {
    return <NotHere head={head} cautions={standing?.cautions ?? []} />;
  }
  if (standing === null) {
    return (
      <EmptyState title="Not assessed yet">
        There is no evidence to put forward before the first night has assessed this class.
      </EmptyState>
    );
  }
  // What was typed stays on the screen of whoever came second.
  if (openChangeId !== null && refused === undefined) return <OneWaits changeId={openChangeId} />;
  if (endsOn !== null && refused === undefined) return <EndsAlready head={head} endsOn={endsOn} />;
  return (
    <>
      {openChangeId !== null && <OneWaits changeId={openChangeId} />}
      <PutForwardFields
        head={head}
        standing={standing}
        sites={sites}
        currency={currency}
        start={
          form.tried === null
            ? proposedStart(standing)
            : startAt({ to: form.tried.to, onPart: false }, standing.clock)
        }
        hidden={{ id: form.id, taskId: form.taskId }}
        refused={refused}
        button="Put forward"
        refusedTitle="Not put forward yet"
      />
    </>
  );
}

function OneWaits({ changeId }: { changeId: string }) {
  return (
    <Notice title="A change of this class waits already">
      <p>
        One at a time: <Link to={href('/changes/:changeId', { changeId })}>look at it</Link>, and have it
        decided or withdrawn first.
      </p>
    </Notice>
  );
}

function EndsAlready({ head, endsOn }: { head: Loaded['head']; endsOn: string }) {
  return (
    <Notice title="The schedule changes already">
      <p>
        The schedule in force ends on {formatCalendarDate(endsOn)}. Put the next change forward once the night
        has looked at what comes after it; or have{' '}
        <Link to={`${href('/changes')}?class=${head.id}`}>the change that is approved</Link> taken back.
      </p>
    </Notice>
  );
}

function NotHere({
  head,
  cautions,
}: {
  head: Loaded['head'];
  cautions: NonNullable<Loaded['standing']>['cautions'];
}) {
  const why = head.statutory ? 'A law or code asks for its work' : 'A failure can endanger people';
  return (
    <>
      <Notice tone="danger" title="Not decided here">
        <p>
          {why}. What the records show is evidence only: take it to whoever answers for the local code, and to
          a licensed practitioner. No change of this class can be put forward or approved in this product.
        </p>
      </Notice>
      <CautionList cautions={cautions.filter(({ severity }) => severity === 'stop')} />
    </>
  );
}
