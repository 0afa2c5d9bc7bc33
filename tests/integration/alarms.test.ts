import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { advanceAlarmState } from '~/advice/advance-alarm-state';
import type { AlarmState } from '~/advice/alarm-findings';
import { clearAlarm, listAlarms, loadAlarmStates } from '~/models/alarms.server';
import { listClassIds, readClassRecords } from '~/models/class-records.server';
import { layOutClass } from '~/models/lay-out-class';
import { dayNumber, dayOf } from '~/models/day-number';
import { startRun } from '~/models/job-runs.server';
import * as clearRoute from '~/routes/alarm-clear';
import { startSession } from '~/services/session.server';
import { database, type Database } from '../../db/connection';
import { settleAlarms } from '../../jobs/nightly-alarms';
import { addPerson, addSite } from '../support/people';
import { addAsset, addClass, addFailure } from '../support/records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { cookiesOf, formRequest, visit } from '../support/visit';

const host = 'http://intervale.test';
const route = { path: 'alarms/:alarmId/clear', ...clearRoute };

let test: TestDatabase;
let db: Database;
let siteId: string;
let leadId: string;
const cookies = new Map<string, string>();

beforeAll(async () => {
  test = await createTestDatabase();
  db = test.database;
  vi.stubEnv('DATABASE_URL', test.url);
  vi.stubEnv('INTERVALE_TEST', '1');
  vi.stubEnv('INTERVALE_NOW', '2026-07-01T08:00:00Z');
  vi.stubEnv('SESSION_SECRET', 'a secret of this test file alone, 40 long');
  await db('organisations').insert({
    name: 'Larkmoor Civic Trust',
    time_zone: 'Europe/London',
    currency: 'GBP',
  });
  siteId = await addSite(db, 'Fenwick Baths');
  for (const role of ['lead', 'technician', 'manager', 'admin'] as const) {
    const siteIds = role === 'technician' ? [siteId] : [];
    const personId = await addPerson(db, { email: `${role}@larkmoor.example`, roles: [role], siteIds });
    if (role === 'lead') leadId = personId;
    const cookie = await startSession(db, new Request(`${host}/`), personId);
    cookies.set(role, cookie.split(';')[0]!);
  }
});

afterAll(async () => {
  vi.unstubAllEnvs();
  await database().destroy();
  await test.drop();
});

let classId: string;
let assetIds: string[];
beforeEach(async () => {
  await db.raw(
    'truncate failures, planned_work, assets, asset_classes, job_runs, alarms, alarm_states cascade',
  );
  classId = await addClass(db, 'Circulation pump seal', { item_singular: 'seal', item_plural: 'seals' });
  assetIds = [];
  for (let index = 0; index < 10; index += 1) {
    assetIds.push(
      await addAsset(db, { classId, siteId }, `FB-SEAL-${index}`, { in_service_on: '2024-01-01' }),
    );
  }
});

/** Computes every class from the last night's states, as a run does, and settles the alarms in one transaction. */
async function night(asOf: string, { dies = false } = {}): Promise<Map<string, AlarmState>> {
  const states = await loadAlarmStates(db);
  const computed: { classId: string; alarmState: AlarmState }[] = [];
  for (const id of await listClassIds(db)) {
    const { positions } = layOutClass(await readClassRecords(db, id, { timeZone: 'Europe/London', asOf }), {
      asOf,
      serviceLevel: 0.95,
    });
    computed.push({ classId: id, alarmState: advanceAlarmState(states.get(id) ?? null, positions) });
  }
  const runId = await startRun(db, 'nightly', asOf);
  const settled = db.transaction(async (transaction) => {
    await settleAlarms(transaction, { runId, asOf }, computed);
    if (dies) throw new Error('killed');
  });
  if (dies) await expect(settled).rejects.toThrow('killed');
  else await settled;
  return new Map(computed.map(({ classId: id, alarmState }) => [id, alarmState]));
}

async function fromScratch(asOf: string): Promise<AlarmState> {
  return advanceAlarmState(
    null,
    layOutClass(await readClassRecords(db, classId, { timeZone: 'Europe/London', asOf }), {
      asOf,
      serviceLevel: 0.95,
    }).positions,
  );
}

/** So many failures, one every few days from a day on, at one asset after the other. */
async function failEvery(days: number, count: number, from: string): Promise<string[]> {
  const ids: string[] = [];
  for (let index = 0; index < count; index += 1) {
    const assetId = assetIds[index % assetIds.length]!;
    ids.push(await addFailure(db, { assetId, classId }, dayOf(dayNumber(from) + index * days)));
  }
  return ids;
}

