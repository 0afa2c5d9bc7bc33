import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { computeFindings } from '~/advice/compute-findings';
import { advanceAlarmState } from '~/advice/advance-alarm-state';
import { readClassRecords } from '~/models/class-records.server';
import { saveFittedItems } from '~/models/fitted-items.server';
import { layOutClass } from '~/models/lay-out-class';
import { addReading, listReadings, restoreReading, voidReading } from '~/models/meter-readings.server';
import * as fittedRoute from '~/routes/asset-fitted';
import * as readingRoute from '~/routes/log-reading';
import { startSession } from '~/services/session.server';
import { database, type Database } from '../../db/connection';
import { addPerson, addSite } from '../support/people';
import { addAsset, addClass, addFailure } from '../support/records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { formRequest, visit } from '../support/visit';

const host = 'http://intervale.test';
const people = ['technician', 'stranger', 'lead', 'manager', 'admin'] as const;
type Person = (typeof people)[number] | 'nobody';

let test: TestDatabase;
let db: Database;
let siteId: string;
let personId: string;
const cookies = new Map<Person, string>();

beforeAll(async () => {
  test = await createTestDatabase();
  db = test.database;
  vi.stubEnv('DATABASE_URL', test.url);
  vi.stubEnv('SESSION_SECRET', 'a secret of this test file alone, 40 long');
  siteId = await addSite(db, 'Fenwick Baths');
  const otherSite = await addSite(db, 'Orrin Library');
  for (const person of people) {
    const id = await addPerson(db, {
      email: `${person}@larkmoor.example`,
      roles: [person === 'stranger' ? 'technician' : person],
      siteIds: person === 'technician' ? [siteId] : person === 'stranger' ? [otherSite] : [],
    });
    if (person === 'technician') personId = id;
    cookies.set(person, (await startSession(db, new Request(`${host}/`), id)).split(';')[0]!);
  }
});

afterAll(async () => {
  vi.unstubAllEnvs();
  await database().destroy();
  await test.drop();
});

let classId: string;
let assetId: string;
let count = 0;
beforeEach(async () => {
  count += 1;
  classId = await addClass(db, `Fan belt ${count}`, { clock: 'operating-hours' });
  assetId = await addAsset(db, { classId, siteId }, `FB-FAN-${count}`, {
    duty_hours_per_day: 10,
    retired_on: '2026-06-30',
  });
});

const now = new Date('2026-06-15T09:00:00Z');
const today = '2026-06-15';

function add(readOn: string, hours: number, { meterChanged = false, id = randomUUID() as string } = {}) {
  return addReading(db, { entry: { id, assetId, readOn, hours, meterChanged }, personId, now, today });
}

describe('a meter reading', () => {
  it('sent twice is stored once', async () => {
    const id = randomUUID();
    expect(await add('2026-01-01', 100, { id })).toEqual({ outcome: 'stored' });
    expect(await add('2026-01-01', 100, { id })).toEqual({ outcome: 'already-stored', same: true });
    expect(await add('2026-01-01', 120, { id })).toEqual({ outcome: 'already-stored', same: false });
    expect(await listReadings(db, assetId, 10)).toHaveLength(1);
  });

  it('that goes back is refused, unless the meter was changed', async () => {
    await add('2026-01-01', 500);
    expect(await add('2026-02-01', 400)).toMatchObject({ refusal: { code: 'below-earlier' } });
    expect(await add('2026-02-01', 3, { meterChanged: true })).toEqual({ outcome: 'stored' });
    expect(await add('2026-03-01', 200)).toEqual({ outcome: 'stored' });
  });

  it('put in between two others is held against both', async () => {
    await add('2026-01-01', 500);
    await add('2026-03-01', 800);
    expect(await add('2026-02-01', 900)).toMatchObject({ refusal: { code: 'above-later' } });
    expect(await add('2026-02-01', 650)).toEqual({ outcome: 'stored' });
  });

  it.each([
    ['in the future', '2026-06-16', 'in-future'],
    ['before the service', '2023-12-31', 'before-service'],
  ])('%s is refused', async (_, day, code) => {
    expect(await add(day, 10)).toMatchObject({ outcome: 'refused', refusal: { code } });
  });

  it('of a day that has one, and with more hours than the days have, is refused', async () => {
    await add('2026-01-01', 500);
    expect(await add('2026-01-01', 501)).toMatchObject({ refusal: { code: 'same-day' } });
    expect(await add('2026-01-03', 700)).toMatchObject({ refusal: { code: 'too-fast' } });
  });

  it('goes back in the database itself only with the word that the meter was changed', async () => {
    const row = (read_on: string, hours: number) => ({ id: randomUUID(), asset_id: assetId, read_on, hours });
    await db('meter_readings').insert(row('2026-01-01', 500));
    await expect(db('meter_readings').insert(row('2026-02-01', 499))).rejects.toMatchObject({
      constraint: 'meter_reading_goes_back',
    });
    await expect(db('meter_readings').delete()).rejects.toThrow(/never deleted/);
  });

  it('is voided with a reason and put back', async () => {
    const id = randomUUID();
    await add('2026-01-01', 500, { id });
    const wish = { readingId: id, personId };
    expect(await voidReading(db, { ...wish, version: 1, reason: 'wrong meter', now })).toEqual({
      outcome: 'done',
    });
    expect(await add('2026-02-01', 400)).toEqual({ outcome: 'stored' });
    expect(await restoreReading(db, { ...wish, version: 2, today })).toMatchObject({ outcome: 'refused' });
    const entries = await db('audit_entries').where({ subject_id: id }).orderBy('id').pluck('action');
    expect(entries).toEqual(['log', 'void']);
  });
});

