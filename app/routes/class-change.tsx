import { parseWithZod } from '@conform-to/zod/v4';
import { randomUUID } from 'node:crypto';
import { data, Form, href, Link } from 'react-router';
import { z } from 'zod';
import { capitalised } from '~/advice/capitalised';
import { refuseChange } from '~/advice/change-guards';
import { changeInWords } from '~/advice/change-words';
import { everyWords } from '~/advice/practicable-interval';
import { tryInterval } from '~/advice/price-schedule';
import { changingActions } from '~/advice/proposal';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { Button } from '~/components/button';
import { CautionList } from '~/components/caution-list';
import { Checkbox } from '~/components/checkbox';
import {
  intervalFields,
  putForwardSchema,
  type PutForwardForm,
} from '~/components/changes/put-forward-schema';
import { savingWords, sureWords } from '~/components/changes/change-words';
import { EmptyState } from '~/components/empty-state';
import { ErrorSummary } from '~/components/error-summary';
import { FigureList } from '~/components/figure-list';
import { Notice } from '~/components/notice';
import { RadioRows } from '~/components/radio-rows';
import { SelectField } from '~/components/select-field';
import { TextAreaField, TextField } from '~/components/text-field';
import { formatNoun } from '~/format/number';
import { currentAssessment, type Assessment } from '~/models/assessments.server';
import { readClassHead } from '~/models/class-list.server';
import { actionBetween, type ChangeAction, type ChangeTerms } from '~/models/schedule-change';
import { findOpenChange, putForward, type PutForwardResult } from '~/models/schedule-changes.server';
import { findRenewingTask } from '~/models/schedule-effect.server';
import { findPart, listSitesOfClass } from '~/models/trial-part.server';
import { now, today } from '~/services/clock.server';
import { redirectWithToast } from '~/services/flash.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/class-change';

