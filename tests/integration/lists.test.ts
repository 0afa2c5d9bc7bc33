import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import type { Role } from '~/models/people.server';
import * as recordsCsvRoute from '~/routes/class-records-csv';
import * as recordsRoute from '~/routes/class-records';
import * as classesCsvRoute from '~/routes/classes-csv';
import * as yearAheadCsvRoute from '~/routes/year-ahead-csv';
import * as yearAheadRoute from '~/routes/year-ahead';
import { startSession } from '~/services/session.server';
import { database, type Database } from '../../db/connection';
import { runNightly } from '../../jobs/nightly';
import { addPerson, addSite } from '../support/people';
import { addSimulatedClass, addSimulatedRecords } from '../support/simulated-records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { visit, type RouteUnderTest } from '../support/visit';

const host = 'http://intervale.test';
const organisation = { timeZone: 'Europe/London', currency: 'GBP', serviceLevel: 0.95 };

let test: TestDatabase;
let db: Database;
const ids = { baths: '', house: '', seal: '', fan: '' };
const cookies = new Map<string, string>();

async function person(name: string, roles: Role[], siteIds: string[] = []): Promise<void> {
  const id = await addPerson(db, { email: `${name}@larkmoor.example`, roles, siteIds });
  cookies.set(name, (await startSession(db, new Request(host), id)).split(';')[0]!);
}

beforeAll(async () => {
  test = await createTestDatabase();
  db = test.database;
  vi.stubEnv('DATABASE_URL', test.url);
  vi.stubEnv('INTERVALE_TEST', '1');
  vi.stubEnv('SESSION_SECRET', 'a secret of this test file alone, 40 long');
  await db('organisations').insert({ name: 'Larkmoor', time_zone: 'Europe/London', currency: 'GBP' });
  ids.baths = await addSite(db, 'Fenwick Baths');
  ids.house = await addSite(db, 'Tarn House');
  await person('lead', ['lead']);
  await person('manager', ['manager']);
  await person('technician', ['technician'], [ids.house]);
  const common = { siteId: ids.baths, assets: 20, watchedFrom: '2023-01-01', seed: 5 };
  const seal = {
    ...common,
    name: 'Seal',
    shape: 4,
    scale: 700,
    columns: { failure_cost_minor: 100_000, planned_cost_minor: 10_000, spares_lead_time_days: 30 },
  };
  const fan = { ...common, name: '=Fan', shape: 1, scale: 1500, assets: 10 };
  for (const [key, records] of [
    ['seal', seal],
    ['fan', fan],
  ] as const) {
    const held = await addSimulatedClass(db, records);
    await addSimulatedRecords(db, records, held, { after: '2023-01-01', until: '2026-05-19' });
    ids[key] = held.classId;
  }
  await db('assets')
    .where('class_id', ids.seal)
    .whereIn('tag', ['Seal-1', 'Seal-2', 'Seal-3', 'Seal-4', 'Seal-5'])
    .update({
      site_id: ids.house,
    });
  await runNightly(db, { asOf: '2026-05-19', organisation });
});
afterAll(async () => {
  vi.unstubAllEnvs();
  await database().destroy();
  await test.drop();
});

const get = (route: RouteUnderTest, path: string, who = 'lead') =>
  visit(route, new Request(host + path, { headers: { Cookie: cookies.get(who)! } }));
async function linesOf(response: Response): Promise<string[]> {
  expect(response.status).toBe(200);
  return (await response.text()).trimEnd().split('\r\n');
}

interface YearAhead {
  rows: {
    className: string;
    siteName: string | null;
    mean: number;
    low: number;
    high: number;
    costMinor: number | null;
    spares: number | null;
  }[];
  total: number;
  sum: { mean: number; low: number; high: number; costMinor: number; withoutCost: number };
}
const yearAhead = async (query = '') =>
  (await (await get({ path: 'year-ahead', ...yearAheadRoute }, `/year-ahead${query}`)).json()) as YearAhead;

