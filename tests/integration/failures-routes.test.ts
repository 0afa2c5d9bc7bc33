import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { findFailure } from '~/models/failures.server';
import * as failureRoute from '~/routes/failure';
import * as findRoute from '~/routes/log-find-asset';
import * as logRoute from '~/routes/log-failure';
import { startSession } from '~/services/session.server';
import { database } from '../../db/connection';
import { addPerson, addSite } from '../support/people';
import { addAsset, addClass, addFailure } from '../support/records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { formRequest, visit } from '../support/visit';

const host = 'http://intervale.test';
const routes = {
  find: { path: 'log', ...findRoute },
  log: { path: 'log/:assetId', ...logRoute },
  failure: { path: 'failures/:failureId', ...failureRoute },
};

const people = ['technician', 'stranger', 'lead', 'manager', 'admin'] as const;
type Person = (typeof people)[number] | 'nobody';

let test: TestDatabase;
const cookies = new Map<Person, string>();
const ids = { site: '', class: '', mode: '', asset: '', technician: '', otherAsset: '' };

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
  ids.site = await addSite(db, 'Fenwick Baths');
  const otherSite = await addSite(db, 'Orrin Library');
  ids.class = await addClass(db, 'Pump seal', { item_singular: 'seal', item_plural: 'seals' });
  const modes: { id: string }[] = await db('failure_modes')
    .insert({ class_id: ids.class, name: 'Leaking' })
    .returning('id');
  ids.mode = modes[0]!.id;
  ids.otherAsset = await addAsset(db, { classId: ids.class, siteId: otherSite }, 'OL-PUMP-1');
  const request = new Request(`${host}/`);
  for (const person of people) {
    const personId = await addPerson(db, {
      email: `${person}@larkmoor.example`,
      roles: [person === 'stranger' ? 'technician' : person],
      siteIds: person === 'technician' ? [ids.site] : person === 'stranger' ? [otherSite] : [],
    });
    if (person === 'technician') ids.technician = personId;
    cookies.set(person, (await startSession(db, request, personId)).split(';')[0]!);
  }
});

let assets = 0;
beforeEach(async () => {
  vi.stubEnv('INTERVALE_NOW', '2026-03-14T10:30:00Z');
  assets += 1;
  ids.asset = await addAsset(test.database, { classId: ids.class, siteId: ids.site }, `FB-PUMP-${assets}`);
});

afterAll(async () => {
  vi.unstubAllEnvs();
  await database().destroy();
  await test.drop();
});

const get = (route: (typeof routes)[keyof typeof routes], path: string, person: Person) =>
  visit(route, new Request(host + path, { headers: { Cookie: cookies.get(person) ?? '' } }));

const post = (
  route: (typeof routes)[keyof typeof routes],
  path: string,
  fields: Record<string, string>,
  person: Person,
) => visit(route, formRequest(host + path, fields, { Cookie: cookies.get(person) ?? '' }));

const form = (differences: Record<string, string> = {}): { id: string; [field: string]: string } => ({
  id: randomUUID(),
  mode: ids.mode,
  effect: 'renewed',
  when: 'now',
  fitted: 'yes',
  fittedShown: '2024-01-01',
  ...differences,
});

const send = (fields: Record<string, string>, person: Person = 'technician', assetId = ids.asset) =>
  post(routes.log, `/log/${assetId}`, fields, person);

const failuresOf = async (assetId: string) => test.database('failures').where('asset_id', assetId);

interface Refused {
  form: { error?: Record<string, string[]>; initialValue: Record<string, string> };
  perhapsSame: { id: string }[];
}
const refusalOf = async (response: Response) => (await response.json()) as Refused;

