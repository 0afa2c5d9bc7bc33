import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { listTasks, readKeeping } from '~/models/maintenance-tasks.server';
import * as tasksRoute from '~/routes/class-tasks';
import { startSession } from '~/services/session.server';
import { database, type Database } from '../../db/connection';
import { addPerson, addSite } from '../support/people';
import { addAsset, addClass, addFailure, addPlannedWork } from '../support/records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { formRequest, visit } from '../support/visit';

const host = 'http://intervale.test';
const route = { path: 'classes/:classId/tasks', ...tasksRoute };

let test: TestDatabase;
let db: Database;
let siteId: string;
let classId: string;
const cookies = new Map<string, string>();

beforeAll(async () => {
  test = await createTestDatabase();
  db = test.database;
  vi.stubEnv('DATABASE_URL', test.url);
  vi.stubEnv('INTERVALE_TEST', '1');
  vi.stubEnv('SESSION_SECRET', 'a secret of this test file alone, 40 long');
  vi.stubEnv('INTERVALE_NOW', '2026-05-20T09:00:00Z');
  await db('organisations').insert({ name: 'Larkmoor', time_zone: 'Europe/London', currency: 'GBP' });
  siteId = await addSite(db, 'Fenwick Baths');
  for (const name of ['lead', 'admin', 'manager', 'technician'] as const) {
    const id = await addPerson(db, { email: `${name}@larkmoor.example`, roles: [name], siteIds: [siteId] });
    cookies.set(name, (await startSession(db, new Request(host), id)).split(';')[0]!);
  }
});
afterAll(async () => {
  vi.unstubAllEnvs();
  await database().destroy();
  await test.drop();
});

let count = 0;
beforeEach(async () => {
  await db.raw('truncate asset_classes cascade');
  count += 1;
  classId = await addClass(db, `Filter ${count}`, { item_singular: 'filter', item_plural: 'filters' });
});

const send = (fields: Record<string, string>, who = 'lead') =>
  visit(route, formRequest(`${host}/classes/${classId}/tasks`, fields, { Cookie: cookies.get(who)! }));
const errorsOf = async (response: Response) =>
  ((await response.json()) as { error: Record<string, string[]> }).error;
const tasks = () => listTasks(db, classId, '2026-05-20');

const entry = (differences: Record<string, string> = {}) => ({
  intent: 'add',
  kind: 'replace',
  name: 'Filter change',
  interval: '6',
  unit: 'months',
  cost: '45.50',
  statutoryReference: '',
  startsOn: '2024-01-01',
  ...differences,
});

describe('the tasks of a class', () => {
  it('are added, with their cost and interval, and audited', async () => {
    expect((await send(entry())).status).toBe(302);
    expect(await tasks()).toMatchObject([
      {
        name: 'Filter change',
        kind: 'replace',
        intervalDays: 183,
        costMinor: 4550,
        startsOn: '2024-01-01',
        assets: 0,
      },
    ]);
    expect(await db('audit_entries').where('subject', 'maintenance-task').first('action')).toEqual({
      action: 'add',
    });
  });

  it.each([
    [{ interval: 'often' }, 'interval', /number above 0/],
    [{ interval: '0' }, 'interval', /number above 0/],
    [{ name: ' ' }, 'name', /name/],
    [{ cost: 'much' }, 'cost', /amount/],
    [{ startsOn: '' }, 'startsOn', /day/],
    [{ kind: '' }, 'kind', /what is done/],
  ])('refuse %j beside its field', async (differences, field, message) => {
    const response = await send(entry(differences));
    expect(response.status).toBe(400);
    expect((await errorsOf(response))[field]?.[0]).toMatch(message);
    expect(await tasks()).toHaveLength(0);
  });

  it('are described anew, but never over somebody else’s change', async () => {
    await send(entry());
    const [task] = await tasks();
    const change = { intent: 'describe', taskId: task!.id, version: '1', name: 'Filter round', cost: '' };
    expect((await send(change, 'admin')).status).toBe(302);
    expect(await tasks()).toMatchObject([{ name: 'Filter round', costMinor: null, version: 2 }]);
    const second = await send({ ...change, name: 'Mine' });
    expect(second.status).toBe(409);
    expect((await errorsOf(second))['']?.[0]).toContain('admin');
    expect(await tasks()).toMatchObject([{ name: 'Filter round' }]);
  });

  it('end on a day, after the one they began on', async () => {
    await send(entry());
    const [task] = await tasks();
    const end = { intent: 'end', taskId: task!.id, version: '1' };
    expect((await errorsOf(await send({ ...end, endsOn: '2024-01-01' }))).endsOn?.[0]).toContain(
      '1 January 2024',
    );
    expect((await send({ ...end, endsOn: '2026-06-01' })).status).toBe(302);
    expect(await tasks()).toMatchObject([{ endsOn: '2026-06-01' }]);
  });

  it('that a law asks for end only with an express word', async () => {
    await send(entry({ statutoryReference: 'Local fire code' }));
    const [task] = await tasks();
    const end = { intent: 'end', taskId: task!.id, version: '1', endsOn: '2026-06-01' };
    expect((await errorsOf(await send(end))).confirmed).toBeDefined();
    expect((await send({ ...end, confirmed: 'on' })).status).toBe(302);
  });

  it('are for leads and admins to change, and of this class alone', async () => {
    expect((await send(entry(), 'manager')).status).toBe(403);
    expect((await send(entry(), 'technician')).status).toBe(403);
    const other = await addClass(db, `Other ${count}`);
    const [foreign] = (await db('maintenance_tasks')
      .insert({ class_id: other, name: 'Other', kind: 'test', interval_days: 30, starts_on: '2024-01-01' })
      .returning('id')) as { id: string }[];
    const response = await send({ intent: 'end', taskId: foreign!.id, version: '1', endsOn: '2026-06-01' });
    expect(response.status).toBe(409);
  });
});

describe('how well a task is kept', () => {
  it('is read from the planned work of its kind, a failure beginning the interval anew', async () => {
    await send(entry({ interval: '100', unit: 'days' }));
    const asset = (tag: string) => addAsset(db, { classId, siteId }, `${tag}-${count}`);
    const kept = { classId, assetId: await asset('KEPT') };
    for (const day of ['2024-02-01', '2024-05-12', '2024-08-18']) await addPlannedWork(db, kept, day);
    const late = { classId, assetId: await asset('LATE') };
    for (const day of ['2024-02-01', '2024-07-01']) await addPlannedWork(db, late, day);
    const failed = { classId, assetId: await asset('FAILED') };
    await addPlannedWork(db, failed, '2024-02-01');
    await addFailure(db, failed, '2024-04-01');
    await addPlannedWork(db, failed, '2024-07-10');
    await addPlannedWork(db, failed, '2024-07-11', { kind: 'inspect', renewed: false });
    await addPlannedWork(db, failed, '2024-07-12', { voided_at: new Date(), void_reason: 'wrong' });

    const [task] = await tasks();
    expect(await readKeeping(db, classId, task!, '2024-09-01')).toEqual({
      due: 4,
      kept: 3,
      early: 0,
      late: 1,
      overdue: 0,
    });
    expect((await readKeeping(db, classId, task!, '2026-05-20'))?.overdue).toBe(3);
  });

  it('cannot be told for a task that goes by the meter', async () => {
    await send(entry({ unit: 'hours', interval: '2000' }));
    const [task] = await tasks();
    expect(task).toMatchObject({ intervalDays: null, intervalHours: 2000 });
    expect(await readKeeping(db, classId, task!, '2026-05-20')).toBeNull();
  });
});
