import { parseWithZod } from '@conform-to/zod/v4';
import { data, Form, href, Link } from 'react-router';
import { z } from 'zod';
import { changeInWords } from '~/advice/change-words';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { Button } from '~/components/button';
import {
  followUpNames,
  savingWords,
  stateWords,
  stepWords,
  sureWords,
} from '~/components/changes/change-words';
import {
  ApproveForm,
  DeclineOrAsk,
  longestWords,
  WordsForm,
  type Refused,
} from '~/components/changes/decision-forms';
import { CautionsThen, Evidence } from '~/components/changes/evidence';
import { FollowUpFigures } from '~/components/changes/follow-up-figures';
import { Disclosure } from '~/components/disclosure';
import { ErrorSummary } from '~/components/error-summary';
import { FigureList } from '~/components/figure-list';
import { Notice } from '~/components/notice';
import { formatCalendarDate, formatDateTime } from '~/format/date';
import { formatNoun } from '~/format/number';
import { currentVerdict } from '~/models/assessments.server';
import { dayNumber, dayOf } from '~/models/day-number';
import { openStates, type Change } from '~/models/schedule-change';
import {
  answerChange,
  approveChange,
  askBack,
  declineChange,
  reopenChange,
  takeBackChange,
  withdrawChange,
  type DecideResult,
} from '~/models/schedule-changes-decide.server';
import { findChange } from '~/models/schedule-changes.server';
import { now, today } from '~/services/clock.server';
import { redirectWithToast, type ToastInput } from '~/services/flash.server';
import { organisation, requireRole, type Viewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/change';

const version = z.number().int();
const words = (message: string) =>
  z.string({ error: message }).trim().min(1, message).max(longestWords, 'Keep it to 2,000 characters.');

const formSchema = z.discriminatedUnion('intent', [
  z.object({ intent: z.literal('approve'), version, day: z.iso.date({ error: 'Give a day.' }) }),
  z.object({ intent: z.literal('decline'), version, words: words('Say why not.') }),
  z.object({ intent: z.literal('ask-back'), version, words: words('Say what you need to know.') }),
  z.object({ intent: z.literal('answer'), version, words: words('Give an answer.') }),
  z.object({ intent: z.literal('withdraw'), version }),
  z.object({ intent: z.literal('reopen'), version }),
  z.object({ intent: z.literal('take-back'), version, words: words('Say why.') }),
]);
type ChangeForm = z.output<typeof formSchema>;
type Intent = ChangeForm['intent'];

const roleOf: Record<Intent, 'lead' | 'manager'> = {
  approve: 'manager',
  decline: 'manager',
  'ask-back': 'manager',
  answer: 'lead',
  withdraw: 'lead',
  reopen: 'lead',
  'take-back': 'manager',
};

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireRole(context, request, 'lead', 'manager', 'admin');
  const change = await changeOf(params.changeId);
  const { currency, timeZone } = organisation(context);
  return {
    change,
    verdictNow: await currentVerdict(database(), change.classId),
    may: mayOf(viewer, change),
    isOwn: change.putForwardById === viewer.id,
    isManager: viewer.roles.includes('manager'),
    currency,
    timeZone,
    today: today(timeZone),
  };
}

/** What the viewer may do with a change as it stands. The action checks each for itself. */
function mayOf({ id, roles }: Viewer, { state, isMarked, putForwardById }: Change) {
  const own = putForwardById === id;
  const lead = roles.includes('lead');
  const manager = roles.includes('manager');
  const isOpen = openStates.includes(state);
  return {
    approve: manager && !own && !isMarked && state === 'put-forward',
    decline: manager && !own && isOpen,
    askBack: manager && !own && state === 'put-forward',
    answer: lead && state === 'asked-back',
    revise: lead && own && isOpen && !isMarked,
    withdraw: lead && own && isOpen,
    reopen: lead && own && state === 'withdrawn',
    takeBack: manager && state === 'approved',
  };
}

