import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { importMaxBytes } from '~/models/imports.server';
import * as imports from '~/routes/imports';
import * as preview from '~/routes/import-preview';
import * as rejectedCsv from '~/routes/import-rejected-csv';
import * as signIn from '~/routes/sign-in';
import * as upload from '~/routes/import-upload';
import type { Role } from '~/models/people.server';
import { database } from '../../db/connection';
import { addPerson, password } from '../support/people';
import { sampleFile } from '../support/stage-file';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { cookiesOf, formRequest, visit } from '../support/visit';

const site = 'http://intervale.test';
const cookies = new Map<Role, string>();
let test: TestDatabase;

beforeAll(async () => {
  test = await createTestDatabase();
  vi.stubEnv('DATABASE_URL', test.url);
  for (const role of ['technician', 'lead', 'manager', 'admin'] as const) {
    const email = `${role}@larkmoor.example`;
    await addPerson(test.database, { email, roles: [role] });
    const answer = await visit(
      { path: 'sign-in', ...signIn },
      formRequest(`${site}/sign-in`, { email, password, next: '/' }),
    );
    cookies.set(role, cookiesOf(answer));
  }
});

afterAll(async () => {
  await database().destroy();
  vi.unstubAllEnvs();
  await test.drop();
});

const as = (role: Role) => ({ Cookie: cookies.get(role) ?? '', Origin: site });
const routeOf = {
  list: { path: 'imports', loader: imports.loader },
  upload: { path: 'imports/new', loader: upload.loader, action: upload.action },
  preview: { path: 'imports/:importId', loader: preview.loader, action: preview.action },
  rejected: { path: 'imports/:importId/rejected.csv', loader: rejectedCsv.loader },
};

function uploadRequest(role: Role, kind: string | null, file: Blob | null, name = 'register.csv'): Request {
  const form = new FormData();
  if (kind !== null) form.append('kind', kind);
  form.append('file', file ?? new Blob([]), file ? name : '');
  return new Request(`${site}/imports/new`, { method: 'POST', body: form, headers: as(role) });
}

async function uploadSample(role: Role, kind: string, name: string): Promise<string> {
  const request = uploadRequest(role, kind, new Blob([new Uint8Array(await sampleFile(name))]), name);
  const answer = await visit(routeOf.upload, request);
  expect(answer.status).toBe(302);
  return answer.headers.get('Location') ?? '';
}

const look = async (path: string, role: Role = 'admin') =>
  (await (await visit(routeOf.preview, new Request(`${site}${path}`, { headers: as(role) }))).json()) as {
    summary: { state: string; counts: Record<string, number> };
    rows: { line: number }[];
  };

const decide = (path: string, intent: string, role: Role = 'admin') =>
  visit(routeOf.preview, formRequest(`${site}${path}`, { intent }, as(role)));

describe('who may import', () => {
  it.each<[Role, number]>([
    ['technician', 403],
    ['manager', 403],
    ['lead', 200],
    ['admin', 200],
  ])('%s', async (role, status) => {
    const list = await visit(routeOf.list, new Request(`${site}/imports`, { headers: as(role) }));
    expect(list.status).toBe(status);
    const sent = await visit(routeOf.upload, uploadRequest(role, 'register', null));
    expect(sent.status).toBe(status === 200 ? 400 : 403);
  });

  it('keeps the actions and the rejected rows from everybody else', async () => {
    const path = await uploadSample('lead', 'register', 'register-broken.csv');
    for (const role of ['technician', 'manager'] as const) {
      expect((await decide(path, 'good-rows', role)).status).toBe(403);
      const csv = await visit(
        routeOf.rejected,
        new Request(`${site}${path}/rejected.csv`, { headers: as(role) }),
      );
      expect(csv.status).toBe(403);
    }
    expect((await look(path)).summary.state).toBe('previewed');
    await decide(path, 'discard');
  });
});

