import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { type AssetClass, findAssetClass } from '~/models/asset-classes.server';
import { listFailureModes } from '~/models/failure-modes.server';
import * as settingsRoute from '~/routes/class-settings';
import { startSession } from '~/services/session.server';
import { database } from '../../db/connection';
import { addPerson, addSite } from '../support/people';
import { addAsset, addClass, addFailure } from '../support/records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { formRequest, visit } from '../support/visit';

const host = 'http://intervale.test';
const route = { path: 'classes/:classId/settings', ...settingsRoute };

const roles = ['technician', 'lead', 'manager', 'admin'] as const;
type Person = (typeof roles)[number] | 'nobody';

let test: TestDatabase;
let siteId: string;
let classId: string;
const cookies = new Map<Person, string>();

beforeAll(async () => {
  test = await createTestDatabase();
  vi.stubEnv('DATABASE_URL', test.url);
  vi.stubEnv('SESSION_SECRET', 'a secret of this test file alone, 40 long');
  siteId = await addSite(test.database, 'Fenwick Baths');
  for (const role of roles) {
    const id = await addPerson(test.database, {
      email: `${role}@larkmoor.example`,
      roles: [role],
      siteIds: [siteId],
    });
    cookies.set(role, (await startSession(test.database, new Request(host), id)).split(';')[0]!);
  }
});

let classes = 0;
beforeEach(async () => {
  classes += 1;
  classId = await addClass(test.database, `Pump seal ${classes}`, {
    statutory: true,
    endangers_people: true,
  });
});

afterAll(async () => {
  vi.unstubAllEnvs();
  await database().destroy();
  await test.drop();
});

const post = (fields: Record<string, string>, person: Person = 'lead', id = classId) =>
  visit(route, formRequest(`${host}/classes/${id}/settings`, fields, { Cookie: cookies.get(person) ?? '' }));

/** A save that changes nothing, with what differs; an empty text unticks. */
function saving(differences: Record<string, string> = {}): Record<string, string> {
  const fields: Record<string, string> = {
    intent: 'save',
    version: '1',
    name: `Pump seal ${classes}`,
    itemSingular: 'pump',
    itemPlural: 'pumps',
    clock: 'calendar-days',
    criticality: '3',
    statutory: 'on',
    endangersPeople: 'on',
    plannedCost: '',
    failureCost: '',
    ...differences,
  };
  return Object.fromEntries(
    Object.entries(fields).filter(
      ([name, value]) => value !== '' || name.endsWith('Cost') || name === 'name',
    ),
  );
}

const stored = async () => (await findAssetClass(test.database, classId)) as AssetClass;
const auditOf = (subjectId: string) =>
  test.database('audit_entries').where({ subject_id: subjectId }).orderBy('id');

interface Refused {
  form: { error?: Record<string, string[]>; initialValue: Record<string, string> };
  unconfirmed?: string[];
  meanwhile?: { version: number; sentence: string; differences: unknown[] };
}
const refusalOf = async (response: Response) => (await response.json()) as Refused;