export async function action({ context, request, params }: Route.ActionArgs) {
  requireRole(context, request, 'lead', 'manager');
  const form = await request.formData();
  const asked = z
    .enum(formSchema.options.map(({ shape }) => shape.intent.value))
    .safeParse(form.get('intent'));
  if (!asked.success) throw new Response('This form is not one of ours.', { status: 400 });
  const viewer = requireRole(context, request, roleOf[asked.data]);
  const change = await changeOf(params.changeId);
  const { timeZone } = organisation(context);
  const submission = parseWithZod(form, { schema: formSchema });
  if (submission.status !== 'success') return data(submission.reply(), { status: 400 });

  const day = today(timeZone);
  const { value } = submission;
  const badDay = value.intent === 'approve' ? refuseDay(value.day, day) : null;
  if (badDay !== null) return data(submission.reply({ fieldErrors: { day: [badDay] } }), { status: 400 });
  const result = await decide(value, { changeId: change.id, personId: viewer.id, today: day });
  if (result.outcome === 'done') {
    return redirectWithToast(href('/changes/:changeId', { changeId: change.id }), toastFor(value, change));
  }
  const sentence = result.outcome === 'moved-on' ? await movedOnWords(change.id) : refusalOf(result);
  return data(submission.reply({ formErrors: [sentence] }), { status: 409 });
}

/** Approvals are for the schedule to come: not for a day that is over, nor for one that is surely a slip. */
function refuseDay(day: string, first: string): string | null {
  if (day < first) return `That day is over; the earliest is today, ${formatCalendarDate(first)}.`;
  const last = dayOf(dayNumber(first) + mostDaysAhead);
  return day > last ? `That is far ahead; the latest is ${formatCalendarDate(last)}.` : null;
}
const mostDaysAhead = 731;

/** What the first of two people did, for the second. */
async function movedOnWords(changeId: string): Promise<string> {
  const last = (await changeOf(changeId)).steps.at(-1);
  const who = last
    ? `${last.personName} ${stepWords[last.step]} meanwhile`
    : 'Somebody moved it on meanwhile';
  return `${who}. Look at it again below; what you typed is still here.`;
}

function decide(
  form: ChangeForm,
  who: { changeId: string; personId: string; today: string },
): Promise<DecideResult> {
  const db = database();
  const decision = { ...who, version: form.version, words: 'words' in form ? form.words : null, now: now() };
  switch (form.intent) {
    case 'approve':
      return approveChange(db, { ...decision, day: form.day });
    case 'decline':
      return declineChange(db, decision);
    case 'ask-back':
      return askBack(db, decision);
    case 'answer':
      return answerChange(db, decision);
    case 'withdraw':
      return withdrawChange(db, decision);
    case 'reopen':
      return reopenChange(db, decision);
    case 'take-back':
      return takeBackChange(db, decision);
  }
}

function toastFor(form: ChangeForm, change: Change): ToastInput {
  const undoWith = (intent: Intent, label: string): ToastInput['undo'] => ({
    action: href('/changes/:changeId', { changeId: change.id }),
    label,
    fields: { intent, version: String(change.version + 1) },
  });
  switch (form.intent) {
    case 'approve':
      return { message: `Approved. The schedule changes on ${formatCalendarDate(form.day)}.` };
    case 'decline':
      return { message: 'Declined, with your reason.' };
    case 'ask-back':
      return { message: 'Asked back.' };
    case 'answer':
      return { message: 'Answered. It waits for a decision again.' };
    case 'withdraw':
      return { message: 'Withdrawn.', undo: undoWith('reopen', 'Put it forward again') };
    case 'reopen':
      return { message: 'It waits for a decision again.' };
    case 'take-back':
      return { message: 'Taken back. The schedule goes on as it was before.' };
  }
}

function refusalOf({ outcome }: Exclude<DecideResult, { outcome: 'done' | 'moved-on' }>): string {
  switch (outcome) {
    case 'own-change':
      return 'You put this forward yourself: somebody else has to decide.';
    case 'not-yours':
      return 'Only the person who put it forward may do that.';
    case 'marked':
      return 'The class is statutory or its failure endangers people: this is not decided here.';
    case 'schedule-changed':
      return 'The schedule has been changed since this was put forward. Ask for it to be put forward anew.';
    case 'taken-over':
      return 'The schedule has been changed again since. Put forward what is wanted instead.';
    case 'another-open':
      return 'Another change of this class waits for a decision meanwhile.';
  }
}