/** Quiet for two years, then a failure every eight days. */
const getWorse = () => failEvery(8, 14, '2026-01-05');
const rising = async (open?: boolean) =>
  (await listAlarms(db, 'all', { classId, open })).filter(({ kind }) => kind === 'rate-rising');
const clear = (alarmId: string, reason = 'New pumps were fitted there.') =>
  clearAlarm(db, { alarmId, personId: leadId, reason, now: new Date('2026-07-01T08:00:00Z') });

describe('alarms', () => {
  it('are raised once, whatever the number of nights that see the same evidence', async () => {
    await getWorse();
    await night('2026-04-30');
    const [alarm, ...more] = await rising();
    expect(more).toEqual([]);
    expect(alarm).toMatchObject({
      className: 'Circulation pump seal',
      raisedAsOf: '2026-04-30',
      failures: 14,
      clearedAt: null,
    });
    expect(alarm!.logE).toBeGreaterThan(Math.log(20));
    expect(alarm!.logE).toBe(alarm!.logETotal);
    await night('2026-04-30');
    await night('2026-05-01');
    expect(await rising()).toEqual([alarm]);
  });

  it('stay cleared for the same evidence, and are raised again by new evidence', async () => {
    await getWorse();
    await night('2026-04-30');
    const [first] = await rising(true);
    expect(await clear(first!.id)).toEqual({ outcome: 'cleared', classId });
    await night('2026-05-01');
    await night('2026-05-02');
    expect(await rising(true)).toEqual([]);
    expect(await rising(false)).toMatchObject([
      { clearedByName: 'lead', clearReason: 'New pumps were fitted there.' },
    ]);

    await failEvery(3, 14, '2026-05-03');
    await night('2026-06-20');
    const [second, ...more] = await rising(true);
    expect(more).toEqual([]);
    expect(second).toMatchObject({ raisedAsOf: '2026-06-20', failures: 28 });
    const { log_e_at_clearing: before } = await db('alarms')
      .where('id', first!.id)
      .first<{ log_e_at_clearing: number }>();
    expect(second!.logE).toBe(second!.logETotal - before);
    expect(second!.logE).toBeGreaterThan(Math.log(20));
    expect(await rising()).toHaveLength(2);
  });

  it('keep the first reason when two people clear at once, with one entry in the audit trail', async () => {
    await getWorse();
    await night('2026-04-30');
    const [alarm] = await rising(true);
    const outcomes = await Promise.all([clear(alarm!.id, 'one'), clear(alarm!.id, 'two')]);
    expect(outcomes.map(({ outcome }) => outcome).sort()).toEqual(['already-cleared', 'cleared']);
    const entries = await db('audit_entries').where({ subject: 'alarm', subject_id: alarm!.id });
    const [kept] = await rising(false);
    expect(entries).toMatchObject([
      { action: 'clear', person_id: leadId, after: { reason: kept!.clearReason } },
    ]);
    expect(await clear('00000000-0000-4000-8000-000000000000')).toEqual({ outcome: 'no-such-alarm' });
  });

  it('are listed by class, by state and by site', async () => {
    await getWorse();
    await night('2026-04-30');
    const other = await addClass(db, 'Fan belt');
    const elsewhere = await addSite(db, `Orrin Library ${performance.now()}`);
    expect(await listAlarms(db, 'all', { classId: other })).toEqual([]);
    expect(await listAlarms(db, [elsewhere])).toEqual([]);
    expect(await listAlarms(db, [])).toEqual([]);
    expect(await listAlarms(db, [siteId], { open: false })).toEqual([]);
    expect((await listAlarms(db, [siteId], { open: true })).length).toBeGreaterThan(0);
  });

  it('ask for more among many classes', async () => {
    await failEvery(8, 6, '2026-01-05');
    await night('2026-04-30');
    const [alone] = await rising(true);
    const classesItPasses = Math.floor(Math.exp(alone!.logE) / 20);
    await db('alarms').del();
    for (let index = 0; index < classesItPasses; index += 1) await addClass(db, `Quiet class ${index}`);
    await night('2026-05-01');
    expect(await rising()).toEqual([]);
    await db('asset_classes').where('name', 'Quiet class 0').del();
    await night('2026-05-02');
    expect(await rising()).toHaveLength(1);
  });
});

