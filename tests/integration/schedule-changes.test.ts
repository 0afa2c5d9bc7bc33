import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import type { Role } from '~/models/people.server';
import { findChange } from '~/models/schedule-changes.server';
import * as changeRoute from '~/routes/change';
import * as termsRoute from '~/routes/change-terms';
import * as changesRoute from '~/routes/changes';
import * as csvRoute from '~/routes/changes-csv';
import * as putForwardRoute from '~/routes/class-change';
import { startSession } from '~/services/session.server';
import { database, type Database } from '../../db/connection';
import { runNightly } from '../../jobs/nightly';
import { addPerson, addSite } from '../support/people';
import { addSimulatedClass, addSimulatedRecords, type SimulatedRecords } from '../support/simulated-records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { formRequest, visit } from '../support/visit';

const host = 'http://intervale.test';
const routes = {
  putForward: { path: 'classes/:classId/change', ...putForwardRoute },
  change: { path: 'changes/:changeId', ...changeRoute },
  terms: { path: 'changes/:changeId/terms', ...termsRoute },
  list: { path: 'changes', ...changesRoute },
  csv: { path: 'changes.csv', ...csvRoute },
};
const organisation = { timeZone: 'Europe/London', currency: 'GBP', serviceLevel: 0.95 };
const today = '2026-05-20';

let test: TestDatabase;
let db: Database;
let siteId: string;
let otherSiteId: string;
const cookies = new Map<string, string>();

async function person(name: string, roles: Role[]): Promise<void> {
  const id = await addPerson(db, { email: `${name}@larkmoor.example`, roles, siteIds: [siteId] });
  cookies.set(name, (await startSession(db, new Request(host), id)).split(';')[0]!);
}

beforeAll(async () => {
  test = await createTestDatabase();
  db = test.database;
  vi.stubEnv('DATABASE_URL', test.url);
  vi.stubEnv('INTERVALE_TEST', '1');
  vi.stubEnv('SESSION_SECRET', 'a secret of this test file alone, 40 long');
  vi.stubEnv('INTERVALE_NOW', `${today}T09:00:00Z`);
  await db('organisations').insert({ name: 'Larkmoor', time_zone: 'Europe/London', currency: 'GBP' });
  siteId = await addSite(db, 'Fenwick Baths');
  otherSiteId = await addSite(db, 'Tarn House');
  await person('lead', ['lead']);
  await person('colleague', ['lead']);
  await person('manager', ['manager']);
  await person('both', ['lead', 'manager']);
  await person('technician', ['technician']);
  await person('admin', ['admin']);
});
afterAll(async () => {
  vi.unstubAllEnvs();
  await database().destroy();
  await test.drop();
});

/** Seals that wear out, renewed every 1,000 days, which is too long. */
const seals = (name: string): SimulatedRecords => ({
  name,
  siteId,
  assets: 40,
  shape: 4,
  scale: 700,
  watchedFrom: '2023-01-01',
  renewalAge: 1000,
  seed: 5,
  columns: {
    item_singular: 'seal',
    item_plural: 'seals',
    planned_cost_minor: 20_000,
    failure_cost_minor: 200_000,
  },
});

let classId: string;
let assetIds: string[];
let taskId: string;
let count = 0;

beforeEach(async () => {
  vi.stubEnv('INTERVALE_NOW', `${today}T09:00:00Z`);
  await db.raw('truncate asset_classes, job_runs cascade');
  count += 1;
  const records = seals(`Seal ${count}`);
  ({ classId, assetIds } = await addSimulatedClass(db, records));
  await addSimulatedRecords(db, records, { classId, assetIds }, { after: '2023-01-01', until: '2026-05-19' });
  const [task] = (await db('maintenance_tasks')
    .insert({
      class_id: classId,
      name: 'Seal round',
      kind: 'replace',
      interval_days: 1000,
      starts_on: '2022-01-01',
    })
    .returning('id')) as { id: string }[];
  taskId = task!.id;
  await runNightly(db, { asOf: '2026-05-19', organisation });
});

const get = (route: (typeof routes)[keyof typeof routes], path: string, who: string) =>
  visit(route, new Request(host + path, { headers: { Cookie: cookies.get(who) ?? '' } }));
