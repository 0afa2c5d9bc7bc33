import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import type { CorrectionPreview } from '~/components/clean/preview';
import { listFailureModes } from '~/models/failure-modes.server';
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

beforeAll(async () => {
  test = await createTestDatabase();
  db = test.database;
  vi.stubEnv('DATABASE_URL', test.url);
  vi.stubEnv('INTERVALE_TEST', '1');
  vi.stubEnv('SESSION_SECRET', 'a secret of this test file alone, 40 long');
  vi.stubEnv('INTERVALE_NOW', '2026-05-20T09:00:00Z');
  await db('organisations').insert({ name: 'Larkmoor', time_zone: 'Europe/London', currency: 'GBP' });
  siteId = await addSite(db, 'Fenwick Baths');
  for (const name of ['lead', 'colleague']) {
    const id = await addPerson(db, { email: `${name}@larkmoor.example`, roles: ['lead'] });
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
const save = (plan: CorrectionPreview, who = 'lead') =>
  send(
    {
      intent: 'save',
      correctionId: plan.correctionId,
      correction: JSON.stringify(plan.correction),
      chosen: plan.chosen,
    },
    { who },
  );
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
    expect(response.status).toBe(409);
    const told = ((await response.json()) as { preview: CorrectionPreview }).preview;
    expect(told.meanwhile).toMatchObject([{ id: first!.id, personName: 'colleague' }]);
    expect((await rowOf(second!.id)).mode_id).toBeNull();

    const again = await send({
      intent: 'preview-again',
      correctionId: told.correctionId,
      correction: JSON.stringify(told.correction),
      chosen: told.chosen,
    });
    const fresh = ((await again.json()) as { preview: CorrectionPreview }).preview;
    expect(fresh).toMatchObject({ total: 2, meanwhile: [] });
    expect((await save(fresh)).status).toBe(302);
    expect((await rowOf(first!.id)).mode_id).toBe(modes.leak);
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

  it('refuses to merge a mode into itself', async () => {
    const response = await send({ intent: 'preview-merge', from: modes.leak, into: modes.leak });
    expect((await errorsOf(response)).into?.[0]).toContain('itself');
  });
});

describe('the page of a failure', () => {
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
