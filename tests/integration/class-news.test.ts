import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { listNews, type NewsItem } from '~/models/class-news.server';
import type { Role } from '~/models/people.server';
import { readVerdictHistory } from '~/models/verdict-history.server';
import * as homeRoute from '~/routes/home';
import * as sinceRoute from '~/routes/since';
import { startSession } from '~/services/session.server';
import { database, type Database } from '../../db/connection';
import { runNightly } from '../../jobs/nightly';
import { addPerson, addSite } from '../support/people';
import { addFailure } from '../support/records';
import { addSimulatedClass, addSimulatedRecords, type SimulatedRecords } from '../support/simulated-records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { formRequest, visit } from '../support/visit';

const host = 'http://intervale.test';
const since = { path: 'since', ...sinceRoute };
const organisation = { timeZone: 'Europe/London', currency: 'GBP', serviceLevel: 0.95 };

let test: TestDatabase;
let db: Database;
let siteId: string;
const ids = new Map<string, string>();
const cookies = new Map<string, string>();

async function person(name: string, roles: Role[]): Promise<void> {
  const id = await addPerson(db, { email: `${name}@larkmoor.example`, roles });
  ids.set(name, id);
  cookies.set(name, (await startSession(db, new Request(host), id)).split(';')[0]!);
}

beforeAll(async () => {
  test = await createTestDatabase();
  db = test.database;
  vi.stubEnv('DATABASE_URL', test.url);
  vi.stubEnv('INTERVALE_TEST', '1');
  vi.stubEnv('SESSION_SECRET', 'a secret of this test file alone, 40 long');
  await db('organisations').insert({ name: 'Larkmoor', time_zone: 'Europe/London', currency: 'GBP' });
  siteId = await addSite(db, 'Fenwick Baths');
  await person('lead', ['lead']);
  await person('colleague', ['lead']);
  await person('manager', ['manager']);
  await person('technician', ['technician']);
  await person('admin', ['admin']);
});
afterAll(async () => {
  vi.unstubAllEnvs();
  await database().destroy();
  await test.drop();
});

let seals: SimulatedRecords;
let held: { classId: string; assetIds: string[] };
let count = 0;

beforeEach(async () => {
  await db.raw('truncate asset_classes, job_runs cascade');
  count += 1;
  seals = {
    name: `Seal ${count}`,
    siteId,
    assets: 40,
    shape: 4,
    scale: 700,
    watchedFrom: '2023-01-01',
    seed: 5,
    columns: {
      item_singular: 'seal',
      item_plural: 'seals',
      planned_cost_minor: 20_000,
      failure_cost_minor: 200_000,
    },
  };
  held = await addSimulatedClass(db, seals);
});

const addUntil = (after: string, until: string) => addSimulatedRecords(db, seals, held, { after, until });
const night = (asOf: string) => runNightly(db, { asOf, organisation });
async function newsFor(who = 'lead', seen = false): Promise<NewsItem[]> {
  const { classes } = await listNews(db, ids.get(who)!, { seen, page: 1, pageSize: 50 });
  return classes.flatMap(({ news }) => news);
}
const kindsFor = async (who = 'lead') => (await newsFor(who)).map(({ kind }) => kind);

