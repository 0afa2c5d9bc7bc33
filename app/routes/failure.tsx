import { useForm } from '@conform-to/react';
import { parseWithZod } from '@conform-to/zod/v4';
import type { ReactNode } from 'react';
import { data, Form, href, Link } from 'react-router';
import { z } from 'zod';
import { Button, LinkButton } from '~/components/button';
import { ErrorSummary } from '~/components/error-summary';
import { formatCalendarDate, formatDateTime } from '~/format/date';
import { formatClock } from '~/format/number';
import { RecordHistory } from '~/components/clean/record-history';
import { changedMeanwhile } from '~/components/log/changed-meanwhile';
import { refusalSentence } from '~/components/log/refusal-words';
import { effectWords, outsideCauseWords, placeWords } from '~/components/log/words';
import { Notice } from '~/components/notice';
import { TextField } from '~/components/text-field';
import { listModeNames } from '~/models/failure-modes.server';
import { mayUndoFailure } from '~/models/failure-permissions';
import { type Failure, findFailure, restoreFailure, voidFailure } from '~/models/failures.server';
import { listChangesOf } from '~/models/last-change.server';
import { now, today } from '~/services/clock.server';
import { redirectWithToast } from '~/services/flash.server';
import { organisation, requireRole, requireSite, requireViewer, type Viewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/failure';

const usualReason = 'logged by mistake';

const formSchema = z.discriminatedUnion('intent', [
  z.object({
    intent: z.literal('void'),
    version: z.number().int(),
    reason: z
      .string({ error: 'Say why, in a few words.' })
      .trim()
      .min(1, 'Say why, in a few words.')
      .max(300, 'Keep the reason to 300 characters.'),
  }),
  z.object({ intent: z.literal('restore'), version: z.number().int() }),
]);

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireViewer(context, request);
  const failure = await failureAtOwnSite(viewer, params.failureId);
  const db = database();
  const [history, modes] = await Promise.all([
    listChangesOf(db, { subject: 'failure', subjectId: failure.id }),
    listModeNames(db, failure.classId),
  ]);
  return {
    failure,
    history,
    modes,
    mayCorrect: viewer.roles.includes('lead'),
    mayUndo: mayUndoFailure(failure, viewer, now()),
    mayLog: viewer.roles.some((role) => role === 'technician' || role === 'lead'),
    timeZone: organisation(context).timeZone,
  };
}

export async function action({ context, request, params }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'technician', 'lead');
  const { timeZone } = organisation(context);
  const failure = await failureAtOwnSite(viewer, params.failureId);
  const moment = now();
  if (!mayUndoFailure(failure, viewer, moment)) {
    throw new Response(
      'You can undo what you logged yourself, for 24 hours. Ask your reliability lead to change this one.',
      { status: 403, statusText: 'Forbidden' },
    );
  }

  const submission = parseWithZod(await request.formData(), { schema: formSchema });
  if (submission.status !== 'success') return data(submission.reply(), { status: 400 });

  const form = submission.value;
  const change = { failureId: failure.id, version: form.version, personId: viewer.id, now: moment };
  const result =
    form.intent === 'void'
      ? await voidFailure(database(), { ...change, reason: form.reason })
      : await restoreFailure(database(), { ...change, today: today(timeZone) });

  switch (result.outcome) {
    case 'done':
      return redirectWithToast(href('/failures/:failureId', { failureId: failure.id }), {
        message:
          form.intent === 'void' ? 'Undone: it does not count any more.' : 'Put back: it counts again.',
      });
    case 'changed-meanwhile':
      return data(submission.reply({ formErrors: [changedMeanwhile(result.lastChange, timeZone)] }), {
        status: 409,
      });
    case 'refused':
      return data(submission.reply({ formErrors: [refusalSentence(result.refusal, failure)] }), {
        status: 400,
      });
  }
}

/** @throws a 404 answer for no such failure, and the same one for a failure at another site. */
async function failureAtOwnSite(viewer: Viewer, failureId: string): Promise<Failure> {
  const failure = z.uuid().safeParse(failureId).success
    ? await findFailure(database(), failureId)
    : undefined;
  if (!failure) throw new Response('There is nothing here.', { status: 404, statusText: 'Not found' });
  requireSite(viewer, failure.siteId);
  return failure;
}