const post = (
  route: (typeof routes)[keyof typeof routes],
  path: string,
  fields: Record<string, string>,
  who: string,
) => visit(route, formRequest(host + path, fields, { Cookie: cookies.get(who) ?? '' }));

const form = (differences: Record<string, string> = {}) => ({
  id: randomUUID() as string,
  taskId,
  policy: 'interval',
  interval: '12',
  unit: 'months',
  scope: 'class',
  reason: 'They wear out well before the round comes.',
  ...differences,
});
const send = (fields: Record<string, string>, who = 'lead') =>
  post(routes.putForward, `/classes/${classId}/change`, fields, who);
async function putForward(differences: Record<string, string> = {}, who = 'lead'): Promise<string> {
  const fields = form(differences);
  expect((await send(fields, who)).headers.get('Location')).toBe(`/changes/${fields.id}`);
  return fields.id;
}
async function act(changeId: string, fields: Record<string, string>, who: string, version?: number) {
  const change = (await findChange(db, changeId))!;
  return post(
    routes.change,
    `/changes/${changeId}`,
    { version: String(version ?? change.version), ...fields },
    who,
  );
}
const revise = (changeId: string, fields: Record<string, string>, who = 'lead') =>
  post(
    routes.terms,
    `/changes/${changeId}/terms`,
    { ...form({ id: changeId, version: '1' }), ...fields },
    who,
  );
const errorsOf = async (response: Response) =>
  ((await response.json()) as { error?: Record<string, string[]> }).error ?? {};
const tasks = () =>
  db('maintenance_tasks')
    .where('class_id', classId)
    .orderBy(['starts_on', 'created_at'])
    .select('id', 'interval_days', 'starts_on', 'ends_on', 'replaces_task_id');

describe('putting a change forward', () => {
  it('keeps terms, price and evidence as they were that night', async () => {
    const id = await putForward();
    const change = (await findChange(db, id))!;
    expect(change).toMatchObject({
      action: 'shorten',
      from: 1000,
      state: 'put-forward',
      origin: 'by-hand',
      putForwardByName: 'lead',
      version: 1,
    });
    expect(change.to).toBeCloseTo(365.25, 6);
    expect(change.saving!.low).toBeLessThan(change.saving!.value);
    expect(change.share).toBe(1);
    expect(change.evidence.asOf).toBe('2026-05-19');
    expect(change.evidence.conclusion.verdict).toBe('wear-out');
    expect(change.steps).toMatchObject([{ step: 'put-forward', words: form().reason }]);

    await db('failures').where('class_id', classId).update({ voided_at: new Date(), void_reason: 'test' });
    await runNightly(db, { asOf: '2026-05-20', organisation });
    expect((await findChange(db, id))!.evidence.conclusion.verdict).toBe('wear-out');
  });

  it('knows the night’s own proposal', async () => {
    const page = (await (await get(routes.putForward, `/classes/${classId}/change`, 'lead')).json()) as {
      standing: { proposal: { action: string; to: { interval: number } } };
    };
    const { action, to } = page.standing.proposal;
    expect(action).toBe('shorten');
    const id = await putForward({ interval: String(Math.round((to.interval / 365.25) * 12)) });
    expect((await findChange(db, id))!.origin).toBe('proposal');
  });

  it('is done once, however often it is sent', async () => {
    const fields = form();
    await send(fields);
    expect((await send(fields)).headers.get('Location')).toBe(`/changes/${fields.id}`);
    expect(await db('schedule_changes').where('class_id', classId)).toHaveLength(1);
  });

  it('refuses a second one while the first waits, and loses nothing typed', async () => {
    await putForward();
    const response = await send(form({ interval: '9' }), 'colleague');
    expect(response.status).toBe(409);
    const answer = (await response.json()) as {
      error: Record<string, string[]>;
      initialValue: { interval: string };
    };
    expect(answer.error['']?.[0]).toContain('another change of this class forward meanwhile');
    expect(answer.initialValue.interval).toBe('9');
  });

  it.each([
    [{ interval: '' }, 'interval', /number above 0/],
    [{ interval: '-3' }, 'interval', /number above 0/],
    [{ reason: '  ' }, 'reason', /Say why/],
    [{ interval: '1000', unit: 'days' }, 'interval', /already/],
    [{ interval: '30', unit: 'years' }, 'interval', /only be tried on a part/],
    [{ scope: 'part' }, 'tags', /Choose a site/],
    [{ scope: 'part', tags: 'NOWHERE-1' }, 'tags', /NOWHERE-1/],
    [{ scope: 'part', policy: 'run-to-failure' }, 'scope', /trial needs an interval/],
  ])('refuses %j beside its field', async (differences, field, message) => {
    const response = await send(form(differences));
    expect(response.status).toBe(400);
    expect((await errorsOf(response))[field]?.[0]).toMatch(message);
  });

  it('refuses a trial on the whole class', async () => {
    const response = await send(form({ scope: 'part', sites: siteId }));
    expect((await errorsOf(response)).tags?.[0]).toContain('whole class');
  });

  it('refuses where the planned maintenance was changed meanwhile', async () => {
    await db('maintenance_tasks').where('id', taskId).update({ ends_on: '2026-05-01' });
    expect((await errorsOf(await send(form())))['']?.[0]).toContain('was changed meanwhile');
  });

  it('waits for the night after the schedule was changed: its price is of another one', async () => {
    await db('maintenance_tasks').where('id', taskId).update({ interval_days: 700 });
    expect((await errorsOf(await send(form())))['']?.[0]).toContain('after the next night');
  });

  it('waits until a change that is approved has begun', async () => {
    const id = await putForward();
    await act(id, { intent: 'approve', day: '2026-06-01' }, 'manager');
    expect((await errorsOf(await send(form({ interval: '9' }))))['']?.[0]).toContain('ends on 1 June 2026');
    const page = (await (await get(routes.putForward, `/classes/${classId}/change`, 'lead')).json()) as {
      endsOn: string;
    };
    expect(page.endsOn).toBe('2026-06-01');
  });

  it('shows a statutory class why not, and refuses it', async () => {
    await db('asset_classes').where('id', classId).update({ statutory: true });
    expect((await send(form())).status).toBe(409);
    expect(await db('schedule_changes').where('class_id', classId)).toHaveLength(0);
  });
});