describe('the news of a night', () => {
  it('is none on the first night but for alarms: being assessed at all is no news', async () => {
    await addUntil('2023-01-01', '2023-01-08');
    await night('2023-01-08');
    expect(await newsFor()).toEqual([]);
  });

  it('tells that a class can be told now, its proposal with the money, and the alarm, worst first', async () => {
    await addUntil('2023-01-01', '2023-01-08');
    await night('2023-01-08');
    await addUntil('2023-01-08', '2026-05-19');
    await night('2026-05-19');
    const news = await newsFor();
    expect(news.map(({ kind }) => kind)).toEqual(
      expect.arrayContaining(['alarm-raised', 'became-decidable', 'proposal-changed']),
    );
    expect(news[0]?.kind).toBe('alarm-raised');
    const decidable = news.find(({ kind }) => kind === 'became-decidable');
    expect(decidable?.sentence).toBe('Seals can be told now: wear-out.');
    expect(decidable?.why).toMatch(/^\d+ failures were logged\.$/);
    expect(news.find(({ kind }) => kind === 'proposal-changed')?.moneyPerYearMinor).toBeGreaterThan(0);
  });

  it('is nothing where nothing changed, and an earlier night looked back at adds none', async () => {
    await addUntil('2023-01-01', '2026-05-19');
    await night('2026-05-18');
    const first = await kindsFor();
    await night('2026-05-19');
    expect(await kindsFor()).toEqual(first);
    await night('2024-01-01');
    expect(await kindsFor()).toEqual(first);
  });

  it('says the same once when the night is run again, and what was seen stays seen', async () => {
    await addUntil('2023-01-01', '2023-01-08');
    await night('2023-01-08');
    await addUntil('2023-01-08', '2026-05-19');
    await night('2026-05-19');
    const before = await newsFor();
    await visit(
      since,
      formRequest(`${host}/since`, { intent: 'seen', news: before[0]!.id }, { Cookie: cookies.get('lead')! }),
    );
    await night('2026-05-19');
    expect(await newsFor()).toEqual(before.slice(1));
    expect((await newsFor('lead', true)).map(({ id }) => id)).toEqual([before[0]!.id]);
    expect(await newsFor('colleague')).toHaveLength(before.length);
  });

  it('names voids as what moved a verdict, and the history of the verdict says so', async () => {
    await addUntil('2023-01-01', '2026-05-18');
    await night('2026-05-18');
    await db('failures')
      .where('class_id', held.classId)
      .where('failed_on', '>', '2023-02-01')
      .update({ voided_at: '2026-05-19T10:00:00Z', void_reason: 'logged for another class' });
    await night('2026-05-19');
    const changed = (await newsFor()).find(({ kind }) => kind === 'verdict-changed');
    expect(changed?.sentence).toBe('Seals are now called undecided; they were wear-out.');
    expect(changed?.why).toMatch(/^\d+ records were voided\.$/);
    expect(await readVerdictHistory(db, held.classId)).toMatchObject([
      { verdict: 'wear-out', from: '2026-05-18', to: '2026-05-18', nights: 1, why: null },
      { verdict: 'undecided', from: '2026-05-19', nights: 1, why: changed?.why },
    ]);
  });

  it('takes no notice of one more failure that changes nothing', async () => {
    await addUntil('2023-01-01', '2026-05-18');
    await night('2026-05-18');
    await addFailure(db, { classId: held.classId, assetId: held.assetIds[3]! }, '2026-05-19');
    const before = await kindsFor();
    await night('2026-05-19');
    expect(await kindsFor()).toEqual(before);
  });
});

describe('the page', () => {
  const page = async (who: string, query = '') =>
    visit(since, new Request(`${host}/since${query}`, { headers: { Cookie: cookies.get(who)! } }));
  const act = (who: string, fields: Record<string, string>) =>
    visit(since, formRequest(`${host}/since`, fields, { Cookie: cookies.get(who)! }));

  it('is where leads and managers begin, and technicians and admins do not', async () => {
    const home = { path: '/', ...homeRoute };
    const from = async (who: string) =>
      (await visit(home, new Request(`${host}/`, { headers: { Cookie: cookies.get(who)! } }))).headers.get(
        'Location',
      );
    expect(await from('lead')).toBe('/since');
    expect(await from('manager')).toBe('/since');
    expect(await from('technician')).toBe('/log');
    expect(await from('admin')).toBe('/imports');
  });

  it('tells an estate that was never assessed from one where nothing is new', async () => {
    const never = (await (await page('lead')).json()) as { night: unknown; total: number };
    expect(never).toMatchObject({ night: null, total: 0 });
    await addUntil('2023-01-01', '2023-01-08');
    await night('2023-01-08');
    const quiet = (await (await page('lead')).json()) as { night: { asOf: string }; total: number };
    expect(quiet).toMatchObject({ night: { asOf: '2023-01-08', classes: 1, problems: 0 }, total: 0 });
  });

  it('marks as seen for one person, with an undo, and back again', async () => {
    await addUntil('2023-01-01', '2026-05-19');
    await night('2026-05-19');
    const [first] = await newsFor();
    const response = await act('lead', { intent: 'seen', news: first!.id, returnTo: '/since?page=2' });
    expect(response.headers.get('Location')).toBe('/since?page=2');
    expect((await newsFor()).map(({ id }) => id)).not.toContain(first!.id);
    await act('lead', { intent: 'unseen', news: first!.id });
    expect((await newsFor()).map(({ id }) => id)).toContain(first!.id);
  });

  it('leads nowhere else, and takes no form that is not its own', async () => {
    const response = await act('lead', { intent: 'seen', news: '', returnTo: 'https://elsewhere.example/' });
    expect(response.headers.get('Location')).toBe('/since');
    expect((await act('lead', { intent: 'seen', news: 'no-id' })).status).toBe(400);
    expect((await act('lead', { intent: 'burn', news: '' })).status).toBe(400);
  });
});