/** A number tried on the class page, in clock units; 0 for run to failure. */
const searchSchema = z.object({ to: z.coerce.number().min(0).max(1_000_000).optional().catch(undefined) });

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
  const { head, assessment } = await standingOf(params.classId);
  const submission = parseWithZod(await request.formData(), { schema: putForwardSchema });
  if (submission.status !== 'success') return data(submission.reply(), { status: 400 });
  const form = submission.value;
  const refuse = (status: 400 | 409, field: string, sentence: string) =>
    data(
      submission.reply(field === '' ? { formErrors: [sentence] } : { fieldErrors: { [field]: [sentence] } }),
      { status },
    );
  if (assessment === null)
    return refuse(409, '', 'The class is not assessed yet: there is no evidence to put forward.');

  const onPart = form.scope === 'part';
  const { findings, conclusion } = assessment;
  const { clock, schedule } = findings;
  const guard = refuseChange(
    { to: form.to, onPart },
    { schedule, conclusion, clock, itemPlural: head.itemPlural },
  );
  if (guard !== null) return refuse(400, form.to === null ? 'policy' : 'interval', guard);
  const part = onPart ? await findPart(database(), head.id, form) : null;
  const badPart = part === null ? null : refusePart(part);
  if (badPart !== null) return refuse(400, badPart.field, badPart.sentence);

  const { timeZone } = organisation(context);
  const result = await putForward(database(), {
    id: form.id,
    classId: head.id,
    terms: termsOf(form, assessment, part?.assetIds ?? []),
    origin: isProposal(form, assessment) ? 'proposal' : 'by-hand',
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
  return refuse(409, '', refusalOf(result));
}

async function standingOf(classId: string) {
  const head = await readClassHead(database(), 'all', classId);
  if (head === null) throw new Response('There is no such class.', { status: 404 });
  return { head, assessment: await currentAssessment(database(), head.id) };
}

function refusePart(part: Awaited<ReturnType<typeof findPart>>) {
  if (part.unknownTags.length > 0) {
    const named = part.unknownTags.slice(0, 5).join(', ');
    return { field: 'tags', sentence: `No asset of this class in service is tagged ${named}.` };
  }
  if (part.assetIds.length === 0) {
    return { field: 'tags', sentence: 'Choose a site, or name some assets by tag.' };
  }
  if (part.assetIds.length === part.ofAssets) {
    return { field: 'tags', sentence: 'That is the whole class; a trial needs a rest to be compared with.' };
  }
  return null;
}

/** What is put forward, priced with the night's own code where a price comes out. */
function termsOf(form: PutForwardForm, { findings }: Assessment, assetIds: string[]): ChangeTerms {
  const { schedule, clock } = findings;
  const from = schedule.current.interval;
  const action: ChangeAction = form.scope === 'part' ? 'trial' : (actionBetween(from, form.to) ?? 'start');
  const tried =
    schedule.kind === 'priced'
      ? tryInterval(schedule, { interval: form.to, ...schedule.costs }, clock)
      : null;
  return {
    action,
    from,
    to: form.to,
    reason: form.reason,
    saving: tried === null ? null : tried.change.savingPerYear,
    share: tried === null ? null : tried.change.share,
    assetIds,
  };
}

function isProposal(form: PutForwardForm, { conclusion, findings }: Assessment): boolean {
  const { action, to } = conclusion.proposal;
  return (
    changingActions.includes(action) &&
    (action === 'trial') === (form.scope === 'part') &&
    sameInterval(to.interval, form.to, findings.clock)
  );
}

/** The form gives whole units where the night has the digits. */
function sameInterval(
  a: number | null,
  b: number | null,
  clock: 'calendar-days' | 'operating-hours',
): boolean {
  if (a === null || b === null) return a === b;
  return Math.abs(a - b) < (clock === 'calendar-days' ? 1 : 0.005 * a);
}

function refusalOf(result: Exclude<PutForwardResult, { outcome: 'stored' | 'already-stored' }>): string {
  switch (result.outcome) {
    case 'another-open':
      return 'Somebody has put another change of this class forward meanwhile. It has to be decided or withdrawn first; what you typed is still here.';
    case 'not-assessed':
      return 'The class is not assessed yet: there is no evidence to put forward.';
    case 'marked':
      return 'The class is statutory or its failure endangers people: changes of it are not put forward here.';
    case 'schedule-changed':
      return 'The planned maintenance of this class was changed meanwhile. Load the page again and look at what is in force now.';
  }
}

export default function PutForward({ loaderData, actionData }: Route.ComponentProps) {
  const { head, standing, openChangeId } = loaderData;
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
      {head.statutory || head.endangersPeople ? (
        <NotHere head={head} cautions={standing?.cautions ?? []} />
      ) : standing === null ? (
        <EmptyState title="Not assessed yet">
          There is no evidence to put forward before the first night has assessed this class.
        </EmptyState>
      ) : openChangeId !== null ? (
        <Notice title="A change of this class waits already">
          <p>
            One at a time: <Link to={href('/changes/:changeId', { changeId: openChangeId })}>look at it</Link>
            , and have it decided or withdrawn first.
          </p>
        </Notice>
      ) : (
        <PutForwardFields loaderData={{ ...loaderData, standing }} refused={actionData} />
      )}
    </div>
  );
}

type Loaded = Route.ComponentProps['loaderData'];

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

interface FieldsProps {
  loaderData: Omit<Loaded, 'standing'> & { standing: NonNullable<Loaded['standing']> };
  refused: Route.ComponentProps['actionData'];
}

