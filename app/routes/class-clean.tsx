import { parseWithZod } from '@conform-to/zod/v4';
import { randomUUID } from 'node:crypto';
import { data, Form, href, Link } from 'react-router';
import { z } from 'zod';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { CorrectionFields } from '~/components/clean/correction-fields';
import { cleanFormSchema, correctionOf, type CleanForm } from '~/components/clean/correction-schema';
import { MergeForm } from '~/components/clean/merge-form';
import { Preview, type CorrectionPreview } from '~/components/clean/preview';
import { RecordFilter } from '~/components/clean/record-filter';
import { DataTable, type Column } from '~/components/data-table';
import { EmptyState } from '~/components/empty-state';
import { ErrorSummary } from '~/components/error-summary';
import { outsideCauseWords } from '~/components/log/words';
import { Pagination } from '~/components/pagination';
import { formatCalendarDate, formatDateTime } from '~/format/date';
import { formatClock, formatCount, formatNoun } from '~/format/number';
import { currentAsOf } from '~/models/assessments.server';
import { findAssetClass } from '~/models/asset-classes.server';
import { readClassHead } from '~/models/class-list.server';
import { effectOfCorrection } from '~/models/correction-effect.server';
import {
  everyCorrectable,
  listCorrectable,
  type CorrectableFilter,
  type CorrectableRow,
} from '~/models/correctable-records.server';
import { correctableSorts } from '~/models/correctable-sorts';
import { effects } from '~/models/failure';
import { listFailureModes } from '~/models/failure-modes.server';
import {
  correctRecords,
  mostCorrected,
  planCorrection,
  takeCorrectionBack,
  type CorrectionPlan,
  type SeenRecord,
} from '~/models/record-corrections.server';
import type { Correction } from '~/models/record-correction';
import { listSitesOfClass } from '~/models/trial-part.server';
import { now, today } from '~/services/clock.server';
import { redirectWithToast } from '~/services/flash.server';
import { organisation, requireRole, type RequestContext, type Viewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/class-clean';

const pageSize = 50;
const shownInPreview = 50;

const day = z.iso.date().optional().catch(undefined);
const searchSchema = z.object({
  site: z.uuid().optional().catch(undefined),
  mode: z
    .union([z.uuid(), z.literal('none')])
    .optional()
    .catch(undefined),
  effect: z.enum(effects).optional().catch(undefined),
  outside: z.enum(['yes', 'no']).optional().catch(undefined),
  voided: z.enum(['yes', 'all']).optional().catch(undefined),
  from: day,
  to: day,
  tag: z
    .string()
    .trim()
    .max(60)
    .transform((text) => text || undefined)
    .optional()
    .catch(undefined),
  sort: z.enum(correctableSorts).catch('day'),
  direction: z.enum(['asc', 'desc']).catch('desc'),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
});
export type CleanState = z.infer<typeof searchSchema>;

const stateOf = (request: Request): CleanState =>
  searchSchema.parse(Object.fromEntries(new URL(request.url).searchParams));
const filterOf = ({ site, ...rest }: CleanState): CorrectableFilter => ({ ...rest, siteId: site });

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Put records right${loaderData ? `: ${loaderData.head.name}` : ''} · Intervale` },
];

export async function loader({ context, request, params }: Route.LoaderArgs) {
  requireRole(context, request, 'lead');
  const { head, clock } = await classOf(params.classId);
  const state = stateOf(request);
  const db = database();
  const [{ rows, total }, modes, sites] = await Promise.all([
    listCorrectable(db, head.id, filterOf(state), { ...state, pageSize }),
    listFailureModes(db, head.id),
    listSitesOfClass(db, head.id),
  ]);
  return { head, clock, rows, total, modes, sites, state, timeZone: organisation(context).timeZone };
}

export async function action({ context, request, params }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'lead');
  const { head } = await classOf(params.classId);
  const submission = parseWithZod(await request.formData(), { schema: cleanFormSchema });
  if (submission.status !== 'success')
    return data({ form: submission.reply(), preview: null }, { status: 400 });
  const form = submission.value;
  const refuse = (field: string, sentence: string) =>
    data(
      { form: submission.reply({ fieldErrors: { [field]: [sentence] } }), preview: null },
      { status: 400 },
    );

  switch (form.intent) {
    case 'take-back':
      return takeBack(head.id, form.correctionId, viewer);
    case 'save':
      return save(context, head.id, form, viewer);
    case 'preview-again': {
      const seen = await seenNow(head.id, form.chosen);
      return { form: null, preview: await previewOf(context, head.id, { ...form, seen }, viewer) };
    }
    case 'preview-merge': {
      if (form.from === form.into)
        return refuse('into', 'Choose another one: a mode is not merged into itself.');
      const seen = await everyCorrectable(
        database(),
        head.id,
        { mode: form.from, voided: 'all' },
        mostCorrected,
      );
      if (seen.length > mostCorrected) return refuse('from', tooMany);
      const correction: Correction = { kind: 'merge-mode', from: form.from, modeId: form.into };
      return { form: null, preview: await previewOf(context, head.id, { seen, correction }, viewer) };
    }
    case 'preview': {
      const seen =
        form.all === undefined
          ? form.record
          : await everyCorrectable(database(), head.id, filterOf(stateOf(request)), mostCorrected);
      if (seen.length > mostCorrected) return refuse('record', tooMany);
      return {
        form: null,
        preview: await previewOf(context, head.id, { seen, correction: correctionOf(form) }, viewer),
      };
    }
  }
}

const tooMany = `More than ${formatCount(mostCorrected)} failures match; narrow the filter and correct them in parts.`;

async function classOf(classId: string) {
  const head = await readClassHead(database(), 'all', classId);
  const assetClass = head && (await findAssetClass(database(), head.id));
  if (head === null || !assetClass) throw new Response('There is no such class.', { status: 404 });
  return { head, clock: assetClass.clock };
}

async function seenNow(classId: string, chosen: readonly SeenRecord[]): Promise<SeenRecord[]> {
  const ids = new Set(chosen.map(({ id }) => id));
  const all = await everyCorrectable(database(), classId, { voided: 'all' }, 1_000_000);
  return all.filter(({ id }) => ids.has(id));
}

async function previewOf(
  context: RequestContext,
  classId: string,
  {
    seen,
    correction,
    correctionId,
  }: { seen: readonly SeenRecord[]; correction: Correction; correctionId?: string },
  viewer: Viewer,
): Promise<CorrectionPreview> {
  const present = presentIn(context);
  const plan = await planCorrection(database(), classId, { seen, correction }, present);
  const writable = plan.records.filter(({ refusal }) => refusal === null);
  const asOf = (await currentAsOf(database(), classId)) ?? present.today;
  const effect =
    writable.length === 0
      ? null
      : await effectOfCorrection(database(), classId, writable, {
          asOf,
          organisation: organisation(context),
          personId: viewer.id,
          now: present.now,
        });
  return previewFrom(plan, { seen, correction, correctionId: correctionId ?? randomUUID(), effect });
}

function previewFrom(
  plan: CorrectionPlan,
  given: Pick<CorrectionPreview, 'correction' | 'correctionId' | 'effect'> & { seen: readonly SeenRecord[] },
): CorrectionPreview {
  const { seen, ...rest } = given;
  const refusedFirst = [...plan.records].sort(
    (a, b) => Number(b.refusal !== null) - Number(a.refusal !== null),
  );
  return {
    ...rest,
    chosen: seen.map(({ id, version }) => `${id}:${version}`).join(','),
    records: refusedFirst.slice(0, shownInPreview),
    total: plan.records.length,
    unchanged: plan.unchanged,
    refused: plan.records.filter(({ refusal }) => refusal !== null).length,
    meanwhile: plan.meanwhile,
  };
}

function presentIn(context: RequestContext) {
  return { now: now(), today: today(organisation(context).timeZone) };
}

async function save(
  context: RequestContext,
  classId: string,
  form: Extract<CleanForm, { intent: 'save' }>,
  viewer: Viewer,
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
  if (result.outcome === 'not-as-seen') {
    const preview = previewFrom(result.plan, { seen: chosen, correction, correctionId, effect: null });
    return data({ form: null, preview }, { status: 409 });
  }
  const page = href('/classes/:classId/clean', { classId });
  return redirectWithToast(page, {
    message: `${formatNoun(result.corrected, 'failure')} corrected. The next night judges the class anew.`,
    undo: { action: page, label: 'Undo', fields: { intent: 'take-back', correctionId } },
  });
}

async function takeBack(classId: string, correctionId: string, viewer: Viewer) {
  const result = await takeCorrectionBack(database(), {
    correctionId,
    classId,
    personId: viewer.id,
    now: now(),
  });
  const page = href('/classes/:classId/clean', { classId });
  switch (result.outcome) {
    case 'done':
      return redirectWithToast(page, {
        message: `Taken back: ${formatNoun(result.records, 'failure')} as before.`,
      });
    case 'changed-since':
      return redirectWithToast(page, {
        kind: 'warning',
        message: `Not taken back: ${formatNoun(result.records, 'failure')} ${result.records === 1 ? 'was' : 'were'} changed since. Correct them one by one.`,
      });
    case 'no-such-correction':
      throw new Response('There is no such correction.', { status: 404, statusText: 'Not found' });
  }
}

/** A refusal or a preview shows the records as they are by then. */
export const shouldRevalidate = () => true;

function addressOf(classId: string, state: CleanState): string {
  const search = new URLSearchParams();
  const { sort, direction, page, ...filter } = state;
  for (const [name, value] of Object.entries(filter)) if (value !== undefined) search.set(name, value);
  if (sort !== 'day') search.set('sort', sort);
  if (direction !== 'desc') search.set('direction', direction);
  if (page > 1) search.set('page', String(page));
  const query = search.toString();
  return href('/classes/:classId/clean', { classId }) + (query && `?${query}`);
}

export default function ClassClean({ loaderData, actionData }: Route.ComponentProps) {
  const { head, clock, rows, total, modes, sites, state, timeZone } = loaderData;
  const here = addressOf(head.id, state);
  const modeNames = Object.fromEntries(modes.map(({ id, name }) => [id, name]));
  const refused = actionData?.form ?? null;
  const errors = Object.entries(refused?.error ?? {}).flatMap(([name, messages]) =>
    (messages ?? []).map((message) => ({ fieldId: name === '' || name === 'record' ? null : name, message })),
  );
  const ticked = [refused?.initialValue?.record ?? []].flat().map(String);
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
          classId={head.id}
          modes={modeNames}
          clock={clock}
          backTo={here}
          timeZone={timeZone}
        />
      ) : (
        <>
          <RecordFilter state={state} sites={sites} modes={modes} />
          <ErrorSummary errors={errors} title="Please check this before looking at what it does" />
          <Form method="post" action={here}>
            <DataTable
              caption={`Failures of ${head.name}`}
              captionHidden
              columns={columnsIn(timeZone, clock, ticked)}
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
              <CorrectionFields modes={modes} total={total} itemPlural={head.itemPlural} refused={refused} />
            )}
          </Form>
          <Pagination
            page={state.page}
            pageSize={pageSize}
            total={total}
            noun="failures"
            hrefFor={(page) => addressOf(head.id, { ...state, page })}
          />
          <MergeForm modes={modes} action={here} refused={refused} />
        </>
      )}
    </>
  );
}

function columnsIn(
  timeZone: string,
  clock: 'calendar-days' | 'operating-hours',
  ticked: readonly string[],
): Column<CorrectableRow>[] {
  return [
    {
      key: 'choose',
      header: 'Choose',
      cell: ({ id, version, tag, failedOn }) => (
        <label className="flex min-h-11 min-w-11 items-center">
          <input
            type="checkbox"
            name="record"
            value={`${id}:${version}`}
            defaultChecked={ticked.includes(`${id}:${version}`)}
            className="size-5"
          />
          <span className="sr-only">
            {tag}, {formatCalendarDate(failedOn)}
          </span>
        </label>
      ),
    },
    {
      key: 'day',
      header: 'When',
      sortable: true,
      firstDirection: 'desc',
      rowHeader: true,
      cell: ({ id, failedOn, failedAt }) => (
        <Link to={href('/failures/:failureId', { failureId: id })} className="md:whitespace-nowrap">
          {failedAt === null
            ? formatCalendarDate(failedOn, 'short')
            : formatDateTime(failedAt, timeZone, 'short')}
        </Link>
      ),
    },
    { key: 'tag', header: 'Asset', sortable: true, cell: ({ tag, siteName }) => `${tag}, ${siteName}` },
    { key: 'mode', header: 'Mode', cell: ({ modeName }) => modeName ?? 'none' },
    { key: 'effect', header: 'Done', cell: ({ effect }) => effect },
    {
      key: 'outside',
      header: 'Outside cause',
      cell: ({ outsideCause }) => outsideCause && outsideCauseWords[outsideCause],
    },
    {
      key: 'fitted',
      header: 'Item fitted',
      cell: ({ itemFittedOn, itemAge }) =>
        itemFittedOn !== null
          ? formatCalendarDate(itemFittedOn, 'short')
          : itemAge !== null && `age ${formatClock(itemAge, clock === 'operating-hours' ? 'hours' : 'days')}`,
    },
    { key: 'note', header: 'Note', cell: ({ note }) => note },
    {
      key: 'logged',
      header: 'Logged by',
      sortable: true,
      firstDirection: 'desc',
      cell: ({ loggedByName }) => loggedByName ?? 'import',
    },
    {
      key: 'voided',
      header: 'Voided',
      cell: ({ voidReason }) => voidReason !== null && <span className="text-danger">{voidReason}</span>,
    },
  ];
}
