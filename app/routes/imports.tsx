import { href, Link } from 'react-router';
import { z } from 'zod';
import { LinkButton } from '~/components/button';
import { DataTable, type Column } from '~/components/data-table';
import { EmptyState } from '~/components/empty-state';
import { formatCount } from '~/format/number';
import { formatDateTime } from '~/format/date';
import { kindWords, stateWords } from '~/components/imports/import-words';
import { Pagination } from '~/components/pagination';
import { listImports, type ImportSummary } from '~/models/imports.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/imports';

const perPage = 25;
const pageSchema = z.coerce.number().int().min(1).max(1_000_000).catch(1);

export async function loader({ context, request }: Route.LoaderArgs) {
  requireRole(context, request, 'lead', 'admin');
  const page = pageSchema.parse(new URL(request.url).searchParams.get('page') ?? 1);
  const { imports, total } = await listImports(database(), { page, perPage });
  return { imports, total, page, timeZone: organisation(context).timeZone };
}

export const meta: Route.MetaFunction = () => [{ title: 'Imports · Intervale' }];

export default function Imports({ loaderData }: Route.ComponentProps) {
  const { imports, total, page, timeZone } = loaderData;
  const upload = <LinkButton to={href('/imports/new')}>Import a file</LinkButton>;
  return (
    <>
      <h1>Imports</h1>
      <p className="mt-2 max-w-[60ch]">
        Registers of assets and histories of what happened to them, from files. Nothing is written before you
        have seen what would change.
      </p>
      {total === 0 ? (
        <EmptyState title="Nothing has been imported yet" action={upload}>
          Start with the register: a history can only be told of assets that are there.
        </EmptyState>
      ) : (
        <>
          <div className="my-5">{upload}</div>
          <DataTable
            caption="Imports, the latest first"
            captionHidden
            columns={columnsFor(timeZone)}
            rows={imports}
            rowKey={({ id }) => id}
          />
          <Pagination
            page={page}
            pageSize={perPage}
            total={total}
            noun="imports"
            hrefFor={(each) => `${href('/imports')}?page=${each}`}
          />
        </>
      )}
    </>
  );
}

function columnsFor(timeZone: string): Column<ImportSummary>[] {
  return [
    {
      key: 'file',
      header: 'File',
      rowHeader: true,
      cell: ({ id, fileName }) => (
        <Link
          to={href('/imports/:importId', { importId: id })}
          className="inline-flex items-center [overflow-wrap:anywhere] max-md:min-h-11"
        >
          {fileName}
        </Link>
      ),
    },
    { key: 'kind', header: 'Kind', cell: ({ kind }) => kindWords[kind] },
    { key: 'state', header: 'State', cell: ({ state }) => stateWords[state] },
    {
      key: 'rows',
      header: 'New, changed, rejected',
      cell: ({ counts }) => (
        <span className="tabular">
          {formatCount(counts.new)}, {formatCount(counts.changed)}, {formatCount(counts.rejected)}
        </span>
      ),
    },
    {
      key: 'when',
      header: 'Uploaded',
      cell: ({ createdAt }) => formatDateTime(createdAt, timeZone, 'short'),
    },
    { key: 'who', header: 'By', cell: ({ createdByName }) => createdByName },
  ];
}
