import { randomUUID } from 'node:crypto';
import type { RouteConfigEntry } from '@react-router/dev/routes';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { readOrganisation } from '~/models/organisation.server';
import { startSession } from '~/services/session.server';
import routeConfig from '../../app/routes';
import { database } from '../../db/connection';
import { runNightly } from '../../jobs/nightly';
import { addPerson, addSite } from '../support/people';
import { addAsset, addClass, addFailure } from '../support/records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { formRequest, visit, type RouteUnderTest } from '../support/visit';
import { permissions, type Who } from './permission-matrix';

const host = 'http://intervale.test';

/** `outsider` is a technician of a site that holds nothing of what is asked for. */
const people = ['technician', 'outsider', 'lead', 'manager', 'admin'] as const;
const everyone: readonly Who[] = ['nobody', ...people];

interface Route {
  file: string;
  path: string;
}

/** Every route of the product, its path whole. */
function flatten(entries: readonly RouteConfigEntry[], above = ''): Route[] {
  return entries.flatMap((entry) => {
    const path = [above, entry.path].filter(Boolean).join('/');
    return [{ file: entry.file, path: path === '' ? '/' : path }, ...flatten(entry.children ?? [], path)];
  });
}

type Module = Omit<RouteUnderTest, 'path'>;
const modules = import.meta.glob<Module>('../../app/routes/*.{ts,tsx}');
const routes = await Promise.all(
  flatten(await routeConfig).map(async (route) => {
    const load = modules[`../../app/${route.file}`];
    if (load === undefined) throw new Error(`no module for ${route.file}`);
    const { loader, action } = await load();
    return { ...route, loader, action };
  }),
);

let test: TestDatabase;
const cookies = new Map<Who, string>();
/** What stands for each parameter of a path. */
const parameters = new Map<string, string>();

beforeAll(async () => {
  test = await createTestDatabase();
  vi.stubEnv('DATABASE_URL', test.url);
  vi.stubEnv('INTERVALE_TEST', '1');
  vi.stubEnv('SESSION_SECRET', 'a secret of this test file alone, 40 long');
  const db = test.database;
  await db('organisations').insert({
    name: 'Larkmoor Civic Trust',
    time_zone: 'Europe/London',
    currency: 'GBP',
  });
  const siteId = await addSite(db, 'Fenwick Baths');
  const otherSite = await addSite(db, 'Orrin Library');
  const ids = new Map<Who, string>();
  for (const person of people) {
    const id = await addPerson(db, {
      email: `${person}@larkmoor.example`,
      roles: [person === 'outsider' ? 'technician' : person],
      siteIds: person === 'technician' ? [siteId] : person === 'outsider' ? [otherSite] : [],
    });
    ids.set(person, id);
    cookies.set(person, (await startSession(db, new Request(`${host}/`), id)).split(';')[0]!);
  }

  const classId = await addClass(db, 'Pump seal', { item_singular: 'seal', item_plural: 'seals' });
  const assetId = await addAsset(db, { classId, siteId }, 'FB-PUMP-1', { quantity: 4 });
  parameters.set('classId', classId).set('assetId', assetId);
  parameters.set(
    'failureId',
    await addFailure(db, { classId, assetId }, '2024-06-01', { logged_by: ids.get('technician') }),
  );
  const insert = async (table: string, row: Record<string, unknown>) => {
    const [added] = (await db(table).insert(row).returning('id')) as { id: string }[];
    return added!.id;
  };
  parameters.set(
    'alarmId',
    await insert('alarms', {
      class_id: classId,
      kind: 'old-first',
      raised_as_of: '2026-01-01',
      log_e: 4,
      log_e_total: 4,
      failures: 20,
    }),
  );
  const importId = await insert('imports', {
    kind: 'register',
    file_name: 'register.csv',
    file_size: 10,
    file_sha256: Buffer.alloc(32),
    state: 'previewed',
    rejected_rows: 1,
    header: { headings: ['tag'], delimiter: ',', encoding: 'utf-8', corrected: false },
    created_by: ids.get('admin'),
  });
  await db('import_rows').insert({ import_id: importId, line: 2, status: 'rejected', cells: { tag: '' } });
  parameters.set('importId', importId);
  await runNightly(db, { asOf: '2026-01-01', organisation: await readOrganisation(db) });
  const { detail } = (await db('assessments').where('class_id', classId).first('detail')) as {
    detail: unknown;
  };
  parameters.set(
    'changeId',
    await insert('schedule_changes', {
      id: randomUUID(),
      class_id: classId,
      action: 'start',
      to_interval: 365,
      origin: 'by-hand',
      reason: 'They wear.',
      evidence_as_of: '2026-01-01',
      evidence: detail,
      put_forward_by: ids.get('lead'),
    }),
  );
});

afterAll(async () => {
  vi.unstubAllEnvs();
  await database().destroy();
  await test.drop();
});

function addressOf(path: string): string {
  const filled = path.replace(/:(\w+)/g, (_, name: string) => {
    const value = parameters.get(name);
    if (value === undefined) throw new Error(`the test knows nothing for :${name}`);
    return value;
  });
  return `${host}/${filled === '/' ? '' : filled}`;
}

/** Whether an answer lets the person in: neither sent away to sign in, nor told that it is not theirs or not there. */
function letsIn(response: Response): boolean {
  if ([301, 302, 303, 307].includes(response.status)) {
    return !(response.headers.get('Location') ?? '').startsWith('/sign-in');
  }
  return ![401, 403, 404].includes(response.status);
}

async function whoIsLetIn(ask: (cookie: string) => Promise<Response>): Promise<Who[]> {
  const letIn: Who[] = [];
  for (const who of everyone) if (letsIn(await ask(cookies.get(who) ?? ''))) letIn.push(who);
  return letIn;
}

describe('who may do what', () => {
  it('is said for every route that answers anything', () => {
    const said = Object.keys(permissions).sort();
    const answering = routes.filter(({ loader, action }) => loader ?? action).map(({ file }) => file);
    expect(said).toEqual([...answering].sort());
  });

  for (const route of routes) {
    const rule = permissions[route.file];
    if (rule === undefined || rule.open !== undefined) continue;

    if (route.loader !== undefined)
      it(`see ${route.path}`, async () => {
        const address = addressOf(route.path);
        const letIn = await whoIsLetIn((Cookie) =>
          visit(route, new Request(address + (rule.query ?? ''), { headers: { Cookie } })),
        );
        expect(letIn).toEqual(everyone.filter((who) => rule.see?.includes(who)));
      });

    if (route.action !== undefined)
      it(`act on ${route.path}`, async () => {
        const address = addressOf(route.path);
        const acts = Object.entries(rule.act ?? {});
        expect(acts.length).toBeGreaterThan(0);
        for (const [intent, allowed] of acts) {
          // Nothing but the intent: whoever is let in is told what is missing, and nothing is changed.
          const fields: Record<string, string> = intent === 'any' ? {} : { intent };
          const letIn = await whoIsLetIn((Cookie) => visit(route, formRequest(address, fields, { Cookie })));
          expect({ intent, letIn }).toEqual({
            intent,
            letIn: everyone.filter((who) => allowed.includes(who)),
          });
        }
      });
  }
});