/** Who comes second is shown the failure as the first one left it, so a refusal too reads it again. */
export const shouldRevalidate = () => true;

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Failure${loaderData ? ` of ${loaderData.failure.tag}` : ''} · Intervale` },
];

export default function FailurePage({ loaderData, actionData }: Route.ComponentProps) {
  const { failure, history, modes, mayUndo, mayLog, mayCorrect, timeZone } = loaderData;
  const isVoid = failure.voidedAt !== null;
  const [form] = useForm({ id: `undo-${failure.version}`, lastResult: actionData });
  const formErrors = (actionData?.error?.[''] ?? []).map((message) => ({ fieldId: null, message }));

  return (
    <div className="max-w-[40rem]">
      <h1 className="[overflow-wrap:anywhere]">
        {failure.tag} {failure.itemSingular}
      </h1>
      <p className="text-grey">{placeWords(failure)}</p>
      <ErrorSummary errors={formErrors} title="Nothing was changed" />
      {isVoid && failure.voidedAt && (
        <Notice tone="warning" title="Undone: this does not count">
          <p>
            By {failure.voidedByName ?? 'an import'}, {formatDateTime(failure.voidedAt, timeZone)}:{' '}
            {failure.voidReason}
          </p>
        </Notice>
      )}

      <h2 className="mt-6">What is stored</h2>
      <StoredFailure failure={failure} timeZone={timeZone} />
      <RecordHistory history={history} modes={modes} clock={failure.clock} timeZone={timeZone} />
      {mayCorrect && (
        <p className="mt-4">
          <Link
            to={`${href('/classes/:classId/clean', { classId: failure.classId })}?${new URLSearchParams({
              tag: failure.tag,
              from: failure.failedOn,
              to: failure.failedOn,
              voided: 'all',
              record: failure.id,
            })}`}
            className="inline-flex min-h-11 items-center"
          >
            Correct this record
          </Link>
        </p>
      )}

      {mayUndo && (
        <Form method="post" id={form.id} className="mt-6" key={failure.version}>
          <input type="hidden" name="version" value={failure.version} />
          {isVoid ? (
            <Button name="intent" value="restore" tone="quiet">
              Put it back
            </Button>
          ) : (
            <>
              <h2>Is it wrong?</h2>
              <TextField
                name="reason"
                label="Why it should not count"
                defaultValue={
                  typeof actionData?.initialValue?.reason === 'string'
                    ? actionData.initialValue.reason
                    : usualReason
                }
                errors={actionData?.error?.reason ?? undefined}
                maxLength={300}
              />
              <Button name="intent" value="void" tone="danger">
                Undo this entry
              </Button>
            </>
          )}
        </Form>
      )}
      {mayLog && (
        <p className="mt-8 flex flex-wrap gap-3">
          <LinkButton to={href('/log')}>Log another failure</LinkButton>
          <LinkButton to={href('/log/:assetId', { assetId: failure.assetId })} tone="quiet">
            Same asset again
          </LinkButton>
        </p>
      )}
    </div>
  );
}

function StoredFailure({ failure, timeZone }: { failure: Failure; timeZone: string }) {
  const age =
    failure.itemFittedOn !== null
      ? formatCalendarDate(failure.itemFittedOn)
      : failure.itemAge !== null
        ? `at an age of ${formatClock(failure.itemAge, failure.clock === 'operating-hours' ? 'hours' : 'days')}`
        : 'not known';
  return (
    <dl className="mt-2">
      <Row name="What failed">{failure.modeName ?? 'Something else'}</Row>
      <Row name="What was done">{effectWords[failure.effect]}</Row>
      <Row name="When">
        {failure.failedAt ? formatDateTime(failure.failedAt, timeZone) : formatCalendarDate(failure.failedOn)}
      </Row>
      <Row name="The old one was fitted">{age}</Row>
      {failure.outsideCause && (
        <Row name="Something outside did it">
          {outsideCauseWords[failure.outsideCause]}. It does not count against the {failure.itemSingular}.
        </Row>
      )}
      {failure.note && (
        <Row name="Note">
          <span className="whitespace-pre-line">{failure.note}</span>
        </Row>
      )}
      <Row name="Logged">
        {failure.loggedByName ? `by ${failure.loggedByName}` : 'by an import'},{' '}
        {formatDateTime(failure.loggedAt, timeZone)}
      </Row>
      <Row name="Class">
        <Link
          to={href('/classes/:classId', { classId: failure.classId })}
          className="inline-flex items-center max-md:min-h-11"
        >
          {failure.className}
        </Link>
      </Row>
    </dl>
  );
}

function Row({ name, children }: { name: string; children: ReactNode }) {
  return (
    <div className="border-hair grid grid-cols-[minmax(7.5rem,2fr)_3fr] items-baseline gap-x-4 border-b py-2">
      <dt className="text-grey text-[0.9rem]">{name}</dt>
      <dd className="[overflow-wrap:anywhere]">{children}</dd>
    </div>
  );
}