describe('the hours of an assessment', () => {
  it('follow the meter where there is one and say so, and the duty where there is none', async () => {
    const other = await addAsset(db, { classId, siteId }, `FB-FAN-${count}-B`, { duty_hours_per_day: 10 });
    await add('2024-01-01', 0);
    await add('2026-01-01', 731 * 20);
    await addFailure(db, { assetId, classId }, '2025-01-01');
    await addFailure(db, { assetId: other, classId }, '2025-01-01');
    const options = { timeZone: 'Europe/London', asOf: '2025-12-31' };
    const evidence = layOutClass(await readClassRecords(db, classId, options), {
      asOf: options.asOf,
      serviceLevel: 0.95,
    });
    const findings = computeFindings(evidence, advanceAlarmState(null, evidence.positions));
    expect(findings.extent.positionsWithAssumedClock).toBe(1);
    // 731 days at 20 hours by the meter, and at 10 by the duty.
    expect(findings.rate.overall.exposure).toBeCloseTo(731 * 30, 6);
  });
});

describe('the screens', () => {
  const asPerson = (person: Person): Record<string, string> =>
    person === 'nobody' ? {} : { Cookie: cookies.get(person)! };
  const reading = { path: 'log/:assetId/reading', ...readingRoute };
  const fitted = { path: 'assets/:assetId/fitted', ...fittedRoute };

  it.each<[Person, number]>([
    ['technician', 302],
    ['lead', 302],
    ['stranger', 404],
    ['manager', 403],
    ['admin', 403],
    ['nobody', 302],
  ])('a reading sent by %s is answered %i', async (person, status) => {
    const fields = { intent: 'add', id: randomUUID(), readOn: '2026-01-01', hours: '100' };
    const response = await visit(
      reading,
      formRequest(`${host}/log/${assetId}/reading`, fields, asPerson(person)),
    );
    expect(response.status).toBe(status);
    const stored = await listReadings(db, assetId, 5);
    expect(stored).toHaveLength(person === 'technician' || person === 'lead' ? 1 : 0);
  });

  it('a reading that is no number comes back with the word beside its field', async () => {
    const fields = { intent: 'add', id: randomUUID(), readOn: '2026-01-01', hours: 'many' };
    const response = await visit(
      reading,
      formRequest(`${host}/log/${assetId}/reading`, fields, asPerson('technician')),
    );
    expect(response.status).toBe(400);
    expect(JSON.stringify(await response.json())).toContain('hours');
  });

  it.each<[Person, number]>([
    ['lead', 302],
    ['admin', 302],
    ['technician', 403],
    ['manager', 403],
  ])('fitting dates of a group sent by %s are answered %i', async (person, status) => {
    const group = await addAsset(db, { classId, siteId }, `FB-GRP-${count}-${person}`, {
      quantity: 10,
      watched_from: '2025-01-01',
      duty_hours_per_day: 10,
    });
    const response = await visit(
      fitted,
      formRequest(`${host}/assets/${group}/fitted`, { fitted: '2024-03-01 x 6', seen: '' }, asPerson(person)),
    );
    expect(response.status).toBe(status);
    const stored = await db('fitted_items').where({ asset_id: group });
    expect(stored).toHaveLength(status === 302 ? 1 : 0);
  });

  it('more items than the asset holds are refused, and two people at once are told', async () => {
    const group = await addAsset(db, { classId, siteId }, `FB-GRP-${count}-two`, {
      quantity: 10,
      watched_from: '2025-01-01',
    });
    const rows = [{ fittedOn: '2024-03-01', count: 11 }];
    expect(await saveFittedItems(db, { assetId: group, rows, seen: [], personId })).toMatchObject({
      outcome: 'refused',
    });
    const six = [{ fittedOn: '2024-03-01', count: 6 }];
    expect(await saveFittedItems(db, { assetId: group, rows: six, seen: [], personId })).toMatchObject({
      outcome: 'saved',
    });
    const four = [{ fittedOn: '2024-03-01', count: 4 }];
    expect(await saveFittedItems(db, { assetId: group, rows: four, seen: [], personId })).toMatchObject({
      outcome: 'changed-meanwhile',
    });
  });
});