describe('class settings', () => {
  it('saves what was changed, in minor units, and audits that alone', async () => {
    const response = await post(saving({ plannedCost: '190.5', failureCost: '950', hiddenFailures: 'on' }));
    expect(response.status).toBe(302);
    expect(await stored()).toMatchObject({
      plannedCostMinor: 19_050,
      failureCostMinor: 95_000,
      hiddenFailures: true,
      statutory: true,
      version: 2,
    });
    const audit: unknown[] = await auditOf(classId);
    expect(audit).toHaveLength(1);
    expect(audit[0]).toMatchObject({
      action: 'change-settings',
      before: { plannedCostMinor: null, failureCostMinor: null, hiddenFailures: false },
      after: { plannedCostMinor: 19_050, failureCostMinor: 95_000, hiddenFailures: true },
    });
  });

  it('keeps what a group visit costs, how long spares take and how ready a hidden function must be', async () => {
    const fields = {
      hiddenFailures: 'on',
      groupPlannedCost: '45.50',
      sparesLeadTimeDays: '42',
      requiredAvailability: '99,5',
    };
    expect((await post(saving(fields))).status).toBe(302);
    const kept = { groupPlannedCostMinor: 4550, sparesLeadTimeDays: 42, requiredAvailability: 0.995 };
    expect(await stored()).toMatchObject({ ...kept, version: 2 });
    expect(await auditOf(classId)).toMatchObject([
      { before: { groupPlannedCostMinor: null, sparesLeadTimeDays: null }, after: kept },
    ]);
    await post(saving({ ...fields, version: '2' }));
    expect((await stored()).version).toBe(2);
  });

  it('asks how ready it must be of hidden functions alone', async () => {
    expect((await post(saving({ requiredAvailability: 'always', plannedCost: '5' }))).status).toBe(302);
    expect(await stored()).toMatchObject({ requiredAvailability: null, plannedCostMinor: 500 });
  });

  it('names what differs of them when somebody else was first', async () => {
    await post(saving({ hiddenFailures: 'on', sparesLeadTimeDays: '1', requiredAvailability: '99.999' }));
    const { meanwhile } = await refusalOf(await post(saving({ groupPlannedCost: '20' })));
    expect(meanwhile?.differences).toEqual([
      { label: 'failures stay hidden', stored: 'yes', yours: 'no' },
      {
        label: 'cost of a planned replacement when all are done in one visit',
        stored: 'not known',
        yours: '£20',
      },
      { label: 'lead time of spares', stored: '1 day', yours: 'not known' },
      { label: 'availability the hidden function must have', stored: '99.999 %', yours: 'not said' },
    ]);
  });

  it('saves nothing when nothing differs', async () => {
    expect((await post(saving())).status).toBe(302);
    expect((await stored()).version).toBe(1);
    expect(await auditOf(classId)).toHaveLength(0);
  });

  it.each([
    ['an amount with separators', { plannedCost: '1,250.50' }, 'plannedCost'],
    ['a negative amount', { failureCost: '-5' }, 'failureCost'],
    ['no name', { name: '' }, 'name'],
    ['a criticality of 5', { criticality: '5' }, 'criticality'],
    ['another clock than there is', { clock: 'moon' }, 'clock'],
    ['a group cost in words', { groupPlannedCost: 'much' }, 'groupPlannedCost'],
    ['a lead time of no days', { sparesLeadTimeDays: '0' }, 'sparesLeadTimeDays'],
    ['a lead time of half a day', { sparesLeadTimeDays: '0.5' }, 'sparesLeadTimeDays'],
    ['a lead time in words', { sparesLeadTimeDays: 'a week' }, 'sparesLeadTimeDays'],
    ['a certain function', { hiddenFailures: 'on', requiredAvailability: '100' }, 'requiredAvailability'],
    [
      'a share for a percentage',
      { hiddenFailures: 'on', requiredAvailability: '0.99' },
      'requiredAvailability',
    ],
  ])('refuses %s beside its field', async (_, differences, field) => {
    const response = await post(saving(differences));
    expect(response.status).toBe(400);
    expect((await refusalOf(response)).form.error?.[field]).toHaveLength(1);
    expect((await stored()).version).toBe(1);
  });

  it('refuses the name of another class in any case', async () => {
    await addClass(test.database, 'Taken');
    const response = await post(saving({ name: 'tAKEN' }));
    expect(response.status).toBe(409);
    expect((await refusalOf(response)).form.error?.name?.[0]).toContain('another class called “tAKEN”');
  });

  it('turns the marks that hold advice back off only on an express word', async () => {
    const off = saving({ statutory: '', endangersPeople: '' });
    const response = await post(off);
    expect(response.status).toBe(409);
    expect((await refusalOf(response)).unconfirmed).toEqual(['statutory-off', 'endangers-people-off']);
    const half = await refusalOf(await post({ ...off, 'confirm[0]': 'statutory-off' }));
    expect(half.unconfirmed).toEqual(['endangers-people-off']);
    expect((await stored()).statutory).toBe(true);
    await post({ ...off, 'confirm[0]': 'statutory-off', 'confirm[1]': 'endangers-people-off' });
    expect(await stored()).toMatchObject({ statutory: false, endangersPeople: false });
    expect(await auditOf(classId)).toMatchObject([
      {
        before: { statutory: true, endangersPeople: true },
        after: { statutory: false, endangersPeople: false },
      },
    ]);
  });

  it('takes a single confirmation from its plain checkbox', async () => {
    await post({ ...saving({ statutory: '' }), confirm: 'statutory-off' });
    expect((await stored()).statutory).toBe(false);
  });

  it('tells the second person what the first one stored, and saves neither over the other unseen', async () => {
    await post(saving({ plannedCost: '95' }), 'admin');
    const response = await post(saving({ plannedCost: '80' }));
    expect(response.status).toBe(409);
    const { meanwhile, form } = await refusalOf(response);
    expect(meanwhile?.sentence).toContain('admin changed these settings meanwhile');
    expect(meanwhile?.differences).toEqual([
      { label: 'cost of a planned replacement', stored: '£95', yours: '£80' },
    ]);
    expect(meanwhile?.version).toBe(2);
    expect(form.initialValue).toMatchObject({ plannedCost: '80', version: '1' });
    expect((await stored()).plannedCostMinor).toBe(9500);
  });

  it('saves once when two save at once', async () => {
    const answers = await Promise.all([
      post(saving({ plannedCost: '95' }), 'admin'),
      post(saving({ plannedCost: '80' }), 'lead'),
    ]);
    expect(answers.map(({ status }) => status).sort()).toEqual([302, 409]);
    expect((await stored()).version).toBe(2);
  });

  it('is for leads and admins', async () => {
    const fields = saving({ plannedCost: '5' });
    for (const person of ['technician', 'manager'] as const) {
      expect((await post(fields, person)).status).toBe(403);
      const page = new Request(`${host}/classes/${classId}/settings`, {
        headers: { Cookie: cookies.get(person)! },
      });
      expect((await visit(route, page)).status).toBe(403);
    }
    expect((await post(fields, 'nobody')).headers.get('Location')).toMatch(/^\/sign-in/);
    expect((await post(fields, 'lead', randomUUID())).status).toBe(404);
    expect((await post(fields, 'lead', 'not-an-id')).status).toBe(404);
    expect((await stored()).version).toBe(1);
    expect((await post(fields, 'admin')).status).toBe(302);
  });
});