function PutForwardFields({ loaderData, refused }: FieldsProps) {
  const { head, form, standing, sites, currency } = loaderData;
  const { clock, proposal, cautions } = standing;
  const typed = (name: string) => {
    const value = refused?.initialValue?.[name];
    return typeof value === 'string' ? value : undefined;
  };
  const chosen = (name: string): string[] => [refused?.initialValue?.[name] ?? []].flat().map(String);
  const errorsOf = (name: string) => refused?.error?.[name] ?? undefined;
  const errors = Object.entries(refused?.error ?? {}).flatMap(([name, messages]) =>
    (messages ?? []).map((message) => ({ fieldId: name === '' ? null : name, message })),
  );
  const proposed = changingActions.includes(proposal.action);
  const start = form.tried?.to ?? (form.tried === null ? proposal.to.interval : null);
  const fields = start === null ? null : intervalFields(start, clock);
  const runsToFailure =
    form.tried === null ? proposed && proposal.to.interval === null : form.tried.to === null;
  return (
    <>
      <p className="text-grey">
        {standing.today === null
          ? `${capitalised(head.itemPlural)} run to failure today.`
          : `${capitalised(head.itemPlural)} are replaced ${everyWords(standing.today, clock)} today.`}
      </p>
      {proposed && <Proposed proposal={proposal} clock={clock} currency={currency} />}
      <h2 className="mt-6">Cautions</h2>
      <div className="mt-2">
        <CautionList cautions={cautions} />
      </div>
      <ErrorSummary errors={errors} title="Not put forward yet" />
      <Form method="post" key={form.taskId}>
        <input type="hidden" name="id" value={typed('id') ?? form.id} />
        {form.taskId !== null && <input type="hidden" name="taskId" value={form.taskId} />}
        <RadioRows
          name="policy"
          label="What is to be done"
          required
          defaultValue={typed('policy') ?? (runsToFailure ? 'run-to-failure' : 'interval')}
          errors={errorsOf('policy')}
          rows={[
            { value: 'interval', label: `Replace ${head.itemPlural} by plan` },
            { value: 'run-to-failure', label: 'Run to failure: replace what has failed, nothing before' },
          ]}
        />
        <div className="grid gap-x-5 sm:grid-cols-2">
          <TextField
            name="interval"
            label="How often by plan: every"
            hint="Not needed for run to failure."
            inputMode="decimal"
            maxLength={12}
            defaultValue={typed('interval') ?? fields?.interval}
            errors={errorsOf('interval')}
          />
          <SelectField
            name="unit"
            label="Unit"
            defaultValue={typed('unit') ?? fields?.unit ?? (clock === 'operating-hours' ? 'hours' : 'months')}
            options={unitsOf(clock)}
          />
        </div>
        <RadioRows
          name="scope"
          label="For which of them"
          defaultValue={
            typed('scope') ?? (proposal.action === 'trial' && form.tried === null ? 'part' : 'class')
          }
          errors={errorsOf('scope')}
          rows={[
            { value: 'class', label: 'The whole class' },
            { value: 'part', label: 'A trial on a part; the rest goes on as today' },
          ]}
        />
        <fieldset className="my-4">
          <legend className="font-bold">Of a trial: where</legend>
          <p className="text-grey text-[0.9rem]">
            {proposal.part === null
              ? 'Whole sites, or single assets by tag.'
              : `The proposal is to try it on about ${formatNoun(proposal.part.positions, head.itemSingular, head.itemPlural)} of ${proposal.part.of}.`}
          </p>
          {sites.map(({ id, name, assets }) => (
            <Checkbox
              key={id}
              name="sites"
              id={`site-${id}`}
              value={id}
              defaultChecked={chosen('sites').includes(id)}
              label={`${name} (${formatNoun(assets, 'asset')})`}
            />
          ))}
        </fieldset>
        <TextAreaField
          name="tags"
          label="And these assets, by tag"
          hint="Separated by spaces, commas or lines."
          defaultValue={typed('tags')}
          errors={errorsOf('tags')}
        />
        <TextAreaField
          name="reason"
          label="Why"
          hint="What whoever decides should know. It is kept with the change."
          required
          maxLength={2000}
          defaultValue={typed('reason')}
          errors={errorsOf('reason')}
        />
        <Button>Put forward</Button>
      </Form>
    </>
  );
}

function Proposed({
  proposal,
  clock,
  currency,
}: {
  proposal: NonNullable<Loaded['standing']>['proposal'];
  clock: 'calendar-days' | 'operating-hours';
  currency: string;
}) {
  const { action, from, to, savingPerYearMinor, share } = proposal;
  return (
    <section aria-label="The night’s proposal" className="mt-4">
      <p className="text-[1.15rem] font-bold">{proposal.words.title}</p>
      <FigureList
        items={[
          {
            name: 'What',
            value: changeInWords(
              { action: action as ChangeAction, from: from.interval, to: to.interval },
              clock,
            ),
          },
          { name: 'Expected saving', value: savingWords({ saving: savingPerYearMinor }, currency) },
          { name: 'How sure', value: sureWords({ share }) },
        ]}
      />
    </section>
  );
}

function unitsOf(clock: 'calendar-days' | 'operating-hours') {
  return clock === 'operating-hours'
    ? [{ value: 'hours', label: 'hours' }]
    : ['days', 'weeks', 'months', 'years'].map((unit) => ({ value: unit, label: unit }));
}