/** @throws a 404 answer for no such change. */
async function changeOf(changeId: string): Promise<Change> {
  const change = z.uuid().safeParse(changeId).success ? await findChange(database(), changeId) : undefined;
  if (!change) throw new Response('There is no such change.', { status: 404, statusText: 'Not found' });
  return change;
}

/** Who comes second is shown the change as the first one left it, so a refusal too reads it again. */
export const shouldRevalidate = () => true;

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData ? `Change of ${loaderData.change.className}` : 'Change'} · Intervale` },
];

export default function ChangePage({ loaderData, actionData }: Route.ComponentProps) {
  const { change, verdictNow, currency, timeZone } = loaderData;
  const formErrors = (actionData?.error?.[''] ?? []).map((message) => ({ fieldId: null, message }));
  return (
    <article className="max-w-[46rem]">
      <Breadcrumbs
        crumbs={[
          { label: 'Changes', to: href('/changes') },
          { label: change.className, to: href('/classes/:classId', { classId: change.classId }) },
        ]}
      />
      <h1>{change.className}</h1>
      <p className="mt-2 text-[1.3rem] leading-snug font-bold">{changeInWords(change, change.clock)}</p>
      <ErrorSummary errors={formErrors} title="Nothing was changed" />
      <Terms change={change} currency={currency} timeZone={timeZone} />
      <p className="mt-4 max-w-[60ch] [overflow-wrap:anywhere] whitespace-pre-line">{change.reason}</p>
      <WhatCameOfIt change={change} currency={currency} />
      <CautionsThen change={change} />
      {change.isMarked && <MarkedNotice />}
      <Decisions loaderData={loaderData} refused={actionData} />
      <Evidence change={change} verdictNow={verdictNow} />
      <Steps change={change} timeZone={timeZone} />
    </article>
  );
}

type Loaded = Route.ComponentProps['loaderData'];

function Terms({ change, currency, timeZone }: Pick<Loaded, 'change' | 'currency' | 'timeZone'>) {
  const { action, part, origin, saving } = change;
  const ifWhole = action === 'trial' && saving !== null ? ', if it held for the whole class' : '';
  return (
    <FigureList
      items={[
        { name: 'State', value: <StateInWords change={change} timeZone={timeZone} /> },
        { name: 'Expected saving', value: savingWords(change, currency) + ifWhole },
        { name: 'How sure', value: sureWords(change) },
        ...(part.length === 0 ? [] : [{ name: 'Part of the class', value: <Part part={part} /> }]),
        { name: 'From', value: origin === 'proposal' ? 'the night’s proposal' : 'a number chosen by hand' },
      ]}
    />
  );
}

function WhatCameOfIt({ change, currency }: Pick<Loaded, 'change' | 'currency'>) {
  const { followUp, followUpAsOf, clock, state, takesEffectOn } = change;
  if (followUp !== null && followUpAsOf !== null) {
    return <FollowUpFigures followUp={followUp} asOf={followUpAsOf} clock={clock} currency={currency} />;
  }
  if (state !== 'approved' || takesEffectOn === null) return null;
  return (
    <p className="text-grey mt-4">
      From {formatCalendarDate(takesEffectOn)} on, every night compares what happens with what happened
      before.
    </p>
  );
}

/** What the viewer can do; below the cautions. */
function Decisions({ loaderData, refused }: { loaderData: Loaded; refused: Refused }) {
  const { change, may, isOwn, isManager, today: day } = loaderData;
  const { version } = change;
  return (
    <section aria-label="Decision" className="no-print mt-6">
      <TypedInVain may={may} refused={refused} />
      {may.approve && <ApproveForm version={version} today={day} refused={refused} />}
      <DeclineOrAsk may={may} version={version} refused={refused} />
      {isManager && isOwn && openStates.includes(change.state) && (
        <Notice title="Somebody else decides">
          You put this forward; another manager has to approve it.
        </Notice>
      )}
      {may.answer && (
        <WordsForm
          intent="answer"
          version={version}
          label="Your answer"
          required
          button="Answer"
          refused={refused}
        />
      )}
      {may.revise && (
        <p className="mt-4">
          <Link
            to={href('/changes/:changeId/terms', { changeId: change.id })}
            className="inline-flex min-h-11 items-center"
          >
            Put it differently: another interval, part or reason
          </Link>
        </p>
      )}
      {may.withdraw && <OneButton intent="withdraw" version={version} label="Withdraw" />}
      {may.reopen && <OneButton intent="reopen" version={version} label="Put it forward again" />}
      {may.takeBack && (
        <Disclosure summary="Take it back" open={refused?.initialValue?.intent === 'take-back'}>
          <WordsForm
            intent="take-back"
            version={version}
            label="Why"
            hint="The schedule goes on from today as it was before this change."
            required
            button="Take it back"
            tone="danger"
            refused={refused}
          />
        </Disclosure>
      )}
    </section>
  );
}

/** Words of a form that is gone, since somebody moved the change on: nothing typed is lost. */
function TypedInVain({ may, refused }: { may: Loaded['may']; refused: Refused }) {
  const { intent, words: typed } = refused?.initialValue ?? {};
  const isShown = Object.entries(formOf).some(([name, form]) => name === intent && may[form]);
  if (isShown || typeof typed !== 'string' || typed.trim() === '') return null;
  return (
    <Notice tone="warning" title="What you typed">
      <p className="[overflow-wrap:anywhere] whitespace-pre-line">{typed}</p>
    </Notice>
  );
}

const formOf = {
  decline: 'decline',
  'ask-back': 'askBack',
  answer: 'answer',
  'take-back': 'takeBack',
} as const satisfies Partial<Record<Intent, keyof Loaded['may']>>;

function OneButton({ intent, version, label }: { intent: Intent; version: number; label: string }) {
  return (
    <Form method="post" className="mt-4">
      <input type="hidden" name="version" value={version} />
      <Button name="intent" value={intent} tone="quiet">
        {label}
      </Button>
    </Form>
  );
}

function MarkedNotice() {
  return (
    <Notice tone="danger" title="Not decided here">
      <p>
        The class is statutory or its failure endangers people. What the records show is evidence only: the
        local code and a licensed practitioner decide about its schedule.
      </p>
    </Notice>
  );
}

function StateInWords({ change, timeZone }: { change: Change; timeZone: string }) {
  const { state, decidedByName, decidedAt, takesEffectOn, takenBackOn, followUp } = change;
  return (
    <>
      <b>{stateWords[state]}</b>
      {decidedByName !== null &&
        decidedAt !== null &&
        ` by ${decidedByName}, ${formatDateTime(decidedAt, timeZone)}`}
      {takesEffectOn !== null && `; in effect from ${formatCalendarDate(takesEffectOn)}`}
      {takenBackOn !== null && `, taken back on ${formatCalendarDate(takenBackOn)}`}
      {followUp !== null && `: ${followUpNames[followUp.word]}`}
    </>
  );
}

function Part({ part }: Pick<Change, 'part'>) {
  const shown = part.slice(0, 12).map(({ tag }) => tag);
  const more = part.length - shown.length;
  return (
    <span className="[overflow-wrap:anywhere]">
      {formatNoun(part.length, 'asset')}: {shown.join(', ')}
      {more > 0 && ` and ${more} more`}
    </span>
  );
}

function Steps({ change, timeZone }: { change: Change; timeZone: string }) {
  return (
    <section aria-labelledby="steps" className="mt-8">
      <h2 id="steps">What was said and done</h2>
      <ol className="mt-2 grid gap-3">
        {change.steps.map(({ step, words: said, personName, at }) => (
          <li key={`${step}-${at.toISOString()}`} className="border-hair border-b pb-3">
            <p>
              <b>{personName}</b> {stepWords[step]}{' '}
              <span className="text-grey text-[0.9rem]">{formatDateTime(at, timeZone)}</span>
            </p>
            {said !== null && <p className="[overflow-wrap:anywhere] whitespace-pre-line">{said}</p>}
          </li>
        ))}
      </ol>
      <p className="mt-4">
        <Link to={`${href('/changes')}?class=${change.classId}`}>All changes of this class</Link>
      </p>
    </section>
  );
}
