import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import type { CorrectionPreview } from '~/models/correction-preview.server';
import { listFailureModes } from '~/models/failure-modes.server';
import { findFailure, logFailure } from '~/models/failures.server';
import * as cleanRoute from '~/routes/class-clean';
import * as failureRoute from '~/routes/failure';
import { startSession } from '~/services/session.server';
import { database, type Database } from '../../db/connection';
import { runNightly } from '../../jobs/nightly';
import { addPerson, addSite } from '../support/people';
import { addFailure } from '../support/records';
import { addSimulatedClass, addSimulatedRecords, type SimulatedRecords } from '../support/simulated-records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { visit } from '../support/visit';

const host = 'http://intervale.test';
const clean = { path: 'classes/:classId/clean', ...cleanRoute };
const organisation = { timeZone: 'Europe/London', currency: 'GBP', serviceLevel: 0.95 };

let test: TestDatabase;
let db: Database;
let siteId: string;
const cookies = new Map<string, string>();
const personIds = new Map<string, string>();
const roles = {
  lead: 'lead',
  colleague: 'lead',
  technician: 'technician',
  manager: 'manager',
  admin: 'admin',
} as const;

beforeAll(async () => {
  test = await createTestDatabase();
  db = test.database;
  vi.stubEnv('DATABASE_URL', test.url);
  vi.stubEnv('INTERVALE_TEST', '1');
  vi.stubEnv('SESSION_SECRET', 'a secret of this test file alone, 40 long');
  vi.stubEnv('INTERVALE_NOW', '2026-05-20T09:00:00Z');
  await db('organisations').insert({ name: 'Larkmoor', time_zone: 'Europe/London', currency: 'GBP' });
  siteId = await addSite(db, 'Fenwick Baths');
  for (const [name, role] of Object.entries(roles)) {
    const id = await addPerson(db, { email: `${name}@larkmoor.example`, roles: [role] });
    personIds.set(name, id);
    cookies.set(name, (await startSession(db, new Request(host), id)).split(';')[0]!);
  }
});
afterAll(async () => {
  vi.unstubAllEnvs();
  await database().destroy();
  await test.drop();
});

let classId: string;
let assetIds: string[];
let modes: { leak: string; crack: string };
let count = 0;

beforeEach(async () => {
  await db.raw('truncate failures, asset_classes, job_runs cascade');
  count += 1;
  const seals: SimulatedRecords = {
    name: `Seal ${count}`,
    siteId,
    assets: 40,
    shape: 4,
    scale: 700,
    watchedFrom: '2023-01-01',
    seed: 5,
    columns: { item_singular: 'seal', item_plural: 'seals' },
  };
  ({ classId, assetIds } = await addSimulatedClass(db, seals));
  await addSimulatedRecords(db, seals, { classId, assetIds }, { after: '2023-01-01', until: '2026-05-19' });
  const rows = (await db('failure_modes')
    .insert([
      { class_id: classId, name: 'Leak' },
      { class_id: classId, name: 'Crack' },
    ])
    .returning('id')) as { id: string }[];
  modes = { leak: rows[0]!.id, crack: rows[1]!.id };
  await runNightly(db, { asOf: '2026-05-19', organisation });
});

interface Row {
  id: string;
  asset_id: string;
  version: number;
  failed_on: string;
  mode_id: string | null;
  effect: string;
  outside_cause: string | null;
  item_fitted_on: string | null;
  void_reason: string | null;
}
const failures = (): Promise<Row[]> =>
  db('failures').where('class_id', classId).orderBy(['failed_on', 'id']).select<Row[]>('*');
const rowOf = async (id: string) => (await failures()).find((row) => row.id === id)!;
const tickOf = ({ id, version }: Pick<Row, 'id' | 'version'>) => `${id}:${version}`;

function request(fields: Record<string, string | string[]>, query: string, who: string): Request {
  const url = `${host}/classes/${classId}/clean${query}`;
  const body = new URLSearchParams(
    Object.entries(fields).flatMap(([name, value]) => [value].flat().map((one) => [name, one])),
  );
  const headers = { Origin: host, Cookie: cookies.get(who) ?? '' };
  return new Request(url, { method: 'POST', body, headers });
}
const send = (fields: Record<string, string | string[]>, { query = '', who = 'lead' } = {}) =>
  visit(clean, request(fields, query, who));

