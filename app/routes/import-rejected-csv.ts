import { Readable } from 'node:stream';
import { findImport, rejectedCsv } from '~/models/imports.server';
import { attachment } from '~/services/csv-download.server';
import { requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/import-rejected-csv';

/** The rejected rows of an import as a file to correct and upload again. */
export async function loader({ context, request, params }: Route.LoaderArgs) {
  requireRole(context, request, 'lead', 'admin');
  const db = database();
  const summary = await findImport(db, params.importId);
  if (!summary?.header)
    throw new Response('There is no such import.', { status: 404, statusText: 'Not found' });
  const { id, kind, header, fileName } = summary;
  const pieces = Readable.from(rejectedCsv(db, { id, kind, header }));
  return new Response(Readable.toWeb(pieces.map((text: string) => Buffer.from(text))) as ReadableStream, {
    headers: {
      'Content-Type': 'text/csv; charset=utf-8',
      'Content-Disposition': attachment(`${fileName.replace(/\.[^.]*$/, '')}-rejected.csv`),
      'X-Content-Type-Options': 'nosniff',
    },
  });
}