describe('the year ahead', () => {
  it('has a row a class, most failures first, with range, spares and cost', async () => {
    const { rows, total, sum } = await yearAhead();
    expect(total).toBe(2);
    expect(rows.map(({ className }) => className)).toEqual(['Seal', '=Fan']);
    const [seal, fan] = rows;
    expect(seal!.low).toBeLessThan(seal!.mean);
    expect(seal!.costMinor).toBe(Math.round(seal!.mean * 100_000));
    expect(seal!.spares).toBeGreaterThan(0);
    expect(fan).toMatchObject({ costMinor: null, spares: null, siteName: null });
    expect(sum.mean).toBeCloseTo(seal!.mean + fan!.mean, 9);
    expect(sum.high - sum.low).toBeLessThan(seal!.high - seal!.low + fan!.high - fan!.low);
    expect(sum).toMatchObject({ costMinor: seal!.costMinor, withoutCost: 1 });
  });

  it('has a row a class and site, which add up to the class in the mean', async () => {
    const { rows } = await yearAhead('?by=site&sort=site&direction=asc');
    expect(rows.map(({ className, siteName }) => [className, siteName])).toEqual([
      ['=Fan', 'Fenwick Baths'],
      ['Seal', 'Fenwick Baths'],
      ['Seal', 'Tarn House'],
    ]);
    const whole = (await yearAhead()).rows[0]!.mean;
    // Ages are grouped within each site, which moves the sum by a little.
    expect((rows[1]!.mean + rows[2]!.mean) / whole).toBeCloseTo(1, 1);
  });

  it('can be looked at for one site and for a shorter time', async () => {
    const { rows } = await yearAhead(`?site=${ids.house}&months=1`);
    expect(rows).toHaveLength(1);
    expect(rows[0]!.mean).toBeLessThan((await yearAhead(`?site=${ids.house}`)).rows[0]!.mean);
  });

  it('is downloaded whole, with what a spreadsheet would run made harmless', async () => {
    const lines = await linesOf(
      await get({ path: 'year-ahead.csv', ...yearAheadCsvRoute }, '/year-ahead.csv?by=site', 'manager'),
    );
    expect(lines).toHaveLength(4);
    expect(lines[0]).toContain('failures expected in 12 months');
    expect(lines.some((line) => line.startsWith("'=Fan,"))).toBe(true);
  });
});

describe('classes as a file', () => {
  it('has every class the filter leaves and the viewer may see', async () => {
    const route = { path: 'classes.csv', ...classesCsvRoute };
    expect(await linesOf(await get(route, '/classes.csv'))).toHaveLength(3);
    const wearing = await linesOf(await get(route, '/classes.csv?verdict=wear-out'));
    expect(wearing).toHaveLength(2);
    expect(wearing[1]).toMatch(/^Seal,no,no,2026-05-19,wear-out,/);
    expect(await linesOf(await get(route, '/classes.csv', 'technician'))).toHaveLength(2);
  });
});

describe('the records of a class', () => {
  const csv = { path: 'classes/:classId/records.csv', ...recordsCsvRoute };
  const page = { path: 'classes/:classId/records', ...recordsRoute };
  const listed = async (query: string, who = 'lead') =>
    (await (await get(page, `/classes/${ids.seal}/records${query}`, who)).json()) as {
      rows: { day: string; tag: string; siteName: string }[];
      total: number;
    };

  it('are filtered and sorted as the address says', async () => {
    const all = await listed('');
    const some = await listed(`?from=2025-01-01&to=2025-12-31&site=${ids.house}&sort=tag&direction=asc`);
    expect(some.total).toBeGreaterThan(0);
    expect(some.total).toBeLessThan(all.total);
    expect(some.rows.every(({ day, siteName }) => day.startsWith('2025') && siteName === 'Tarn House')).toBe(
      true,
    );
    expect(some.rows.map(({ tag }) => tag)).toEqual(some.rows.map(({ tag }) => tag).sort());
    expect((await listed('?voided=yes')).total).toBe(0);
  });

  it('are a file of all rows of the same filter', async () => {
    const { total } = await listed('?from=2025-01-01');
    expect(await linesOf(await get(csv, `/classes/${ids.seal}/records.csv?from=2025-01-01`))).toHaveLength(
      total + 1,
    );
  });

  it('are those of the technician’s own sites', async () => {
    const lines = await linesOf(await get(csv, `/classes/${ids.seal}/records.csv`, 'technician'));
    expect(lines.length).toBeGreaterThan(1);
    expect(lines.slice(1).every((line) => line.includes('Tarn House'))).toBe(true);
    expect((await get(csv, `/classes/${ids.fan}/records.csv`, 'technician')).status).toBe(404);
  });
});