async function preview(fields: Record<string, string | string[]>, query = ''): Promise<CorrectionPreview> {
  const response = await send({ intent: 'preview', ...fields }, { query });
  expect(response.status).toBe(200);
  return ((await response.json()) as { preview: CorrectionPreview }).preview;
}
/** The form of a preview, sent by one of its buttons. */
const decide = (intent: string, plan: CorrectionPreview, who = 'lead') =>
  send(
    {
      intent,
      correctionId: plan.correctionId,
      correction: JSON.stringify(plan.correction),
      chosen: plan.chosen,
      ...(plan.all ? { all: 'on' } : {}),
    },
    { who },
  );
const save = (plan: CorrectionPreview, who = 'lead') => decide('save', plan, who);
const takeBack = (correctionId: string) => send({ intent: 'take-back', correctionId });
async function previewIn(response: Response, status = 200): Promise<CorrectionPreview> {
  expect(response.status).toBe(status);
  return ((await response.json()) as { preview: CorrectionPreview }).preview;
}
async function errorsOf(response: Response): Promise<Record<string, string[]>> {
  expect(response.status).toBe(400);
  return ((await response.json()) as { form: { error: Record<string, string[]> } }).form.error;
}

describe('the preview', () => {
  it('tells record by record what would change and what it does to the verdict, and saves nothing', async () => {
    const before = await failures();
    const audited = await db('audit_entries').count('* as n').first();
    const plan = await preview({ what: 'void', reason: 'another class', all: 'on' });
    expect(plan).toMatchObject({ total: before.length, unchanged: 0, refused: 0, meanwhile: [] });
    expect(plan.records).toHaveLength(50);
    expect(plan.effect?.before).toMatchObject({ verdict: 'wear-out', failures: before.length });
    expect(plan.effect?.after).toMatchObject({ verdict: 'undecided', failures: 0 });
    expect(await failures()).toEqual(before);
    expect(await db('audit_entries').count('* as n').first()).toEqual(audited);
  });

  it('judges the records as they are just as the night did', async () => {
    const [first] = await failures();
    const { effect } = await preview({ what: 'mode', modeId: modes.leak, record: tickOf(first!) });
    const held = (await db('assessments')
      .where('class_id', classId)
      .first('verdict', 'failures', 'summary')) as {
      verdict: string;
      failures: number;
    };
    expect(effect?.before).toMatchObject({ verdict: held.verdict, failures: held.failures });
    expect(effect?.after.fit).toEqual(effect?.before.fit);
  });

  it('takes only what matches the filter in the address', async () => {
    const plan = await preview(
      { what: 'effect', effect: 'patched', all: 'on' },
      `?from=2026-01-01&tag=seal%20${count}-1`,
    );
    const wanted = (await failures()).filter(({ failed_on: day }) => day >= '2026-01-01').length;
    expect(plan.total).toBeGreaterThan(0);
    expect(plan.total).toBeLessThan(wanted);
    expect(plan.records.every(({ tag }) => tag.startsWith(`Seal ${count}-1`))).toBe(true);
  });

  it('passes over what is so already', async () => {
    const [first, second] = await failures();
    await db('failures').where('id', first!.id).update({ mode_id: modes.leak });
    const plan = await preview({
      what: 'mode',
      modeId: modes.leak,
      record: [tickOf(first!), tickOf(second!)],
    });
    expect(plan).toMatchObject({ total: 1, unchanged: 1 });
  });

  it('says beside each record why it cannot be so, and saving refuses all', async () => {
    const [first, second] = await failures();
    const plan = await preview({
      what: 'date',
      failedOn: '2027-01-01',
      record: [tickOf(first!), tickOf(second!)],
    });
    expect(plan.refused).toBe(2);
    expect(plan.records[0]?.refusal).toEqual({ code: 'in-future' });
    const response = await save(plan);
    expect(response.status).toBe(409);
    expect((await rowOf(first!.id)).failed_on).toBe(first!.failed_on);
  });

  const impossible: [string, Record<string, string>, object][] = [
    ['before service', { what: 'date', failedOn: '1999-12-31' }, { code: 'before-service' }],
    ['in the future', { what: 'date', failedOn: '2026-05-21' }, { code: 'in-future' }],
    [
      'after retirement',
      { what: 'date', failedOn: '2026-05-20' },
      { code: 'after-retirement', day: '2026-05-19' },
    ],
    [
      'fitted after it failed',
      { what: 'fitted', fittedOn: '2026-05-19' },
      { code: 'fitted-after-failed', day: '2026-05-19' },
    ],
    ['fitted before service', { what: 'fitted', fittedOn: '1999-06-01' }, { code: 'fitted-before-service' }],
  ];
  it.each(impossible)('refuses what cannot be: %s', async (_, fields, refusal) => {
    const [first] = await failures();
    await db('assets')
      .whereIn('id', db('failures').where('id', first!.id).select('asset_id'))
      .update({ retired_on: '2026-05-19' });
    const plan = await preview({ ...fields, record: tickOf(first!) });
    expect(plan).toMatchObject({ total: 1, refused: 1, maySave: false, effect: null });
    expect(plan.records[0]?.refusal).toMatchObject(refusal);
  });

  it('refuses to put back what its asset was retired before', async () => {
    const last = (await failures()).at(-1)!;
    await db('failures').where('id', last.id).update({ voided_at: new Date(), void_reason: 'wrong' });
    await db('assets').where('id', last.asset_id).update({ watched_until: '2023-06-01' });
    const plan = await preview({ what: 'restore', record: tickOf(last) });
    expect(plan.records[0]?.refusal).toEqual({ code: 'after-watch', day: '2023-06-01' });
  });

  it('lets a record that would be refused today be given a mode all the same', async () => {
    const last = (await failures()).at(-1)!;
    await db('assets').where('id', last.asset_id).update({ watched_until: '2023-06-01' });
    const plan = await preview({ what: 'mode', modeId: modes.leak, record: tickOf(last) });
    expect(plan).toMatchObject({ refused: 0, maySave: true });
    expect((await save(plan)).status).toBe(302);
    expect((await rowOf(last.id)).mode_id).toBe(modes.leak);
  });

  it('leaves out what cannot be corrected, and keeps the rest of the choice', async () => {
    const all = await failures();
    const [early, late] = [all[0]!, all.at(-1)!];
    const plan = await preview({
      what: 'fitted',
      fittedOn: late.failed_on,
      record: [tickOf(early), tickOf(late)],
    });
    expect(plan).toMatchObject({ total: 2, refused: 1, maySave: false });
    const rest = await previewIn(await decide('leave-out', plan));
    expect(rest).toMatchObject({ total: 1, refused: 0, maySave: true, chosen: tickOf(late) });
  });

  it('goes back to the choice with all that was ticked and typed', async () => {
    const [first, second] = await failures();
    const record = [tickOf(first!), tickOf(second!)];
    const plan = await preview({ what: 'void', reason: 'logged twice', record });
    const back = await decide('choose-again', plan);
    expect(await back.json()).toMatchObject({
      preview: null,
      form: { initialValue: { what: 'void', reason: 'logged twice', record } },
    });
    const whole = await preview({ what: 'effect', effect: 'patched', all: 'on' });
    expect(await (await decide('choose-again', whole)).json()).toMatchObject({
      form: { initialValue: { what: 'effect', effect: 'patched', all: 'on' } },
    });
  });

  it('takes what was chosen on another page of the list along', async () => {
    const [first, second] = await failures();
    const plan = await preview({
      what: 'effect',
      effect: 'patched',
      record: tickOf(first!),
      also: tickOf(second!),
    });
    expect(plan.total).toBe(2);
  });

  it('takes 5,000 in one go and no more', async () => {
    await db.raw(
      `insert into failures (id, asset_id, class_id, failed_on, effect)
       select gen_random_uuid(), ?, ?, '2024-01-01', 'patched' from generate_series(1, 5001)`,
      [assetIds[0]!, classId],
    );
    const every = await send({ intent: 'preview', what: 'effect', effect: 'renewed', all: 'on' });
    expect((await errorsOf(every)).record?.[0]).toMatch(/^More than 5.000 failures match/);
    const ids = (await failures()).slice(0, 5001);
    const forged = await preview({ what: 'effect', effect: 'renewed', record: tickOf(ids[0]!) });
    const response = await save({ ...forged, chosen: ids.map(tickOf).join(',') });
    expect(response.status).toBe(400);
    const most = await preview({ what: 'void', reason: 'twice', record: ids.slice(0, 5000).map(tickOf) });
    expect(most).toMatchObject({ total: 5000, maySave: true });
    expect(most.records).toHaveLength(50);
    expect((await save(most)).status).toBe(302);
    expect((await failures()).filter((row) => row.void_reason === 'twice')).toHaveLength(5000);
    await takeBack(most.correctionId);
    expect((await failures()).filter((row) => row.void_reason === 'twice')).toHaveLength(0);
  });

  it('says when a mode is not on the list of the class', async () => {
    const [first] = await failures();
    const plan = await preview({ what: 'mode', modeId: randomUUID(), record: tickOf(first!) });
    expect(plan).toMatchObject({ modeGone: true, maySave: false });
    expect((await previewIn(await save(plan), 409)).modeGone).toBe(true);
    expect((await rowOf(first!.id)).version).toBe(first!.version);
  });

  it.each([
    [{ what: 'void', reason: 'x' }, 'record', /Tick the failures/],
    [{ all: 'on' }, 'what', /Say what to correct/],
    [{ what: 'void', all: 'on' }, 'reason', /Say why/],
    [{ what: 'effect', all: 'on' }, 'effect', /Choose what was done/],
    [{ what: 'date', all: 'on' }, 'failedOn', /Give the day/],
  ] as [Record<string, string>, string, RegExp][])(
    'asks for what is missing: %j',
    async (fields, name, message) => {
      expect((await errorsOf(await send({ intent: 'preview', ...fields })))[name]?.[0]).toMatch(message);
    },
  );

  it('takes no records of another class', async () => {
    const other = await addSimulatedClass(db, {
      name: `Other ${count}`,
      siteId,
      assets: 1,
      shape: 1,
      scale: 500,
      watchedFrom: '2024-01-01',
      seed: 1,
    });
    const foreign = await addFailure(
      db,
      { classId: other.classId, assetId: other.assetIds[0]! },
      '2025-01-01',
    );
    const plan = await preview({ what: 'void', reason: 'x', record: `${foreign}:1` });
    expect(plan.total).toBe(0);
    await save(plan);
    expect(await db('failures').where('id', foreign).first('void_reason')).toEqual({ void_reason: null });
  });
});