describe('deciding', () => {
  it('approves: the task changes its interval from that day on', async () => {
    const id = await putForward();
    const response = await act(id, { intent: 'approve', day: '2026-06-01' }, 'manager');
    expect(response.headers.get('Location')).toBe(`/changes/${id}`);
    expect(await tasks()).toMatchObject([
      { id: taskId, interval_days: 1000, ends_on: '2026-06-01' },
      { interval_days: 365, starts_on: '2026-06-01', ends_on: null, replaces_task_id: taskId },
    ]);
    expect(await findChange(db, id)).toMatchObject({ state: 'approved', takesEffectOn: '2026-06-01' });
    const audited = await db('audit_entries')
      .where('subject', 'maintenance-task')
      .orderBy('id')
      .select('action', 'before', 'after');
    expect(audited.slice(-2)).toMatchObject([
      { action: 'end', after: { endsOn: '2026-06-01' } },
      { action: 'start', after: { interval_days: 365 } },
    ]);
  });

  it('refuses a day that is over, beside its field', async () => {
    const id = await putForward();
    const response = await act(id, { intent: 'approve', day: '2026-05-19' }, 'manager');
    expect((await errorsOf(response)).day?.[0]).toContain('20 May 2026');
    expect(await tasks()).toHaveLength(1);
  });

  it('refuses a day that is surely a slip', async () => {
    const id = await putForward();
    const response = await act(id, { intent: 'approve', day: '2062-05-21' }, 'manager');
    expect((await errorsOf(response)).day?.[0]).toContain('20 May 2028');
  });

  it('lets nobody approve what they put forward, not even with both roles', async () => {
    const id = await putForward({}, 'both');
    const response = await act(id, { intent: 'approve', day: today }, 'both');
    expect((await errorsOf(response))['']?.[0]).toContain('somebody else has to decide');
    await expect(
      db('schedule_changes')
        .where('id', id)
        .update({
          state: 'approved',
          decided_by: db.raw('put_forward_by'),
          decided_at: new Date(),
          takes_effect_on: today,
        }),
    ).rejects.toThrow('schedule_changes_own_decision');
  });

  it('declines with a reason, and asks for one', async () => {
    const id = await putForward();
    expect((await errorsOf(await act(id, { intent: 'decline', words: ' ' }, 'manager'))).words).toBeDefined();
    await act(id, { intent: 'decline', words: 'Not before the winter.' }, 'manager');
    const change = (await findChange(db, id))!;
    expect(change).toMatchObject({ state: 'declined', decidedByName: 'manager' });
    expect(change.steps.at(-1)).toMatchObject({ step: 'declined', words: 'Not before the winter.' });
    await putForward({ interval: '10' });
  });

  it('asks back, is answered, and waits again', async () => {
    const id = await putForward();
    await act(id, { intent: 'ask-back', words: 'Who does the extra rounds?' }, 'manager');
    expect((await findChange(db, id))!.state).toBe('asked-back');
    await act(id, { intent: 'answer', words: 'The same contractor.' }, 'colleague');
    expect((await findChange(db, id))!.state).toBe('put-forward');
  });

  it('tells the second of two managers that it has moved on, and keeps what they typed', async () => {
    const id = await putForward();
    await act(id, { intent: 'approve', day: today }, 'manager');
    const response = await act(id, { intent: 'decline', words: 'Too dear.' }, 'manager', 1);
    expect(response.status).toBe(409);
    const answer = (await response.json()) as {
      error: Record<string, string[]>;
      initialValue: { words: string };
    };
    expect(answer.error['']?.[0]).toContain('manager approved it meanwhile');
    expect(answer.initialValue.words).toBe('Too dear.');
  });

  it('cannot be approved for a class that was marked meanwhile, also past the form', async () => {
    const id = await putForward();
    await db('asset_classes').where('id', classId).update({ endangers_people: true });
    const response = await act(id, { intent: 'approve', day: today }, 'manager');
    expect((await errorsOf(response))['']?.[0]).toContain('not decided here');
    await expect(
      db('schedule_changes')
        .where('id', id)
        .update({ state: 'approved', decided_at: new Date(), takes_effect_on: today }),
    ).rejects.toThrow(/marked_class|not decided here/);
  });

  it('can still be declined for a class that was marked meanwhile', async () => {
    const id = await putForward();
    await db('asset_classes').where('id', classId).update({ statutory: true });
    const page = (await (await get(routes.change, `/changes/${id}`, 'manager')).json()) as {
      may: Record<string, boolean>;
    };
    expect(page.may).toMatchObject({ approve: false, decline: true });
    await act(id, { intent: 'decline', words: 'Not ours to decide.' }, 'manager');
    expect((await findChange(db, id))!.state).toBe('declined');
  });

  it('cannot be approved when the schedule is another one by now', async () => {
    const id = await putForward();
    await db('maintenance_tasks').where('id', taskId).update({ ends_on: '2026-05-10' });
    const response = await act(id, { intent: 'approve', day: today }, 'manager');
    expect((await errorsOf(response))['']?.[0]).toContain('put forward anew');
  });

  it('is withdrawn by who put it forward alone, and put forward again', async () => {
    const id = await putForward();
    expect((await errorsOf(await act(id, { intent: 'withdraw' }, 'colleague')))['']?.[0]).toContain(
      'Only the person',
    );
    await act(id, { intent: 'withdraw' }, 'lead');
    expect((await findChange(db, id))!.state).toBe('withdrawn');
    await act(id, { intent: 'reopen' }, 'lead');
    expect((await findChange(db, id))!.state).toBe('put-forward');
  });

  it('is not reopened beside another one that waits', async () => {
    const id = await putForward();
    await act(id, { intent: 'withdraw' }, 'lead');
    await putForward({ interval: '9' }, 'colleague');
    expect((await errorsOf(await act(id, { intent: 'reopen' }, 'lead')))['']?.[0]).toContain(
      'Another change',
    );
  });

  it.each([
    ['approve', 'lead'],
    ['approve', 'admin'],
    ['decline', 'lead'],
    ['withdraw', 'manager'],
    ['take-back', 'lead'],
    ['approve', 'technician'],
  ])('is not for everybody: %s by a %s', async (intent, who) => {
    const id = await putForward();
    expect((await act(id, { intent, day: today, words: 'x' }, who)).status).toBe(403);
    expect((await findChange(db, id))!.version).toBe(1);
  });
});