describe('the state that a night leaves', () => {
  it('is to the last bit what all records give from scratch, night after night', async () => {
    await getWorse();
    for (const asOf of ['2026-01-31', '2026-02-28', '2026-03-31', '2026-04-30']) {
      const computed = await night(asOf);
      expect(computed.get(classId)).toEqual(await fromScratch(asOf));
      expect((await loadAlarmStates(db)).get(classId)).toEqual(await fromScratch(asOf));
    }
  });

  it('takes in only the new failures of a night', async () => {
    await getWorse();
    await night('2026-02-28');
    // A mark that only appending carries on; computing from scratch would lose it.
    await db.raw(`update alarm_states set state = jsonb_set(state, '{trend,sum}', '1000')`);
    const next = await night('2026-03-31');
    expect(next.get(classId)!.trend.sum).toBeGreaterThan(1000);
    expect(next.get(classId)!.trend.failures).toBe((await fromScratch('2026-03-31')).trend.failures);
  });

  it('is the same after a void and its undoing', async () => {
    const [, second] = await getWorse();
    await night('2026-04-30');
    const before = (await loadAlarmStates(db)).get(classId);
    await db('failures').where('id', second).update({ voided_at: new Date(), void_reason: 'wrong seal' });
    await night('2026-05-01');
    const without = (await loadAlarmStates(db)).get(classId);
    expect(without?.trend.failures).toBe(13);
    expect(without).toEqual(await fromScratch('2026-05-01'));
    await db('failures').where('id', second).update({ voided_at: null, void_reason: null });
    await night('2026-05-02');
    expect((await loadAlarmStates(db)).get(classId)).toEqual(before);
    expect(await rising()).toHaveLength(1);
  });

  it('is computed from scratch after an entry on a day taken in already', async () => {
    await getWorse();
    await night('2026-04-30');
    await addFailure(db, { assetId: assetIds[9]!, classId }, '2026-01-05');
    await night('2026-05-01');
    expect((await loadAlarmStates(db)).get(classId)).toEqual(await fromScratch('2026-05-01'));
  });
});

describe('a run that is cut off, or looks back', () => {
  it('leaves no alarm and no state', async () => {
    await night('2026-01-01');
    const before = await db('alarm_states').select();
    await getWorse();
    await night('2026-04-30', { dies: true });
    expect(await rising()).toEqual([]);
    expect(await db('alarm_states').select()).toEqual(before);
    await night('2026-04-30');
    expect(await rising()).toHaveLength(1);
  });

  it('raises nothing and stores nothing for a night before one already settled', async () => {
    await getWorse();
    await night('2026-06-30');
    const [alarm] = await rising();
    await clear(alarm!.id);
    const before = await db('alarm_states').select();
    await db('alarms').del();
    await night('2026-04-30');
    expect(await rising()).toEqual([]);
    expect(await db('alarm_states').select()).toEqual(before);
  });
});

describe('clearing from the class page', () => {
  const post = (alarmId: string, fields: Record<string, string>, role = 'lead') =>
    visit(route, formRequest(`${host}/alarms/${alarmId}/clear`, fields, { Cookie: cookies.get(role) ?? '' }));
  let alarmId: string;
  beforeEach(async () => {
    await getWorse();
    await night('2026-04-30');
    alarmId = (await rising(true))[0]!.id;
  });

  it('leads back to the class with a message', async () => {
    const response = await post(alarmId, { reason: '  Boiler water was changed.  ' });
    expect(response.status).toBe(302);
    expect(response.headers.get('Location')).toBe(`/classes/${classId}`);
    expect(cookiesOf(response)).toContain('toast=');
    expect((await rising(false))[0]).toMatchObject({
      clearReason: 'Boiler water was changed.',
      clearedByName: 'lead',
    });
    expect((await post(alarmId, { reason: 'again' })).status).toBe(302);
    expect((await rising(false))[0]?.clearReason).toBe('Boiler water was changed.');
  });

  it('is for the lead alone', async () => {
    for (const role of ['technician', 'manager', 'admin']) {
      expect((await post(alarmId, { reason: 'so' }, role)).status).toBe(403);
    }
    expect((await post(alarmId, { reason: 'so' }, 'nobody')).headers.get('Location')).toMatch(/^\/sign-in/);
    expect(await rising(true)).toHaveLength(1);
  });

  it('asks for a reason, keeps what was typed, and knows no such alarm', async () => {
    for (const reason of ['', '   ', 'x'.repeat(1001)]) {
      const response = await post(alarmId, { reason });
      expect(response.status).toBe(400);
      const answer = (await response.json()) as {
        error: { reason: string[] };
        initialValue: { reason?: string };
      };
      expect(answer.error.reason).toHaveLength(1);
      if (reason.trim() !== '') expect(answer.initialValue.reason).toBe(reason);
    }
    expect((await post('00000000-0000-4000-8000-000000000000', { reason: 'so' })).status).toBe(404);
    expect((await post('nonsense', { reason: 'so' })).status).toBe(404);
    expect(await rising(true)).toHaveLength(1);
  });
});