describe('the way through', () => {
  it('uploads, looks, writes, and answers a second click without writing twice', async () => {
    const path = await uploadSample('admin', 'register', 'register.csv');
    expect(await look(path)).toMatchObject({
      summary: { state: 'previewed', counts: { new: 4 } },
      rows: [{ line: 2 }, {}, {}, {}],
    });
    const answers = await Promise.all([decide(path, 'all-or-nothing'), decide(path, 'all-or-nothing')]);
    expect(answers.map(({ status }) => status)).toEqual([302, 302]);
    expect((await look(path)).summary.state).toBe('applied');
    expect(await test.database('assets').count('*')).toEqual([{ count: 4 }]);
    expect(await test.database('audit_entries').where('action', 'apply')).toHaveLength(1);
  });

  it('hands out the rejected rows and takes them back', async () => {
    const path = await uploadSample('lead', 'history', 'history-broken.csv');
    const csv = await visit(
      routeOf.rejected,
      new Request(`${site}${path}/rejected.csv`, { headers: as('lead') }),
    );
    expect(csv.headers.get('Content-Type')).toBe('text/csv; charset=utf-8');
    expect(csv.headers.get('Content-Disposition')).toContain('filename="history-broken-rejected.csv"');
    const corrected = (await csv.text()).replace('2026-02-30', '2026-02-28');
    const answer = await visit(routeOf.upload, uploadRequest('lead', 'history', new Blob([corrected])));
    expect((await look(answer.headers.get('Location') ?? '')).summary.counts).toMatchObject({
      new: 1,
      rejected: 8,
    });
  });

  it('pages through the rows by the address', async () => {
    const rows = Array.from({ length: 120 }, (_, index) => `S,Lamp,days,LMP-${index},2024-01-01\n`).join('');
    const file = new Blob([`site,class,clock,tag,in service\n${rows}`]);
    const answer = await visit(routeOf.upload, uploadRequest('admin', 'register', file));
    const path = answer.headers.get('Location') ?? '';
    const { rows: third } = await look(`${path}?status=new&page=3`);
    expect(third.map(({ line }) => line)).toEqual(Array.from({ length: 20 }, (_, index) => 102 + index));
    expect((await look(`${path}?status=nonsense&page=-4`)).rows[0]?.line).toBe(2);
  });
});

describe('what the upload refuses', () => {
  it.each<[string, string | null, Blob | null, object]>([
    ['no kind', null, new Blob(['x']), { kind: 'Say whether this is a register or a history.' }],
    [
      'a kind there is not',
      'people',
      new Blob(['x']),
      { kind: 'Say whether this is a register or a history.' },
    ],
    ['no file', 'register', null, { file: 'Choose a file.' }],
    ['an empty file', 'register', new Blob(['']), { file: 'The file is empty.' }],
  ])('%s', async (_what, kind, file, errors) => {
    const answer = await visit(routeOf.upload, uploadRequest('admin', kind, file));
    expect(answer.status).toBe(400);
    expect(await answer.json()).toMatchObject({ errors });
  });

  it('a picture, and keeps what was chosen', async () => {
    const picture = new Blob([new Uint8Array(await sampleFile('picture.csv'))]);
    const answer = await visit(routeOf.upload, uploadRequest('admin', 'history', picture));
    expect(await answer.json()).toEqual({
      kind: 'history',
      errors: { file: expect.stringMatching(/^This is a PNG picture, not a CSV file/) as string },
    });
  });

  it('a file above the limit, read to its end so that the answer is seen', async () => {
    const file = new Blob(['tag,date,event,result\n', new Uint8Array(importMaxBytes).fill(97)]);
    const answer = await visit(routeOf.upload, uploadRequest('admin', 'history', file));
    expect(answer.status).toBe(400);
    expect(await answer.json()).toMatchObject({
      errors: { file: expect.stringContaining('larger than 64 MiB') as string },
    });
  });

  it('an upload that was cut off, and stores nothing', async () => {
    const before = await test.database('imports').count('*');
    const whole = uploadRequest(
      'admin',
      'register',
      new Blob([`site,class,tag,in service\n${'x'.repeat(200_000)}`]),
    );
    const bytes = new Uint8Array(await whole.arrayBuffer());
    const type = whole.headers.get('Content-Type') ?? '';
    for (const body of [bytes.slice(0, 100_000), 'nonsense']) {
      const request = new Request(whole.url, {
        method: 'POST',
        body,
        headers: { ...as('admin'), 'Content-Type': type },
      });
      const answer = await visit(routeOf.upload, request);
      expect(answer.status).toBe(400);
    }
    expect(await test.database('imports').count('*')).toEqual(before);
  });

  it('an address that is no import', async () => {
    const nothing = await visit(
      routeOf.preview,
      new Request(`${site}/imports/none`, { headers: as('admin') }),
    );
    expect(nothing.status).toBe(404);
  });
});