describe('putting it differently', () => {
  it('takes new terms and the evidence of today, and waits for a decision again', async () => {
    const id = await putForward();
    await act(id, { intent: 'ask-back', words: 'Why not ten?' }, 'manager');
    await runNightly(db, { asOf: today, organisation });
    const answer = await revise(id, { interval: '10', reason: 'Ten it is.', version: '2' });
    expect(answer.headers.get('Location')).toBe(`/changes/${id}`);
    const change = (await findChange(db, id))!;
    expect(change).toMatchObject({
      state: 'put-forward',
      reason: 'Ten it is.',
      version: 3,
      action: 'shorten',
    });
    expect(change.to).toBeCloseTo(304.375, 2);
    expect(change.evidence.asOf).toBe(today);
    expect(change.steps.at(-1)).toMatchObject({
      step: 'revised',
      words:
        'Before: Shorten from 1\u202f000 days to 12 months. Now: Shorten from 1\u202f000 days to 10 months.\nTen it is.',
    });
    const audited = await db('audit_entries')
      .where({ subject_id: id, action: 'revised' })
      .first('before', 'after');
    expect(audited).toMatchObject({
      before: { state: 'asked-back', to: 365.25 },
      after: { state: 'put-forward', reason: 'Ten it is.' },
    });
    await act(id, { intent: 'approve', day: today }, 'manager');
    expect(await tasks()).toMatchObject([{}, { interval_days: 304 }]);
  });

  it('makes a trial of it, and a change of the whole class again', async () => {
    const id = await putForward();
    await db('assets')
      .where('id', assetIds[0])
      .update({ tag: `DIFF-${count}` });
    await revise(id, { scope: 'part', tags: `DIFF-${count}` });
    expect(await findChange(db, id)).toMatchObject({ action: 'trial', part: [{ tag: `DIFF-${count}` }] });
    await revise(id, { version: '2' });
    expect(await findChange(db, id)).toMatchObject({ action: 'shorten', part: [] });
  });

  it('is for who put it forward alone', async () => {
    const id = await putForward();
    expect((await errorsOf(await revise(id, {}, 'colleague')))['']?.[0]).toContain('Only the person');
    for (const who of ['manager', 'admin', 'technician'])
      expect((await revise(id, {}, who)).status).toBe(403);
    expect((await findChange(db, id))!.version).toBe(1);
  });

  it('does not go past a decision, and loses nothing typed', async () => {
    const id = await putForward();
    await act(id, { intent: 'approve', day: today }, 'manager');
    const response = await revise(id, { interval: '10', reason: 'Ten it is.' });
    expect(response.status).toBe(409);
    const answer = (await response.json()) as {
      error: Record<string, string[]>;
      initialValue: { reason: string };
    };
    expect(answer.error['']?.[0]).toContain('moved this change on');
    expect(answer.initialValue.reason).toBe('Ten it is.');
    expect((await findChange(db, id))!.to).toBeCloseTo(365.25, 2);
  });

  it.each([
    [{ reason: '' }, 'reason', /Say why/],
    [{ interval: '30', unit: 'years' }, 'interval', /only be tried on a part/],
    [{ scope: 'part' }, 'tags', /Choose a site/],
  ])('refuses %j beside its field', async (fields, field, message) => {
    const id = await putForward();
    expect((await errorsOf(await revise(id, fields)))[field]?.[0]).toMatch(message);
  });

  it('refuses a class that was marked meanwhile', async () => {
    const id = await putForward();
    await db('asset_classes').where('id', classId).update({ statutory: true });
    expect((await errorsOf(await revise(id, {})))['']?.[0]).toContain('not put forward here');
  });
});