describe('the clock', () => {
  const toHours = () => saving({ clock: 'operating-hours' });

  it('changes freely while there are no records', async () => {
    await post(toHours());
    expect((await stored()).clock).toBe('operating-hours');
  });

  it('changes on an express word once there are, and sets the assessment in force aside', async () => {
    const db = test.database;
    const assetId = await addAsset(db, { classId, siteId }, `FB-CLOCK-${classes}`);
    await addFailure(db, { assetId, classId }, '2025-01-01');
    const [run] = (await db('job_runs').insert({ job: 'nightly', state: 'running' }).returning('id')) as {
      id: string;
    }[];
    const [assessment] = (await db('assessments')
      .insert({
        run_id: run!.id,
        class_id: classId,
        as_of: '2026-01-01',
        verdict: 'undecided',
        trend: 'unclear',
        failures: 1,
        caution_codes: [],
        summary: {},
        detail: {},
      })
      .returning('id')) as { id: string }[];
    await db('asset_classes').where('id', classId).update({ current_assessment_id: assessment!.id });

    expect((await refusalOf(await post(toHours()))).unconfirmed).toEqual(['clock']);
    expect((await stored()).clock).toBe('calendar-days');
    await post({ ...toHours(), confirm: 'clock' });
    expect((await stored()).clock).toBe('operating-hours');
    expect(await db('asset_classes').where('id', classId).first()).toMatchObject({
      current_assessment_id: null,
    });
  });

  it('stays while a record gives an age in its unit', async () => {
    const assetId = await addAsset(test.database, { classId, siteId }, `FB-AGE-${classes}`);
    await addFailure(test.database, { assetId, classId }, '2025-01-01', { item_age: 120 });
    const response = await post({ ...toHours(), confirm: 'clock' });
    expect(response.status).toBe(409);
    expect((await refusalOf(response)).form.error?.clock?.[0]).toContain('1 failure gives the age');
    expect((await stored()).clock).toBe('calendar-days');
  });
});

describe('failure modes', () => {
  const modes = async () => listFailureModes(test.database, classId);
  const add = (modeName: string, person: Person = 'lead') => post({ intent: 'add-mode', modeName }, person);

  it('are added and renamed, each with its audit entry', async () => {
    await add('  Leaking at the face ');
    const [mode] = await modes();
    expect(mode?.name).toBe('Leaking at the face');
    await post({ intent: 'rename-mode', modeId: mode!.id, seenName: mode!.name, modeName: 'Leaks' });
    expect((await modes()).map(({ name }) => name)).toEqual(['Leaks']);
    expect(await auditOf(mode!.id)).toMatchObject([
      { action: 'add', after: { name: 'Leaking at the face' } },
      { action: 'rename', before: { name: 'Leaking at the face' }, after: { name: 'Leaks' } },
    ]);
  });

  it('are not named alike, in any case', async () => {
    await add('Leaks');
    const response = await add('leaks');
    expect(response.status).toBe(409);
    expect((await refusalOf(response)).form.error?.modeName?.[0]).toContain('a mode called “leaks” already');
    expect(await modes()).toHaveLength(1);
  });

  it('tell the second of two who rename', async () => {
    await add('Leaks');
    const [mode] = await modes();
    const rename = (modeName: string) =>
      post({ intent: 'rename-mode', modeId: mode!.id, seenName: 'Leaks', modeName });
    await rename('Leaking');
    const late = await rename('Drips');
    expect(late.status).toBe(409);
    expect((await refusalOf(late)).form.error?.modeName?.[0]).toContain('renamed it to “Leaking” meanwhile');
  });

  it('are not renamed through another class, nor by a technician or a manager', async () => {
    await add('Leaks');
    const [mode] = await modes();
    const fields = { intent: 'rename-mode', modeId: mode!.id, seenName: 'Leaks', modeName: 'Mine' };
    const elsewhere = await addClass(test.database, `Elsewhere ${classes}`);
    expect((await post(fields, 'lead', elsewhere)).status).toBe(409);
    expect((await post(fields, 'technician')).status).toBe(403);
    expect((await add('Mine', 'manager')).status).toBe(403);
    expect((await modes()).map(({ name }) => name)).toEqual(['Leaks']);
  });
});
