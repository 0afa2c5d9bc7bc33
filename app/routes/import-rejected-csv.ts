import { Readable } from 'node:stream';
import { findImport, rejectedCsv } from '~/models/imports.server';
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
      'Content-Disposition': dispositionFor(`${fileName.replace(/\.[^.]*$/, '')}-rejected.csv`),
      'X-Content-Type-Options': 'nosniff',
    },
  });
}

/** An attachment of that name, for browsers old and new (RFC 6266). */
function dispositionFor(name: string): string {
  const plain = name.replace(/[^\w.-]+/g, '-');
  const encoded = encodeURIComponent(Buffer.from(name).toString()).replace(
    /['()*]/g,
    (sign) => `%${sign.charCodeAt(0).toString(16)}`,
  );
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`;
}