describe('a correction', () => {
  it.each(['technician', 'manager', 'admin'])('is not for a %s', async (who) => {
    const [first] = await failures();
    const plan = await preview({ what: 'void', reason: 'x', record: tickOf(first!) });
    expect((await save(plan, who)).status).toBe(403);
    expect((await rowOf(first!.id)).void_reason).toBeNull();
    await save(plan);
    expect((await send({ intent: 'take-back', correctionId: plan.correctionId }, { who })).status).toBe(403);
    expect((await rowOf(first!.id)).void_reason).toBe('x');
  });

  it('is not for anybody who is not signed in', async () => {
    const [first] = await failures();
    const plan = await preview({ what: 'void', reason: 'x', record: tickOf(first!) });
    const response = await save(plan, 'nobody');
    expect(response.headers.get('Location')).toMatch(/^\/sign-in/);
    expect((await rowOf(first!.id)).void_reason).toBeNull();
  });

  const cases: [string, Record<string, string>, Partial<Row>][] = [
    ['voids', { what: 'void', reason: 'logged twice' }, { void_reason: 'logged twice' }],
    ['marks an outside cause', { what: 'outside-cause', cause: 'flooded' }, { outside_cause: 'flooded' }],
    ['sets patched', { what: 'effect', effect: 'patched' }, { effect: 'patched' }],
    ['sets the day', { what: 'date', failedOn: '2026-02-03' }, { failed_on: '2026-02-03' }],
    ['sets the fitting day', { what: 'fitted', fittedOn: '2023-06-01' }, { item_fitted_on: '2023-06-01' }],
  ];
  it.each(cases)(
    '%s, with before and after in the audit trail, and is taken back whole',
    async (_, fields, after) => {
      const before = (await failures()).at(-1)!;
      const response = await save(await preview({ ...fields, record: tickOf(before) }));
      expect(response.status).toBe(302);
      expect(await rowOf(before.id)).toMatchObject({ ...after, version: before.version + 1 });
      const audit = (await db('audit_entries')
        .where('subject_id', before.id)
        .orderBy('id', 'desc')
        .first()) as {
        action: string;
        before: object;
        after: object;
      };
      expect(audit.action).toBe(fields.what === 'void' ? 'void' : 'correct');
      expect(Object.keys(audit.after)).toEqual(Object.keys(audit.before));

      const { id } = await lastCorrection();
      expect((await send({ intent: 'take-back', correctionId: id })).status).toBe(302);
      const back = await rowOf(before.id);
      for (const name of Object.keys(after) as (keyof Row)[]) expect(back[name]).toEqual(before[name]);
      expect(back.version).toBe(before.version + 2);
    },
  );

  const lastCorrection = async () =>
    (await db('record_corrections').orderBy('at', 'desc').first('id')) as { id: string };

  it('puts back what was voided', async () => {
    const [first] = await failures();
    await db('failures').where('id', first!.id).update({ voided_at: new Date(), void_reason: 'wrong' });
    await save(await preview({ what: 'restore', record: tickOf(first!) }));
    expect((await rowOf(first!.id)).void_reason).toBeNull();
  });

  it('is made once, however often it is sent', async () => {
    const [first] = await failures();
    const plan = await preview({ what: 'mode', modeId: modes.crack, record: tickOf(first!) });
    await save(plan);
    expect((await save(plan)).status).toBe(302);
    expect((await rowOf(first!.id)).version).toBe(first!.version + 1);
  });

  it('saves nothing when somebody changed a record meanwhile, says who, and goes on from there', async () => {
    const [first, second] = await failures();
    const ticks = [tickOf(first!), tickOf(second!)];
    const mine = await preview({ what: 'mode', modeId: modes.leak, record: ticks });
    const theirs = await preview({ what: 'void', reason: 'logged twice', record: tickOf(first!) });
    await save(theirs, 'colleague');

    const response = await save(mine);
    const told = await previewIn(response, 409);
    expect(told.meanwhile).toMatchObject([
      {
        id: first!.id,
        change: { personName: 'colleague', action: 'void', after: { voidReason: 'logged twice' } },
      },
    ]);
    expect((await rowOf(second!.id)).mode_id).toBeNull();

    const fresh = await previewIn(await decide('preview-again', told));
    expect(fresh).toMatchObject({ total: 2, meanwhile: [] });
    expect((await save(fresh)).status).toBe(302);
    expect((await rowOf(first!.id)).mode_id).toBe(modes.leak);
  });

  it('is made once when it is sent twice at the same moment', async () => {
    const [first] = await failures();
    const plan = await preview({ what: 'mode', modeId: modes.crack, record: tickOf(first!) });
    const answers = await Promise.all([save(plan), save(plan)]);
    expect(answers.map(({ status }) => status)).toEqual([302, 302]);
    expect((await rowOf(first!.id)).version).toBe(first!.version + 1);
  });

  it('of the same record by two at once is made by one, and the other is told', async () => {
    const [first] = await failures();
    const mine = await preview({ what: 'mode', modeId: modes.crack, record: tickOf(first!) });
    const theirs = await preview({ what: 'effect', effect: 'patched', record: tickOf(first!) });
    const answers = await Promise.all([save(mine), save(theirs, 'colleague')]);
    expect(answers.map(({ status }) => status).sort()).toEqual([302, 409]);
    expect((await rowOf(first!.id)).version).toBe(first!.version + 1);
  });

  it('is not made again by its old form once it was taken back', async () => {
    const [first] = await failures();
    const plan = await preview({ what: 'effect', effect: 'patched', record: tickOf(first!) });
    await save(plan);
    await takeBack(plan.correctionId);
    expect((await save(plan)).status).toBe(302);
    expect((await rowOf(first!.id)).effect).toBe('renewed');
  });

  it('that puts back is taken back to the void as it was, by whom and when', async () => {
    const [first] = await failures();
    const void_ = {
      voided_at: new Date('2026-02-03T04:05:06Z'),
      voided_by: personIds.get('colleague'),
      void_reason: 'wrong',
    };
    await db('failures').where('id', first!.id).update(void_);
    const plan = await preview({ what: 'restore', record: tickOf(first!) });
    await save(plan);
    await takeBack(plan.correctionId);
    expect(await rowOf(first!.id)).toMatchObject(void_);
  });

  it('is not taken back where the record would not fit its asset any more', async () => {
    const last = (await failures()).at(-1)!;
    const plan = await preview({ what: 'void', reason: 'wrong', record: tickOf(last) });
    await save(plan);
    await db('assets').where('id', last.asset_id).update({ watched_until: '2023-06-01' });
    await takeBack(plan.correctionId);
    expect((await rowOf(last.id)).void_reason).toBe('wrong');
  });

  it('leaves a time of day alone unless the day was wrong', async () => {
    const [first, second] = await failures();
    const failed_at = new Date(`${first!.failed_on}T11:30:00Z`);
    await db('failures').whereIn('id', [first!.id, second!.id]).update({ failed_at });
    await save(await preview({ what: 'effect', effect: 'patched', record: tickOf(first!) }));
    expect((await db('failures').where('id', first!.id).first('failed_at')) as object).toEqual({ failed_at });
    const plan = await preview({ what: 'date', failedOn: '2026-02-03', record: tickOf(second!) });
    await save(plan);
    expect((await db('failures').where('id', second!.id).first('failed_at')) as object).toEqual({
      failed_at: null,
    });
    await takeBack(plan.correctionId);
    expect((await db('failures').where('id', second!.id).first('failed_at')) as object).toEqual({
      failed_at,
    });
  });

  it('stands in the list of those made, with its way back', async () => {
    const [first] = await failures();
    const plan = await preview({ what: 'effect', effect: 'patched', record: tickOf(first!) });
    await save(plan);
    const page = await visit(
      clean,
      new Request(`${host}/classes/${classId}/clean`, { headers: { Cookie: cookies.get('lead')! } }),
    );
    expect(((await page.json()) as { corrections: object[] }).corrections).toMatchObject([
      {
        id: plan.correctionId,
        correction: { kind: 'effect', effect: 'patched' },
        personName: 'lead',
        records: 1,
        takenBackAt: null,
      },
    ]);
  });

  it('is not taken back once somebody has changed a record since', async () => {
    const [first] = await failures();
    const plan = await preview({ what: 'effect', effect: 'patched', record: tickOf(first!) });
    await save(plan);
    await db('failures').where('id', first!.id).increment('version', 1);
    await send({ intent: 'take-back', correctionId: plan.correctionId });
    expect((await rowOf(first!.id)).effect).toBe('patched');
  });

  it('answers a correction that is none', async () => {
    expect((await send({ intent: 'take-back', correctionId: randomUUID() })).status).toBe(404);
  });

  it('moves the verdict the next night, as the preview said', async () => {
    const plan = await preview({ what: 'void', reason: 'another class', all: 'on' }, '?from=2023-02-01');
    await save(plan);
    await runNightly(db, { asOf: '2026-05-20', organisation });
    const held = (await db('asset_classes as c')
      .join('assessments as a', 'a.id', 'c.current_assessment_id')
      .where('c.id', classId)
      .first('a.verdict', 'a.failures')) as { verdict: string; failures: number };
    expect(held).toMatchObject({
      verdict: plan.effect!.after.verdict,
      failures: plan.effect!.after.failures,
    });
  });
});