describe('finding the asset', () => {
  const found = async (query: string, person: Person = 'technician') =>
    (await (await get(routes.find, `/log${query}`, person)).json()) as {
      step: string;
      assets?: { tag: string }[];
    };

  it('goes straight on for an exact tag in any case', async () => {
    const response = await get(routes.find, `/log?tag=fb-PUMP-${assets}`, 'technician');
    expect(response.status).toBe(302);
    expect(response.headers.get('Location')).toBe(`/log/${ids.asset}`);
  });

  it('shows nothing of another site', async () => {
    expect((await found('?tag=OL-PUMP-1')).assets).toEqual([]);
    expect((await found('?tag=OL-PUMP')).assets).toEqual([]);
    expect((await found('?tag=OL-PUMP', 'lead')).assets).toMatchObject([{ tag: 'OL-PUMP-1' }]);
    const { site_id: other } = await test
      .database('assets')
      .where('id', ids.otherAsset)
      .first<{ site_id: string }>();
    expect((await get(routes.find, `/log?site=${other}`, 'technician')).status).toBe(404);
    expect((await get(routes.find, `/log?site=${other}&class=${ids.class}`, 'technician')).status).toBe(404);
  });

  it('goes by site, class and asset, and takes nonsense in the address as nothing', async () => {
    expect((await found(`?site=${ids.site}`, 'lead')).step).toBe('classes');
    expect((await found(`?site=${ids.site}&class=${ids.class}`)).assets?.length).toBeGreaterThan(0);
    expect((await found('?site=x&class=y&page=-1', 'lead')).step).toBe('start');
  });

  it('is for technicians and leads', async () => {
    expect((await get(routes.find, '/log', 'manager')).status).toBe(403);
    expect((await get(routes.find, '/log', 'admin')).status).toBe(403);
    expect((await get(routes.find, '/log', 'nobody')).headers.get('Location')).toMatch(/^\/sign-in/);
  });
});

describe('logging', () => {
  it('stores the form and leads to what was stored', async () => {
    const fields = form({ mode: 'other', otherText: 'Collar', outsideCause: 'power' });
    const response = await send(fields);
    expect(response.headers.get('Location')).toBe(`/failures/${fields.id}`);
    expect(await findFailure(test.database, fields.id)).toMatchObject({
      failedOn: '2026-03-14',
      failedAt: new Date('2026-03-14T10:30:00Z'),
      modeId: null,
      note: 'What failed: Collar',
      outsideCause: 'power',
      itemFittedOn: '2024-01-01',
      loggedByName: 'technician',
    });
  });

  it('sent twice at once stores once, and both land on the same page', async () => {
    const fields = form();
    const answers = await Promise.all([send(fields), send(fields)]);
    expect(answers.map((answer) => answer.headers.get('Location'))).toEqual([
      `/failures/${fields.id}`,
      `/failures/${fields.id}`,
    ]);
    expect(await failuresOf(ids.asset)).toHaveLength(1);
  });

  it.each([
    [
      'before service',
      { when: 'earlier', failedOn: '2023-12-31' },
      'failedOn',
      'went into service on 1 January 2024',
    ],
    ['in the future', { when: 'earlier', failedOn: '2026-03-15' }, 'failedOn', 'lies in the future'],
    [
      'later today',
      { when: 'earlier', failedOn: '2026-03-14', failedTime: '10:31' },
      'failedOn',
      'lies in the future',
    ],
    [
      'fitted after it failed',
      { fitted: 'no', fittedOn: '2026-03-15' },
      'fittedOn',
      'cannot have failed before',
    ],
    [
      'confirmed as fitted after it failed',
      { fittedShown: '2026-03-15' },
      'fitted',
      'cannot have failed before',
    ],
    ['of an unknown mode', { mode: randomUUID() }, 'mode', 'Choose again'],
    ['without what was done', { effect: '' }, 'effect', 'Say what you did'],
    ['earlier without a day', { when: 'earlier' }, 'failedOn', 'Give the day'],
    ['with a number that is none', { id: 'x' }, 'id', 'Open it again'],
    ['with an endless note', { note: 'x'.repeat(3001) }, 'note', '3,000'],
  ])('refuses one %s beside its field and keeps what was typed', async (_, differences, field, words) => {
    const fields = form({ note: 'typed with care', ...differences });
    const response = await send(fields);
    expect(response.status).toBe(400);
    const { form: reply } = await refusalOf(response);
    expect(reply.error?.[field]?.join(' ')).toContain(words);
    expect(reply.initialValue.note).toBe(fields.note);
    expect(await failuresOf(ids.asset)).toHaveLength(0);
  });

  it('refuses one after retirement, and one after the watch ended', async () => {
    const place = { classId: ids.class, siteId: ids.site };
    const retired = await addAsset(test.database, place, `FB-OLD-${assets}`, { retired_on: '2026-01-01' });
    const unwatched = await addAsset(test.database, place, `FB-UNSEEN-${assets}`, {
      watched_until: '2026-01-01',
    });
    const sentences = await Promise.all(
      [retired, unwatched].map(
        async (asset) => (await refusalOf(await send(form(), 'lead', asset))).form.error?.when?.[0],
      ),
    );
    expect(sentences[0]).toContain('was retired on 1 January 2026');
    expect(sentences[1]).toContain('are recorded up to 1 January 2026 only');
  });

  it('shows what may be the same and stores on one more send of the same form', async () => {
    const first = form();
    await send(first, 'lead');
    const second = form();
    const response = await send(second);
    expect(response.status).toBe(409);
    const { perhapsSame } = await refusalOf(response);
    expect(perhapsSame.map(({ id }) => id)).toEqual([first.id]);
    expect(await failuresOf(ids.asset)).toHaveLength(1);
    const again = await send({ ...second, seen: first.id });
    expect(again.headers.get('Location')).toBe(`/failures/${second.id}`);
    expect(await failuresOf(ids.asset)).toHaveLength(2);
  });

  it('is for technicians of the site and leads; other sites do not show', async () => {
    const { asset } = ids;
    expect((await send(form(), 'stranger')).status).toBe(404);
    expect((await get(routes.log, `/log/${asset}`, 'stranger')).status).toBe(404);
    expect((await send(form(), 'manager')).status).toBe(403);
    expect((await send(form(), 'admin')).status).toBe(403);
    expect((await send(form(), 'nobody')).headers.get('Location')).toMatch(/^\/sign-in/);
    expect((await send(form(), 'technician', randomUUID())).status).toBe(404);
    expect((await send(form(), 'technician', 'not-an-id')).status).toBe(404);
    expect(await failuresOf(asset)).toHaveLength(0);
  });
});

