import { data, href } from 'react-router';
import { z } from 'zod';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { formatDateTime } from '~/format/date';
import { Decision } from '~/components/imports/decision';
import { formatBytes, kindWords, statusWords } from '~/components/imports/import-words';
import { Outcome } from '~/components/imports/outcome';
import { RowTable } from '~/components/imports/row-table';
import { StatusLinks } from '~/components/imports/status-links';
import { StillReading } from '~/components/imports/still-reading';
import { Pagination } from '~/components/pagination';
import { rowStatuses, type RowStatus } from '~/models/import-types';
import {
  applyImport,
  applyModes,
  discardImport,
  findImport,
  listImportRows,
  type ApplyResult,
  type ImportSummary,
} from '~/models/imports.server';
import { now, today } from '~/services/clock.server';
import { redirectWithToast } from '~/services/flash.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/import-preview';

const perPage = 50;
const pageSchema = z.coerce.number().int().min(1).max(1_000_000).catch(1);
const statusSchema = z.enum(rowStatuses);
const intentSchema = z.enum([...applyModes, 'discard']);

export async function loader({ context, request, params }: Route.LoaderArgs) {
  requireRole(context, request, 'lead', 'admin');
  const summary = await importOf(params.importId);
  const { searchParams } = new URL(request.url);
  const status = statusSchema.safeParse(searchParams.get('status')).data ?? firstToLookAt(summary);
  const page = pageSchema.parse(searchParams.get('page') ?? 1);
  const shown = summary.state !== 'reading' && summary.state !== 'failed';
  const rows = shown ? await listImportRows(database(), { importId: summary.id, status, page, perPage }) : [];
  return { summary, status, page, rows, timeZone: organisation(context).timeZone };
}

export async function action({ context, request, params }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'lead', 'admin');
  const { id: importId, kind } = await importOf(params.importId);
  const page = href('/imports/:importId', { importId });
  const intent = intentSchema.safeParse((await request.formData()).get('intent')).data;
  if (intent === undefined) throw data('This page cannot do that.', { status: 400 });

  if (intent === 'discard') {
    const discarded = await discardImport(database(), { importId, personId: viewer.id });
    return discarded
      ? redirectWithToast(href('/imports'), { message: 'Discarded; nothing was written.' })
      : redirectWithToast(page, { message: 'This import is not waiting any more.', kind: 'warning' });
  }
  const { timeZone } = organisation(context);
  const result = await applyImport(database(), {
    importId,
    personId: viewer.id,
    mode: intent,
    today: today(timeZone),
    now: now(),
  });
  return redirectWithToast(page, toastOf(result, kind));
}

function toastOf(result: ApplyResult, kind: ImportSummary['kind']): { message: string; kind?: 'warning' } {
  switch (result.outcome) {
    case 'applied': {
      const noun = kind === 'register' ? 'assets' : 'records';
      return { message: `Done: ${result.newRows} ${noun} added, ${result.changedRows} changed.` };
    }
    case 'already-applied':
      return { message: 'This import had been applied already; nothing was written twice.' };
    case 'refused':
      return {
        message: `Nothing was written: ${result.rejectedRows} rows no longer fit what is held. Look at them below.`,
        kind: 'warning',
      };
    case 'not-ready':
      return { message: 'This import is not waiting any more; nothing was written.', kind: 'warning' };
  }
}

async function importOf(importId: string): Promise<ImportSummary> {
  const summary = await findImport(database(), importId);
  if (!summary) throw data('There is no such import.', { status: 404 });
  return summary;
}

function firstToLookAt({ counts }: ImportSummary): RowStatus {
  const order: RowStatus[] = ['rejected', 'changed', 'new'];
  return order.find((status) => counts[status] > 0) ?? 'unchanged';
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.summary.fileName ?? 'Import'} · Intervale` },
];

export default function ImportPreview({ loaderData }: Route.ComponentProps) {
  const { summary, status, page, rows, timeZone } = loaderData;
  const { id, kind, state, fileName, fileBytes, counts } = summary;
  const addressOf = (each: RowStatus, number = 1) =>
    `${href('/imports/:importId', { importId: id })}?${new URLSearchParams({ status: each, page: String(number) })}`;
  const hasRows = state !== 'reading' && state !== 'failed';
  const gone = state === 'discarded' && status !== 'rejected';
  return (
    <>
      <Breadcrumbs crumbs={[{ label: 'Imports', to: href('/imports') }, { label: kindWords[kind] }]} />
      <h1 className="[overflow-wrap:anywhere]">{fileName}</h1>
      <p className="text-grey mt-1">
        {kindWords[kind]}, {formatBytes(fileBytes)}, uploaded {formatDateTime(summary.createdAt, timeZone)} by{' '}
        {summary.createdByName}
      </p>
      {state === 'reading' ? (
        <StillReading rows={counts.new + counts.changed + counts.unchanged + counts.rejected} />
      ) : (
        <Outcome summary={summary} timeZone={timeZone} />
      )}
      {hasRows && (
        <>
          <StatusLinks counts={counts} current={status} hrefFor={addressOf} />
          {state === 'previewed' && <Decision summary={summary} />}
          <h2 className="mt-8">{statusWords[status]} rows</h2>
          {rows.length > 0 && (
            <RowTable rows={rows} status={status} headings={summary.header?.headings ?? []} />
          )}
          {rows.length === 0 && (
            <p className="text-grey my-3">
              {gone
                ? 'These rows were put aside with the import.'
                : `No row is ${statusWords[status].toLowerCase()}.`}
            </p>
          )}
          {rows.length > 0 && (
            <Pagination
              page={page}
              pageSize={perPage}
              total={counts[status]}
              noun="rows"
              hrefFor={(number) => addressOf(status, number)}
            />
          )}
        </>
      )}
    </>
  );
}