describe('merging two modes', () => {
  beforeEach(async () => {
    await db('failures').where('class_id', classId).update({ mode_id: modes.crack });
    await db('failures')
      .where('class_id', classId)
      .where('failed_on', '>', '2025-01-01')
      .update({ mode_id: modes.leak });
  });

  it('moves all failures of one to the other, which is then the only one offered, and back', async () => {
    const response = await send({ intent: 'preview-merge', from: modes.crack, into: modes.leak });
    const plan = ((await response.json()) as { preview: CorrectionPreview }).preview;
    expect(plan.correction).toEqual({ kind: 'merge-mode', from: modes.crack, modeId: modes.leak });
    await save(plan);
    const all = await failures();
    expect(all.every(({ mode_id: mode }) => mode === modes.leak)).toBe(true);
    expect((await listFailureModes(db, classId)).map(({ name }) => name)).toEqual(['Leak']);

    await send({ intent: 'take-back', correctionId: plan.correctionId });
    expect((await listFailureModes(db, classId)).map(({ name }) => name).sort()).toEqual(['Crack', 'Leak']);
    expect((await failures()).filter(({ mode_id: mode }) => mode === modes.crack)).toHaveLength(plan.total);
  });

  const merge = async (from: string, into: string) =>
    previewIn(await send({ intent: 'preview-merge', from, into }));

  it('does so for a mode that nothing was logged with', async () => {
    await db('failures').where('class_id', classId).update({ mode_id: modes.leak });
    const plan = await merge(modes.crack, modes.leak);
    expect(plan).toMatchObject({ total: 0, maySave: true });
    await save(plan);
    expect((await listFailureModes(db, classId)).map(({ name }) => name)).toEqual(['Leak']);
  });

  const log = (modeId: string, id = randomUUID()) =>
    logFailure(db, {
      entry: {
        id,
        assetId: assetIds[0]!,
        modeId,
        failedOn: '2026-05-20',
        failedAt: null,
        effect: 'renewed',
        outsideCause: null,
        itemFittedOn: null,
        note: null,
      },
      personId: personIds.get('technician')!,
      now: new Date('2026-05-20T09:00:00Z'),
      today: '2026-05-20',
    });

  it('waits for what was logged with the mode that goes after the preview', async () => {
    const plan = await merge(modes.crack, modes.leak);
    const id = randomUUID();
    expect(await log(modes.crack, id)).toEqual({ outcome: 'stored' });
    const told = await previewIn(await save(plan), 409);
    expect(told.meanwhile).toMatchObject([{ id, change: { action: 'log', personName: 'technician' } }]);
    const fresh = await previewIn(await decide('preview-again', told));
    expect(fresh).toMatchObject({ total: plan.total + 1, meanwhile: [], maySave: true });
    await save(fresh);
    expect((await rowOf(id)).mode_id).toBe(modes.leak);
  });

  it('takes a form that was opened before as the mode that stayed, sent once or twice', async () => {
    await save(await merge(modes.crack, modes.leak));
    const id = randomUUID();
    expect(await log(modes.crack, id)).toEqual({ outcome: 'stored' });
    expect(await log(modes.crack, id)).toEqual({ outcome: 'already-stored', same: true });
    expect((await findFailure(db, id))?.modeName).toBe('Leak');
  });

  it('merges no mode that was merged meanwhile, and sets none', async () => {
    const [first] = await failures();
    const setting = await preview({
      what: 'mode',
      modeId: modes.crack,
      record: `${first!.id}:${first!.version}`,
    });
    const back = await merge(modes.leak, modes.crack);
    await save(await merge(modes.crack, modes.leak));
    expect((await previewIn(await save(back), 409)).modeGone).toBe(true);
    expect((await previewIn(await save(setting), 409)).modeGone).toBe(true);
  });

  it('takes along what was merged before, and leaves it there when taken back', async () => {
    const [tear] = (await db('failure_modes')
      .insert({ class_id: classId, name: 'Tear' })
      .returning('id')) as { id: string }[];
    await save(await merge(tear!.id, modes.crack));
    const plan = await merge(modes.crack, modes.leak);
    await save(plan);
    const mergedInto = async () =>
      ((await db('failure_modes').where('id', tear!.id).first('merged_into')) as { merged_into: string })
        .merged_into;
    expect(await mergedInto()).toBe(modes.leak);
    await takeBack(plan.correctionId);
    expect(await mergedInto()).toBe(modes.crack);
  });

  it('refuses to merge a mode into itself', async () => {
    const response = await send({ intent: 'preview-merge', from: modes.leak, into: modes.leak });
    expect((await errorsOf(response)).into?.[0]).toContain('itself');
  });
});

describe('the page of a failure', () => {
  it('tells what taking back changed, too', async () => {
    const [first] = await failures();
    const plan = await preview({ what: 'effect', effect: 'patched', record: tickOf(first!) });
    await save(plan);
    await takeBack(plan.correctionId);
    expect(
      await db('audit_entries')
        .where('subject_id', first!.id)
        .orderBy('id', 'desc')
        .first('action', 'before', 'after'),
    ).toEqual({ action: 'take-back', before: { effect: 'patched' }, after: { effect: 'renewed' } });
  });

  it('tells who changed what, from what to what', async () => {
    const [first] = await failures();
    await save(await preview({ what: 'effect', effect: 'patched', record: tickOf(first!) }));
    const page = await visit(
      { path: 'failures/:failureId', ...failureRoute },
      new Request(`${host}/failures/${first!.id}`, { headers: { Cookie: cookies.get('lead')! } }),
    );
    const { history } = (await page.json()) as {
      history: { action: string; personName: string; before: object }[];
    };
    expect(history).toMatchObject([
      { action: 'correct', personName: 'lead', before: { effect: 'renewed' }, after: { effect: 'patched' } },
    ]);
  });
});
