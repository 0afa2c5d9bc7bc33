import { readFile } from 'node:fs/promises';
import { fileURLToPath } from 'node:url';
import {
  applyImport,
  findImport,
  listImportRows,
  rejectedCsv,
  stageImport,
  type ApplyMode,
  type ApplyResult,
  type ImportRow,
  type ImportSummary,
} from '~/models/imports.server';
import type { ImportKind, RowStatus } from '~/models/import-types';
import type { Database } from '../../db/connection';

/** The day it is in the import tests. */
export const importDay = '2026-06-30';

/** One of the sample files. */
export function sampleFile(name: string): Promise<Buffer> {
  return readFile(fileURLToPath(new URL(`../../fixtures/imports/${name}`, import.meta.url)));
}

/** Stages a file given as text or bytes, handed on in pieces of `pieceBytes`. */
export async function stageFile(
  db: Database,
  kind: ImportKind,
  content: string | Buffer,
  { personId, pieceBytes = 65_536 }: { personId: string; pieceBytes?: number },
): Promise<ImportSummary> {
  const bytes = Buffer.from(content);
  async function* pieces() {
    for (let at = 0; at < bytes.length; at += pieceBytes) yield bytes.subarray(at, at + pieceBytes);
  }
  const importId = await stageImport(db, {
    kind,
    fileName: `${kind}.csv`,
    stream: pieces(),
    personId,
    today: importDay,
  });
  return summaryOf(db, importId);
}

/** Stages a file and applies it. */
export async function importFile(
  db: Database,
  kind: ImportKind,
  content: string | Buffer,
  { personId, mode = 'all-or-nothing' }: { personId: string; mode?: ApplyMode },
): Promise<ApplyResult> {
  const { id } = await stageFile(db, kind, content, { personId });
  return applyImport(db, { importId: id, personId, mode, today: importDay });
}

/** The import as it stands. */
export async function summaryOf(db: Database, importId: string): Promise<ImportSummary> {
  const found = await findImport(db, importId);
  if (!found) throw new Error(`there is no import ${importId}`);
  return found;
}

/** All staged rows of one status. */
export function rowsOf(db: Database, importId: string, status: RowStatus): Promise<ImportRow[]> {
  return listImportRows(db, { importId, status, page: 1, perPage: 10_000 });
}

/** The file of rejected rows, as it is downloaded. */
export async function rejectedText(db: Database, { id, kind, header }: ImportSummary): Promise<string> {
  if (!header) throw new Error(`the import ${id} has no header`);
  let text = '';
  for await (const piece of rejectedCsv(db, { id, kind, header })) text += piece;
  return text;
}