describe('in effect', () => {
  it('stops, starts and tries on a part', async () => {
    const stop = await putForward({ policy: 'run-to-failure' });
    await act(stop, { intent: 'approve', day: '2026-05-21' }, 'manager');
    expect(await tasks()).toMatchObject([{ ends_on: '2026-05-21' }]);

    vi.stubEnv('INTERVALE_NOW', '2026-05-22T09:00:00Z');
    await runNightly(db, { asOf: '2026-05-21', organisation });
    const start = await putForward({ taskId: '', interval: '52', unit: 'weeks' });
    await act(start, { intent: 'approve', day: '2026-05-22' }, 'manager');
    expect(await tasks()).toMatchObject([{}, { interval_days: 364, starts_on: '2026-05-22' }]);
    expect((await findChange(db, start))!.action).toBe('start');
  });

  it('tries a longer interval on some assets, while the rest goes on', async () => {
    const tags = assetIds.slice(0, 10).map((_, index) => `Seal ${count}-${index + 1}`);
    await db('assets')
      .where('id', assetIds[0])
      .update({ tag: `TRY-${count}-1`, site_id: otherSiteId });
    expect(tags).toHaveLength(10);
    const id = await putForward({ scope: 'part', tags: `TRY-${count}-1`, interval: '1200', unit: 'days' });
    await act(id, { intent: 'approve', day: today }, 'manager');
    const [, trial] = (await tasks()) as { id: string; interval_days: number; ends_on: null }[];
    expect(trial).toMatchObject({ interval_days: 1200, ends_on: null });
    expect(await db('maintenance_task_assets').where('task_id', trial!.id).select('asset_id')).toEqual([
      { asset_id: assetIds[0] },
    ]);
    await runNightly(db, { asOf: today, organisation });
    const { detail } = (await db('asset_classes as c')
      .join('assessments as a', 'a.id', 'c.current_assessment_id')
      .first('a.detail')) as { detail: { findings: { schedule: { current: { interval: number } } } } };
    expect(detail.findings.schedule.current.interval).toBe(1000);
  });

  it('goes back before its day as if it had never been', async () => {
    const id = await putForward();
    await act(id, { intent: 'approve', day: '2026-06-01' }, 'manager');
    await act(id, { intent: 'take-back', words: 'A mistake.' }, 'manager');
    expect(await tasks()).toMatchObject([{ id: taskId, ends_on: null }]);
    expect(await findChange(db, id)).toMatchObject({ state: 'taken-back', takenBackOn: today });
  });

  it('goes back after its day: the former interval returns', async () => {
    const id = await putForward();
    await act(id, { intent: 'approve', day: today }, 'manager');
    vi.stubEnv('INTERVALE_NOW', '2026-05-28T09:00:00Z');
    await act(id, { intent: 'take-back', words: 'It made it worse.' }, 'manager');
    expect(await tasks()).toMatchObject([
      { interval_days: 1000, ends_on: today },
      { interval_days: 365, ends_on: '2026-05-28' },
      { interval_days: 1000, starts_on: '2026-05-28', ends_on: null },
    ]);
  });

  it('goes back on the very day also where another change is put forward against it already', async () => {
    const first = await putForward();
    await act(first, { intent: 'approve', day: today }, 'manager');
    await runNightly(db, { asOf: today, organisation });
    const [, made] = (await tasks()) as { id: string }[];
    const second = await putForward({ taskId: made!.id, interval: '9' });
    await act(first, { intent: 'take-back', words: 'A mistake.' }, 'manager');
    expect(await tasks()).toMatchObject([
      { interval_days: 1000, ends_on: today },
      { interval_days: 365, ends_on: '2026-05-21' },
      { interval_days: 1000, starts_on: '2026-05-21', ends_on: null },
    ]);
    const response = await act(second, { intent: 'approve', day: '2026-05-21' }, 'manager');
    expect((await errorsOf(response))['']?.[0]).toContain('put forward anew');
  });

  it('is not taken back once another change has taken over: that one stays', async () => {
    const first = await putForward();
    await act(first, { intent: 'approve', day: today }, 'manager');
    await runNightly(db, { asOf: today, organisation });
    const [, made] = (await tasks()) as { id: string }[];
    vi.stubEnv('INTERVALE_NOW', '2026-05-28T09:00:00Z');
    const second = await putForward({ taskId: made!.id, interval: '9' });
    await act(second, { intent: 'approve', day: '2026-05-28' }, 'manager');
    const before = await tasks();
    const response = await act(first, { intent: 'take-back', words: 'Too late.' }, 'manager');
    expect((await errorsOf(response))['']?.[0]).toContain('changed again since');
    expect(await tasks()).toEqual(before);
  });

  it('takes a stop back: the rounds begin again', async () => {
    const id = await putForward({ policy: 'run-to-failure' });
    await act(id, { intent: 'approve', day: today }, 'manager');
    vi.stubEnv('INTERVALE_NOW', '2026-05-28T09:00:00Z');
    await act(id, { intent: 'take-back', words: 'Too many fail.' }, 'manager');
    expect(await tasks()).toMatchObject([
      { interval_days: 1000, ends_on: today },
      { interval_days: 1000, starts_on: '2026-05-28', ends_on: null, replaces_task_id: taskId },
    ]);
  });

  it('does not start a schedule before one that is to begin later', async () => {
    const stop = await putForward({ policy: 'run-to-failure' });
    await act(stop, { intent: 'approve', day: today }, 'manager');
    await runNightly(db, { asOf: today, organisation });
    const later = await putForward({ taskId: '' });
    await act(later, { intent: 'approve', day: '2026-07-01' }, 'manager');
    const sooner = await putForward({ taskId: '', interval: '9' });
    const response = await act(sooner, { intent: 'approve', day: '2026-06-01' }, 'manager');
    expect((await errorsOf(response))['']?.[0]).toContain('put forward anew');
    expect(await tasks()).toHaveLength(2);
  });

  it('follows a trial beside the rest, until the whole class is changed', async () => {
    for (const [index, assetId] of assetIds.slice(0, 20).entries()) {
      await db('assets')
        .where('id', assetId)
        .update({ tag: `PART-${count}-${index}`, site_id: otherSiteId });
    }
    const trial = await putForward({ scope: 'part', tags: '', sites: otherSiteId, interval: '9' });
    await act(trial, { intent: 'approve', day: today }, 'manager');
    await addSimulatedRecords(
      db,
      seals(`Seal ${count}`),
      { classId, assetIds },
      { after: '2026-05-19', until: '2026-06-30' },
    );
    await runNightly(db, { asOf: '2026-06-09', organisation });
    const half = (await findChange(db, trial))!.followUp!;
    expect(half).toMatchObject({ against: 'rest' });
    expect(half.after.to - half.after.from).toBe(21);
    expect(half.after).toMatchObject({ from: half.base.from, to: half.base.to });
    expect(half.after.exposure).toBeCloseTo(20 * 21, 6);

    vi.stubEnv('INTERVALE_NOW', '2026-06-10T09:00:00Z');
    const whole = await putForward({ interval: '9' });
    await act(whole, { intent: 'approve', day: '2026-06-10' }, 'manager');
    await runNightly(db, { asOf: '2026-06-30', organisation });
    expect((await findChange(db, trial))!.followUp!.after).toEqual(half.after);
    const followUp = (await findChange(db, whole))!.followUp!;
    expect(followUp).toMatchObject({ against: 'before' });
    expect(followUp.after.to - followUp.after.from).toBe(21);
  });

  it('ends the follow-up of a change when a later one takes over, and begins there', async () => {
    const first = await putForward();
    await act(first, { intent: 'approve', day: today }, 'manager');
    await runNightly(db, { asOf: today, organisation });
    const [, made] = (await tasks()) as { id: string }[];
    vi.stubEnv('INTERVALE_NOW', '2026-06-10T09:00:00Z');
    const second = await putForward({ taskId: made!.id, interval: '9' });
    await act(second, { intent: 'approve', day: '2026-06-10' }, 'manager');
    await runNightly(db, { asOf: '2026-07-31', organisation });
    const [before, after] = [
      (await findChange(db, first))!.followUp!,
      (await findChange(db, second))!.followUp!,
    ];
    expect(before.after.to).toBe(after.after.from);
    expect(after.base).toMatchObject({ from: before.after.from, to: before.after.to });
    expect(before.sentence).toContain('It was not in force for long enough to say.');
    vi.stubEnv('INTERVALE_NOW', '2026-06-12T09:00:00Z');
    await act(second, { intent: 'take-back', words: 'It made it worse.' }, 'manager');
    await runNightly(db, { asOf: '2026-08-31', organisation });
    expect((await findChange(db, first))!.followUp!.after).toEqual(before.after);
    expect((await findChange(db, second))!.followUpAsOf).toBe('2026-07-31');
  });

  it('is followed up every night: too early at first, then it helped', async () => {
    const id = await putForward();
    await act(id, { intent: 'approve', day: today }, 'manager');
    await runNightly(db, { asOf: '2026-05-25', organisation });
    expect((await findChange(db, id))!.followUp?.word).toBe('too-early');

    const changed = { ...seals(`Seal ${count}`), changed: { on: today, renewalAge: 365 } };
    await addSimulatedRecords(
      db,
      changed,
      { classId, assetIds },
      { after: '2026-05-19', until: '2026-11-25' },
    );
    await runNightly(db, { asOf: '2026-11-25', organisation });
    const { followUp, followUpAsOf } = (await findChange(db, id))!;
    expect(followUpAsOf).toBe('2026-11-25');
    expect(followUp).toMatchObject({ word: 'helped', against: 'before' });
    expect(followUp!.after.failures).toBeLessThan(followUp!.base.failures / 10);
    const list = (await (await get(routes.list, '/changes?group=followed', 'manager')).json()) as {
      rows: { id: string }[];
    };
    expect(list.rows.map((row) => row.id)).toEqual([id]);

    await runNightly(db, { asOf: '2026-05-25', organisation });
    expect((await findChange(db, id))!.followUpAsOf).toBe('2026-11-25');
  });
});