describe('undoing', () => {
  const undo = (id: string, fields: Record<string, string>, person: Person = 'technician') =>
    post(routes.failure, `/failures/${id}`, fields, person);
  const voiding = { intent: 'void', version: '1', reason: 'logged by mistake' };
  const isVoid = async (id: string) => (await findFailure(test.database, id))?.voidedAt != null;

  async function logged(): Promise<string> {
    const fields = form();
    await send(fields);
    return fields.id;
  }

  it('voids with the reason and puts back', async () => {
    const id = await logged();
    expect((await undo(id, voiding)).headers.get('Location')).toBe(`/failures/${id}`);
    expect(await findFailure(test.database, id)).toMatchObject({
      voidReason: 'logged by mistake',
      version: 2,
    });
    await undo(id, { intent: 'restore', version: '2' });
    expect(await isVoid(id)).toBe(false);
  });

  it('asks for a reason', async () => {
    const id = await logged();
    const response = await undo(id, { ...voiding, reason: ' ' });
    expect(response.status).toBe(400);
    expect(await isVoid(id)).toBe(false);
  });

  it('tells the second person what the first one did', async () => {
    const id = await logged();
    await undo(id, voiding, 'lead');
    const response = await undo(id, voiding, 'lead');
    expect(response.status).toBe(302);
    await undo(id, { intent: 'restore', version: '2' }, 'lead');
    const late = await undo(id, voiding);
    expect(late.status).toBe(409);
    expect(await late.text()).toContain('lead put it back meanwhile');
    expect(await isVoid(id)).toBe(false);
  });

  it('is for whoever logged it, for a day, and for a lead', async () => {
    const id = await logged();
    expect((await undo(id, voiding, 'manager')).status).toBe(403);
    expect((await undo(id, voiding, 'admin')).status).toBe(403);
    expect((await undo(id, voiding, 'stranger')).status).toBe(404);
    expect((await undo(id, voiding, 'nobody')).headers.get('Location')).toMatch(/^\/sign-in/);
    const asset = { assetId: ids.asset, classId: ids.class };
    const imported = await addFailure(test.database, asset, '2025-01-01');
    expect((await undo(imported, voiding)).status).toBe(403);
    vi.stubEnv('INTERVALE_NOW', '2026-03-15T10:30:01Z');
    expect((await undo(id, voiding)).status).toBe(403);
    expect(await isVoid(id)).toBe(false);
    expect((await undo(id, voiding, 'lead')).status).toBe(302);
    expect(await isVoid(id)).toBe(true);
  });

  it('is offered only to those, while every role may read', async () => {
    const id = await logged();
    const page = async (person: Person) => {
      const response = await get(routes.failure, `/failures/${id}`, person);
      return response.status === 200
        ? ((await response.json()) as { mayUndo: boolean }).mayUndo
        : response.status;
    };
    expect(await page('technician')).toBe(true);
    expect(await page('lead')).toBe(true);
    expect(await page('manager')).toBe(false);
    expect(await page('admin')).toBe(false);
    expect(await page('stranger')).toBe(404);
    expect((await get(routes.failure, '/failures/not-an-id', 'lead')).status).toBe(404);
  });
});
