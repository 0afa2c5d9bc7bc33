import type { SubmissionResult } from '@conform-to/react';
import { parseWithZod } from '@conform-to/zod/v4';
import { data, Form, href, Link } from 'react-router';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { CorrectionFields } from '~/components/clean/correction-fields';
import { cleanFormSchema, correctionOf, formOf, type CleanForm } from '~/components/clean/correction-schema';
import { CorrectionsMade } from '~/components/clean/corrections-made';
import { addressOf, filterOf, listStateOf } from '~/components/clean/list-state';
import { MergeForm } from '~/components/clean/merge-form';
import { Preview } from '~/components/clean/preview';
import { recordColumns } from '~/components/clean/record-columns';
import { RecordFilter } from '~/components/clean/record-filter';
import { DataTable } from '~/components/data-table';
import { EmptyState } from '~/components/empty-state';
import { ErrorSummary } from '~/components/error-summary';
import { Pagination } from '~/components/pagination';
import { formatCount, formatNoun } from '~/format/number';
import { findAssetClass } from '~/models/asset-classes.server';
import { readClassHead } from '~/models/class-list.server';
import { everyCorrectable, listCorrectable, seenNow } from '~/models/correctable-records.server';
import { correctableSorts } from '~/models/correctable-sorts';
import type { SeenRecord } from '~/models/correction-plan.server';
import { previewCorrection, previewOfPlan, type CorrectionPreview } from '~/models/correction-preview.server';
import { listFailureModes, listModeNames } from '~/models/failure-modes.server';
import { mostCorrected, type Correction } from '~/models/record-correction';
import { correctRecords, listCorrections, takeCorrectionBack } from '~/models/record-corrections.server';
import { listSitesOfClass } from '~/models/trial-part.server';
import { now, today } from '~/services/clock.server';
import { redirectWithToast, type ToastInput } from '~/services/flash.server';
import { organisation, requireRole, type RequestContext, type Viewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/class-clean';

const pageSize = 50;
const correctionsShown = 10;

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Put records right${loaderData ? `: ${loaderData.head.name}` : ''} · Intervale` },
];

export async function loader({ context, request, params }: Route.LoaderArgs) {
  requireRole(context, request, 'lead');
  const { head, clock } = await classOf(params.classId);
  const state = listStateOf(request);
  const db = database();
  const [{ rows, total }, modes, modeNames, sites, corrections] = await Promise.all([
    listCorrectable(db, head.id, filterOf(state), { ...state, pageSize }),
    listFailureModes(db, head.id),
    listModeNames(db, head.id),
    listSitesOfClass(db, head.id),
    listCorrections(db, head.id, correctionsShown),
  ]);
  const { timeZone } = organisation(context);
  return { head, clock, rows, total, modes, modeNames, sites, corrections, state, timeZone };
}

/** What the page shows instead of the bare list: the form again with what is wrong with it, or a preview. */
interface Answer {
  form: SubmissionResult<string[]> | null;
  preview: CorrectionPreview | null;
}

export async function action({ context, request, params }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'lead');
  const { head } = await classOf(params.classId);
  const submission = parseWithZod(await request.formData(), { schema: cleanFormSchema });
  if (submission.status !== 'success') return refused(submission.reply());

  const form = submission.value;
  const desk = { context, viewer, classId: head.id, backTo: backTo(request, head.id) };
  switch (form.intent) {
    case 'preview': {
      const seen = await chosenIn(form, request, head.id);
      if (seen.length > mostCorrected) {
        return refused(submission.reply({ fieldErrors: { record: [tooMany] } }));
      }
      return preview(desk, { seen, correction: correctionOf(form), all: form.all !== undefined });
    }
    case 'preview-merge': {
      if (form.from === form.into) {
        const message = 'Choose another one: a mode is not merged into itself.';
        return refused(submission.reply({ fieldErrors: { into: [message] } }));
      }
      const correction = { kind: 'merge-mode', from: form.from, modeId: form.into } as const;
      const seen = await allOfMode(head.id, form.from);
      if (seen.length > mostCorrected) {
        return refused(submission.reply({ fieldErrors: { from: [tooManyOfMode] } }));
      }
      return preview(desk, { seen, correction, all: false });
    }
    case 'preview-again': {
      const { correction, chosen } = form;
      const seen =
        correction.kind === 'merge-mode'
          ? await allOfMode(head.id, correction.from)
          : await seenNow(
              database(),
              head.id,
              chosen.map(({ id }) => id),
            );
      return preview(desk, { ...planOf(form), seen });
    }
    case 'leave-out':
      return preview(desk, planOf(form), { leaveOut: true });
    case 'choose-again':
      return { form: { initialValue: formOf(form) }, preview: null } satisfies Answer;
    case 'save':
      return save(desk, form);
    case 'take-back':
      return takeBack(desk, form.correctionId);
  }
}

const tooMany = `More than ${formatCount(mostCorrected)} failures match; narrow the filter and correct them in parts.`;
const tooManyOfMode = `This mode has more than ${formatCount(mostCorrected)} failures. Set the mode on part of them first, then merge.`;

interface Desk {
  context: RequestContext;
  viewer: Viewer;
  classId: string;
  /** The list as it is filtered and ordered, from its start. */
  backTo: string;
}

const refused = (form: SubmissionResult<string[]>) => data<Answer>({ form, preview: null }, { status: 400 });

async function classOf(classId: string) {
  const head = await readClassHead(database(), 'all', classId);
  const assetClass = head && (await findAssetClass(database(), head.id));
  if (head === null || !assetClass) throw new Response('There is no such class.', { status: 404 });
  return { head, clock: assetClass.clock };
}

function backTo(request: Request, classId: string): string {
  return addressOf(classId, { ...listStateOf(request), page: 1 });
}

function presentIn(context: RequestContext) {
  return { now: now(), today: today(organisation(context).timeZone) };
}

async function chosenIn(
  form: Extract<CleanForm, { intent: 'preview' }>,
  request: Request,
  classId: string,
): Promise<SeenRecord[]> {
  if (form.all === undefined) return [...form.record, ...form.also];
  return everyCorrectable(database(), classId, filterOf(listStateOf(request)), mostCorrected);
}

const allOfMode = (classId: string, mode: string) =>
  everyCorrectable(database(), classId, { mode, voided: 'all' }, mostCorrected);

const planOf = ({
  chosen,
  correction,
  correctionId,
  all,
}: Extract<CleanForm, { intent: 'save' | 'preview-again' | 'leave-out' }>) => ({
  seen: chosen,
  correction,
  correctionId,
  all: all !== undefined,
});

async function preview(
  { context, viewer, classId }: Desk,
  wanted: { seen: readonly SeenRecord[]; correction: Correction; all: boolean; correctionId?: string },
  { leaveOut = false } = {},
): Promise<Answer> {
  const shown = await previewCorrection(database(), classId, wanted, {
    ...presentIn(context),
    organisation: organisation(context),
    personId: viewer.id,
    leaveOut,
  });
  return { form: null, preview: shown };
}

async function save(
  { context, viewer, classId, backTo }: Desk,
  form: Extract<CleanForm, { intent: 'save' }>,
) {
  const { correctionId, chosen, correction } = form;
  const result = await correctRecords(database(), {
    correctionId,
    classId,
    seen: chosen,
    correction,
    personId: viewer.id,
    ...presentIn(context),
  });
  switch (result.outcome) {
    case 'not-as-seen':
      return data<Answer>({ form: null, preview: previewOfPlan(result.plan, planOf(form)) }, { status: 409 });
    case 'taken-back':
      return redirectWithToast(backTo, {
        kind: 'warning',
        message: 'This was saved and taken back before. Choose the failures again to correct them anew.',
      });
    case 'done':
      return redirectWithToast(backTo, {
        message: savedWords(correction, result.corrected),
        undo: { action: backTo, label: 'Undo', fields: { intent: 'take-back', correctionId } },
      });
  }
}

function savedWords({ kind }: Correction, corrected: number): string {
  const done = `${formatNoun(corrected, 'failure')} corrected. The next night judges the class anew.`;
  return kind === 'merge-mode' ? `Modes merged: ${done}` : done;
}

async function takeBack({ context, viewer, classId, backTo }: Desk, correctionId: string) {
  const result = await takeCorrectionBack(database(), {
    correctionId,
    classId,
    personId: viewer.id,
    ...presentIn(context),
  });
  if (result.outcome === 'no-such-correction') {
    throw new Response('There is no such correction.', { status: 404, statusText: 'Not found' });
  }
  return redirectWithToast(backTo, takenBackToast(result));
}

function takenBackToast({
  outcome,
  records,
}: {
  outcome: 'done' | 'changed-since' | 'refused';
  records: number;
}): ToastInput {
  const failures = formatNoun(records, 'failure');
  switch (outcome) {
    case 'done':
      return { message: `Taken back: ${failures} as before.` };
    case 'changed-since':
      return {
        kind: 'warning',
        message: `Not taken back: ${failures} ${records === 1 ? 'was' : 'were'} changed since. Correct what is left one by one.`,
      };
    case 'refused':
      return {
        kind: 'warning',
        message: `Not taken back: the days ${failures} had before do not fit the assets' dates any more.`,
      };
  }
}