describe('the list', () => {
  const rowsOf = async (query: string, who = 'manager') =>
    (
      (await (await get(routes.list, `/changes${query}`, who)).json()) as {
        rows: { id: string }[];
        total: number;
      }
    ).rows.map(({ id }) => id);
  const refuse = (id: string) => act(id, { intent: 'decline', words: 'No.' }, 'manager');

  it('has what waits first, filters by state, site and class, and sorts', async () => {
    const declined = await putForward({ interval: '11' });
    await refuse(declined);
    vi.stubEnv('INTERVALE_NOW', `${today}T10:00:00Z`);
    const open = await putForward({ interval: '12' });
    expect(await rowsOf('')).toEqual([open, declined]);
    expect(await rowsOf('?direction=desc')).toEqual([declined, open]);
    expect(await rowsOf('?sort=saving&direction=desc')).toEqual([declined, open]);
    expect(await rowsOf('?sort=put-forward&direction=asc')).toEqual([declined, open]);
    expect(await rowsOf('?group=open')).toEqual([open]);
    expect(await rowsOf('?group=to-decide')).toEqual([open]);
    expect(await rowsOf('?group=past')).toEqual([declined]);
    expect(await rowsOf('?group=followed')).toEqual([]);
    expect(await rowsOf(`?site=${siteId}`)).toHaveLength(2);
    expect(await rowsOf(`?site=${otherSiteId}`)).toEqual([]);
    expect(await rowsOf(`?class=${classId}&page=2`)).toEqual([]);
    expect(await rowsOf('?group=nonsense&sort=nonsense&page=-1')).toHaveLength(2);
    await act(open, { intent: 'ask-back', words: 'Why?' }, 'manager');
    expect(await rowsOf('?group=to-decide')).toEqual([]);
  });

  it('comes as a file with every row of the filter', async () => {
    await refuse(await putForward({ interval: '11' }));
    await putForward({ reason: '=1+1, they say' });
    const lines = (await (await get(routes.csv, '/changes.csv?group=open', 'admin')).text())
      .trim()
      .split('\r\n');
    expect(lines).toHaveLength(2);
    expect(lines[1]).toContain('Shorten from 1\u202f000 days to 12 months');
    expect(lines[1]).toContain('waits for a decision');
    expect(lines[1]).not.toMatch(/,"?=1/);
  });

  it('is for leads, managers and admins', async () => {
    for (const who of ['lead', 'manager', 'admin'])
      expect((await get(routes.list, '/changes', who)).status).toBe(200);
    expect((await get(routes.list, '/changes', 'technician')).status).toBe(403);
  });
});
