import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { importMaxBytes } from '~/models/imports.server';
import type { ImportKind } from '~/models/import-types';
import { addPerson } from '../support/people';
import { rowsOf, sampleFile, stageFile } from '../support/stage-file';
import { createTestDatabase, type TestDatabase } from '../support/test-database';

let test: TestDatabase;
let personId: string;

beforeAll(async () => {
  test = await createTestDatabase();
  personId = await addPerson(test.database, { email: 'admin@larkmoor.example', roles: ['admin'] });
});
afterAll(() => test.drop());
beforeEach(() => test.database('imports').delete());

const stage = (kind: ImportKind, content: string | Buffer, pieceBytes?: number) =>
  stageFile(test.database, kind, content, { personId, pieceBytes });

describe('a file that can be read', () => {
  it('takes the sample register, comma and quotes and all', async () => {
    const summary = await stage('register', await sampleFile('register.csv'));
    expect(summary).toMatchObject({
      state: 'previewed',
      counts: { new: 4, changed: 0, unchanged: 0, rejected: 0 },
      header: { delimiter: ',', encoding: 'utf-8' },
      createdByName: 'admin',
    });
    const rows = await rowsOf(test.database, summary.id, 'new');
    expect(rows.map(({ line }) => line)).toEqual([2, 3, 4, 5]);
    expect(rows[2]?.cells).toMatchObject({ area: 'Roof, east', 'hours a day': '14.5' });
  });

  it('takes semicolons, CRLF and Latin-1, and says that it was Latin-1', async () => {
    const summary = await stage('register', await sampleFile('register-semicolons-latin-1.csv'));
    expect(summary).toMatchObject({
      counts: { new: 2, rejected: 0 },
      header: { delimiter: ';', encoding: 'latin-1' },
    });
    const [, second] = await rowsOf(test.database, summary.id, 'new');
    expect(second?.cells).toMatchObject({ site: 'Café Orrin', class: 'Entrée valve' });
  });

  it('takes tabs, a byte-order mark, and headings in any order and capitals, however the bytes arrive', async () => {
    const summary = await stage('register', await sampleFile('register-bom-tabs.csv'), 1);
    expect(summary).toMatchObject({ counts: { new: 1 }, header: { delimiter: '\t', encoding: 'utf-8' } });
  });

  it('counts lines as an editor does, through line ends within quotes, empty lines and empty rows', async () => {
    const file =
      'tag,date,event,result,note\r\n\r\nA,2024-01-01,failure,renewed,"two\r\nlines"\r\n,,,,\r\nB,2024-01-01,failure,renewed,5" pipe';
    const summary = await stage('history', file);
    const rejected = await rowsOf(test.database, summary.id, 'rejected');
    expect(rejected.map(({ line, cells }) => [line, cells.tag, cells.note])).toEqual([
      [3, 'A', 'two\nlines'],
      [6, 'B', '5" pipe'],
    ]);
  });

  it('rejects a row with more cells than headings by itself', async () => {
    const summary = await stage(
      'register',
      'site,class,clock,tag,in service\nS,C,days,T,2024-01-01,extra\nS,C,days,U,2024-01-01\n',
    );
    expect(summary.counts).toMatchObject({ new: 1, rejected: 1 });
    const [row] = await rowsOf(test.database, summary.id, 'rejected');
    expect(row?.remarks[0]?.reason).toMatch(/more cells than there are headings/);
    expect(row?.remarks[0]?.value).toBe('extra');
  });

  it('reads a file of 60 MB', async () => {
    const note = 'n'.repeat(3900);
    const row = `A,2024-01-01,failure,renewed,${note}\n`;
    const rows = Math.ceil(60_000_000 / row.length);
    const summary = await stage('history', `tag,date,event,result,note\n${row.repeat(rows)}`);
    expect(summary.fileBytes).toBeGreaterThan(60_000_000);
    expect(summary).toMatchObject({ state: 'previewed', counts: { rejected: rows } });
  }, 180_000);
});

describe('a file that cannot be read', () => {
  it.each([
    ['a PNG picture', 'picture.csv', /^This is a PNG picture, not a CSV file\./],
    [
      'unknown headings, each by name',
      'headings-unknown.csv',
      /“tags”; did you mean “tag”\?.*“in service date”; did you mean “in service”\?/,
    ],
  ])('refuses %s', async (_what, name, message) => {
    await expect(stage('register', await sampleFile(name))).rejects.toThrow(message);
    expect(await test.database('imports').select()).toEqual([]);
  });

  it.each<[string, Buffer | string, RegExp]>([
    ['an empty file', '', /^The file is empty\.$/],
    ['empty lines alone', '\n\n\n', /no row at all/],
    ['a workbook', Buffer.from('PK\u0003\u0004....[Content_Types].xml'), /^This is a spreadsheet workbook/],
    ['UTF-16', Buffer.from('\ufefftag,date', 'utf16le'), /^This is text in UTF-16/],
    ['NUL bytes', 'site,class,tag,in service\nS,C,\u0000,2024-01-01', /NUL bytes/],
    ['a missing heading', 'site,class,tag\n', /“in service” is missing/],
    ['a heading twice', 'site,class,tag,in service,Tag\n', /“tag” is there twice/],
    ['a history file as a register', 'tag,date,event,result\n', /headings of a history file/],
    ['a file above the limit', Buffer.alloc(importMaxBytes + 1, 'a'), /larger than 64 MiB/],
  ])('refuses %s', async (_what, content, message) => {
    await expect(stage('register', content)).rejects.toThrow(message);
    expect(await test.database('imports').select()).toEqual([]);
  });

  it('fails on a quotation mark that is never closed, and says where it stands', async () => {
    const summary = await stage('register', await sampleFile('quote-never-closed.csv'));
    expect(summary).toMatchObject({ state: 'failed', counts: { new: 0 } });
    expect(summary.problem).toMatch(/from line 3 on: a quotation mark/);
  });
});

describe('a reading whose process died', () => {
  it('is shown as failed, and its reading going on as reading', async () => {
    const { database } = test;
    const [stored] = await database('imports')
      .insert({
        kind: 'register',
        file_name: 'half.csv',
        file_size: 1,
        file_sha256: Buffer.alloc(32),
        state: 'reading',
        created_by: personId,
      })
      .returning<{ id: string }[]>('id');
    const { findImport } = await import('~/models/imports.server');
    const { readingLock } = await import('~/models/import-staging.server');
    const id = stored?.id ?? '';
    await database.transaction(async (reader) => {
      await reader.raw(`select pg_advisory_xact_lock(${readingLock})`, [id]);
      expect(await findImport(database, id)).toMatchObject({ state: 'reading', problem: null });
    });
    const died = await findImport(database, id);
    expect(died?.state).toBe('failed');
    expect(died?.problem).toMatch(/Upload the file again/);
  });
});