/** A refusal or a preview shows the records as they are by then. */
export const shouldRevalidate = () => true;

export default function ClassClean({ loaderData, actionData }: Route.ComponentProps) {
  const { head, clock, modeNames, state, timeZone } = loaderData;
  return (
    <>
      <Breadcrumbs
        crumbs={[
          { label: 'Classes', to: href('/classes') },
          { label: head.name, to: href('/classes/:classId', { classId: head.id }) },
          { label: 'Put records right' },
        ]}
      />
      <h1>Put records right</h1>
      <p className="text-grey max-w-[60ch]">
        Tick failures, say what is wrong with them, and see what it does to the verdict before anything is
        saved. Nothing is ever deleted, and every change is kept with before and after.
      </p>
      {actionData?.preview ? (
        <Preview
          preview={actionData.preview}
          modes={modeNames}
          clock={clock}
          backTo={addressOf(head.id, state)}
          timeZone={timeZone}
        />
      ) : (
        <RecordList {...loaderData} form={actionData?.form ?? null} />
      )}
    </>
  );
}

type RecordListProps = Route.ComponentProps['loaderData'] & { form: Answer['form'] };

function RecordList({
  head,
  clock,
  rows,
  total,
  modes,
  sites,
  state,
  timeZone,
  form,
  ...rest
}: RecordListProps) {
  const here = addressOf(head.id, state);
  const before = tickedBefore(form);
  const ticked = new Set([...before.keys(), ...(state.record === undefined ? [] : [state.record])]);
  const shown = new Set(rows.map(({ id }) => id));
  const elsewhere = [...before].filter(([id]) => !shown.has(id)).map(([, seen]) => seen);
  return (
    <>
      <RecordFilter state={state} sites={sites} modes={modes} />
      <ErrorSummary errors={errorsIn(form)} title="Please check this before looking at what it does" />
      <Form method="post" action={here}>
        {rows.length > 10 && (
          <a href="#correct" className="inline-flex min-h-11 items-center">
            To what to correct, below the list
          </a>
        )}
        <DataTable
          caption={`Failures of ${head.name}`}
          captionHidden
          columns={recordColumns({ timeZone, clock, ticked })}
          rows={rows}
          rowKey={({ id }) => id}
          sort={{ key: state.sort, direction: state.direction }}
          hrefFor={({ key, direction }) =>
            addressOf(head.id, {
              ...state,
              sort: correctableSorts.find((one) => one === key) ?? 'day',
              direction,
              page: 1,
            })
          }
          empty={
            <EmptyState title="No failure matches">
              <Link to={href('/classes/:classId/clean', { classId: head.id })}>Show all</Link>
            </EmptyState>
          }
        />
        {rows.length > 0 && (
          <CorrectionFields
            modes={modes}
            total={total}
            elsewhere={elsewhere}
            itemPlural={head.itemPlural}
            refused={form}
          />
        )}
      </Form>
      <Pagination
        page={state.page}
        pageSize={pageSize}
        total={total}
        noun="failures"
        hrefFor={(page) => addressOf(head.id, { ...state, page })}
      />
      <MergeForm modes={modes} action={here} refused={form} />
      <CorrectionsMade
        corrections={rest.corrections}
        modes={rest.modeNames}
        timeZone={timeZone}
        action={here}
      />
    </>
  );
}

/** What was ticked when the form was sent, as "id:version" by id. */
function tickedBefore(form: Answer['form']): Map<string, string> {
  const { record, also } = form?.initialValue ?? {};
  const seen = [record ?? [], typeof also === 'string' ? also.split(',').filter(Boolean) : []].flat();
  return new Map(seen.map((one) => [String(one).split(':')[0] ?? '', String(one)]));
}

function errorsIn(form: Answer['form']) {
  return Object.entries(form?.error ?? {}).flatMap(([name, messages]) =>
    (messages ?? []).map((message) => ({ fieldId: fieldIdOf(name), message })),
  );
}

/** Where an error is put right; the choice of records is spoken of beside the box for all of them. */
function fieldIdOf(name: string): string | null {
  if (name.startsWith('record') || name === 'also') return 'all';
  return name === '' ? null : name;
}
