import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { searchFor } from '~/models/search.server';
import * as assetRoute from '~/routes/asset';
import * as positionsRoute from '~/routes/class-positions';
import * as searchRoute from '~/routes/search';
import { startSession } from '~/services/session.server';
import { database, type Database } from '../../db/connection';
import { addPerson, addSite } from '../support/people';
import { addAsset, addClass, addFailure, addPlannedWork } from '../support/records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { visit, type RouteUnderTest } from '../support/visit';

const host = 'http://intervale.test';
let test: TestDatabase;
let db: Database;
const ids = { baths: '', house: '', pump: '', fan: '', first: '' };
const cookies = new Map<string, string>();

beforeAll(async () => {
  test = await createTestDatabase();
  db = test.database;
  vi.stubEnv('DATABASE_URL', test.url);
  vi.stubEnv('INTERVALE_TEST', '1');
  vi.stubEnv('SESSION_SECRET', 'a secret of this test file alone, 40 long');
  vi.stubEnv('INTERVALE_NOW', '2026-05-20T09:00:00Z');
  await db('organisations').insert({ name: 'Larkmoor', time_zone: 'Europe/London', currency: 'GBP' });
  ids.baths = await addSite(db, 'Fenwick Baths');
  ids.house = await addSite(db, 'Tarn House');
  ids.pump = await addClass(db, 'Circulation pump');
  ids.fan = await addClass(db, 'Pump room fan 50%');
  ids.first = await addAsset(db, { classId: ids.pump, siteId: ids.baths }, 'FB-PMP-1');
  await addAsset(db, { classId: ids.pump, siteId: ids.baths }, 'FB-PMP-10');
  await addAsset(db, { classId: ids.pump, siteId: ids.house }, 'TH-FB-PMP-1');
  await addAsset(db, { classId: ids.fan, siteId: ids.house }, 'TH_FAN');
  for (const [name, role, siteIds] of [
    ['lead', 'lead', []],
    ['technician', 'technician', [ids.house]],
  ] as const) {
    const id = await addPerson(db, { email: `${name}@larkmoor.example`, roles: [role], siteIds });
    cookies.set(name, (await startSession(db, new Request(host), id)).split(';')[0]!);
  }
});
afterAll(async () => {
  vi.unstubAllEnvs();
  await database().destroy();
  await test.drop();
});

const namesOf = async (words: string, scope: readonly string[] | 'all' = 'all', limit = 10) =>
  (await searchFor(db, scope, words, limit)).map(({ name }) => name);
const get = (route: RouteUnderTest, path: string, who = 'lead') =>
  visit(route, new Request(host + path, { headers: { Cookie: cookies.get(who)! } }));

describe('searching', () => {
  it('finds what is called exactly so first, then what begins so, then what holds it', async () => {
    expect(await namesOf('fb-pmp-1')).toEqual(['FB-PMP-1', 'FB-PMP-10', 'TH-FB-PMP-1']);
    expect(await namesOf('pump')).toEqual(['Pump room fan 50%', 'Circulation pump']);
  });

  it('takes signs of patterns for what they are', async () => {
    expect(await namesOf('50%')).toEqual(['Pump room fan 50%']);
    expect(await namesOf('th_')).toEqual(['TH_FAN']);
    expect(await namesOf('\\')).toEqual([]);
    expect(await namesOf('%%%')).toEqual([]);
  });

  it('finds nothing for nothing, and how a tag begins for a letter or two', async () => {
    expect(await namesOf('  ')).toEqual([]);
    expect(await namesOf('fb')).toEqual(['FB-PMP-1', 'FB-PMP-10']);
    expect(await namesOf('mp-')).toEqual(['FB-PMP-1', 'FB-PMP-10', 'TH-FB-PMP-1']);
  });

  it('gives no more than asked for of each kind', async () => {
    expect(await namesOf('fb-pmp', 'all', 2)).toHaveLength(2);
  });

  it('shows a technician what is at their own sites alone', async () => {
    expect(await namesOf('pmp', [ids.house])).toEqual(['TH-FB-PMP-1']);
    const other = await addClass(db, 'Pump elsewhere');
    await addAsset(db, { classId: other, siteId: ids.baths }, 'ELSEWHERE-1');
    expect(await namesOf('pump', [ids.house])).toEqual(['Pump room fan 50%', 'Circulation pump']);
    const page = await get({ path: 'search', ...searchRoute }, '/search?q=fb-pmp-1', 'technician');
    expect(((await page.json()) as { found: { name: string }[] }).found.map(({ name }) => name)).toEqual([
      'TH-FB-PMP-1',
    ]);
  });
});

describe('an asset', () => {
  const asset = { path: 'assets/:assetId', ...assetRoute };

  it('tells what it has been through, voided records left out', async () => {
    const place = { classId: ids.pump, assetId: ids.first };
    await addFailure(db, place, '2025-03-01');
    await addFailure(db, place, '2025-04-01', { effect: 'patched' });
    await addFailure(db, place, '2025-05-01', { outside_cause: 'flooded' });
    await addFailure(db, place, '2025-06-01', { voided_at: new Date(), void_reason: 'wrong' });
    await addPlannedWork(db, place, '2025-07-01');
    await addPlannedWork(db, place, '2025-08-01', { kind: 'inspect', renewed: false });
    const page = await get(asset, `/assets/${ids.first}`);
    const { position } = (await page.json()) as { position: { failures: number; timeline: object } };
    expect(position).toMatchObject({ failures: 2, plannedRenewals: 1, lastFailureOn: '2025-04-01' });
    expect(position.timeline).toEqual({
      from: '2024-01-01',
      to: '2026-05-20',
      events: [
        { day: '2025-03-01', kind: 'failure-renewed' },
        { day: '2025-04-01', kind: 'failure-patched' },
        { day: '2025-05-01', kind: 'outside' },
        { day: '2025-07-01', kind: 'renewal' },
        { day: '2025-08-01', kind: 'visit' },
      ],
    });
  });

  it('is not there for a technician of another site, nor for a wrong id', async () => {
    expect((await get(asset, `/assets/${ids.first}`, 'technician')).status).toBe(404);
    expect((await get(asset, '/assets/nonsense')).status).toBe(404);
  });

  it('stands among the places of its class, the worst first, of the viewer’s sites alone', async () => {
    const route = { path: 'classes/:classId/positions', ...positionsRoute };
    const tagsOf = async (query: string, who: string) =>
      (
        (await (await get(route, `/classes/${ids.pump}/positions${query}`, who)).json()) as {
          rows: { tag: string }[];
        }
      ).rows.map(({ tag }) => tag);
    expect(await tagsOf('', 'lead')).toEqual(['FB-PMP-1', 'FB-PMP-10', 'TH-FB-PMP-1']);
    expect(await tagsOf('?sort=tag&direction=desc', 'lead')).toEqual([
      'TH-FB-PMP-1',
      'FB-PMP-10',
      'FB-PMP-1',
    ]);
    expect(await tagsOf('', 'technician')).toEqual(['TH-FB-PMP-1']);
  });
});
