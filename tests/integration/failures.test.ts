import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { findAsset, lastFitted, listAssets, listRecentAssets } from '~/models/assets.server';
import type { FailureEntry } from '~/models/failure';
import { listFailureModes } from '~/models/failure-modes.server';
import { findFailure, listFailures, logFailure, restoreFailure, voidFailure } from '~/models/failures.server';
import { addPerson, addSite } from '../support/people';
import { addAsset, addClass, addFailure, addPlannedWork } from '../support/records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';

const now = new Date('2026-03-14T10:30:00Z');
const today = '2026-03-14';

let test: TestDatabase;
let siteId: string;
let otherSiteId: string;
let classId: string;
let modeId: string;
let otherModeId: string;
let rosa: string;
let ann: string;

beforeAll(async () => {
  test = await createTestDatabase();
  const db = test.database;
  siteId = await addSite(db, 'Fenwick Baths');
  otherSiteId = await addSite(db, 'Orrin Library');
  classId = await addClass(db, 'Pump seal');
  const otherClassId = await addClass(db, 'Fan belt');
  modeId = await addMode(classId, 'Leaking');
  otherModeId = await addMode(otherClassId, 'Snapped');
  rosa = await addPerson(db, { email: 'rosa@larkmoor.example' });
  ann = await addPerson(db, { email: 'ann@larkmoor.example' });
});

afterAll(() => test.drop());

async function addMode(ofClass: string, name: string): Promise<string> {
  const rows: { id: string }[] = await test
    .database('failure_modes')
    .insert({ class_id: ofClass, name })
    .returning('id');
  return rows[0]!.id;
}

let tags = 0;
function newAsset(columns: Record<string, unknown> = {}): Promise<string> {
  tags += 1;
  return addAsset(test.database, { classId, siteId }, `FB-PUMP-${tags}`, columns);
}

function anEntry(assetId: string, differences: Partial<FailureEntry> = {}): FailureEntry {
  return {
    id: randomUUID(),
    assetId,
    failedOn: today,
    failedAt: now,
    modeId,
    effect: 'renewed',
    outsideCause: null,
    itemFittedOn: '2025-01-01',
    note: null,
    ...differences,
  };
}

const log = (
  entry: FailureEntry,
  personId = rosa,
  more: { seenIds?: string[]; now?: Date; today?: string } = {},
) => logFailure(test.database, { entry, personId, now, today, ...more });

const stored = async (assetId: string) =>
  (await listFailures(test.database, { assetId, voided: true })).failures;

const auditOf = (id: string) =>
  test.database('audit_entries').where({ subject: 'failure', subject_id: id }).orderBy('id');

describe('logging a failure', () => {
  it('stores what was sent, by whom, with an audit entry', async () => {
    const assetId = await newAsset();
    const entry = anEntry(assetId, { outsideCause: 'flooded', note: 'Under water.' });
    expect(await log(entry)).toEqual({ outcome: 'stored' });
    const failure = await findFailure(test.database, entry.id);
    expect(failure).toMatchObject({
      ...entry,
      modeName: 'Leaking',
      loggedByName: 'rosa',
      loggedAt: now,
      version: 1,
    });
    const audit: unknown[] = await auditOf(entry.id);
    expect(audit).toHaveLength(1);
    expect(audit[0]).toMatchObject({
      action: 'log',
      person_id: rosa,
      before: null,
      after: { note: 'Under water.' },
    });
  });

  it('stores an entry sent twice once', async () => {
    const assetId = await newAsset();
    const entry = anEntry(assetId);
    await log(entry);
    const later = new Date(now.getTime() + 90_000);
    expect(await log({ ...entry, failedAt: later }, rosa, { now: later })).toEqual({
      outcome: 'already-stored',
      same: true,
    });
    expect(await stored(assetId)).toHaveLength(1);
    expect(await auditOf(entry.id)).toHaveLength(1);
  });

  it('stores an entry sent ten times at once once', async () => {
    const assetId = await newAsset();
    const entry = anEntry(assetId);
    const results = await Promise.all(Array.from({ length: 10 }, () => log(entry)));
    expect(results.filter(({ outcome }) => outcome === 'stored')).toHaveLength(1);
    expect(results.filter(({ outcome }) => outcome === 'already-stored')).toHaveLength(9);
    expect(await stored(assetId)).toHaveLength(1);
    expect(await auditOf(entry.id)).toHaveLength(1);
  });

  it('says when the second send of an entry was not the same', async () => {
    const entry = anEntry(await newAsset());
    await log(entry);
    const changed = { ...entry, effect: 'patched' as const };
    expect(await log(changed)).toEqual({ outcome: 'already-stored', same: false });
    const anotherDay = { ...entry, failedOn: '2026-03-10', failedAt: null };
    expect(await log(anotherDay)).toEqual({ outcome: 'already-stored', same: false });
    expect((await findFailure(test.database, entry.id))?.effect).toBe('renewed');
  });

  it('refuses an id that belongs to another entry, also when both come at once', async () => {
    const [one, two] = [await newAsset(), await newAsset()];
    const entry = anEntry(one);
    const taken = { outcome: 'refused', refusal: { code: 'id-taken' } };
    await log(entry);
    expect(await log({ ...entry, assetId: two })).toEqual(taken);
    expect(await log(entry, ann)).toEqual(taken);

    const raced = anEntry(one, { failedOn: '2026-02-02', failedAt: null });
    const results = await Promise.all([log(raced), log({ ...raced, assetId: two })]);
    expect(results).toContainEqual({ outcome: 'stored' });
    expect(results).toContainEqual(taken);
  });
});

describe('what is refused', () => {
  const refusalOf = async (entry: FailureEntry, more = {}) => {
    const result = await log(entry, rosa, more);
    expect(await findFailure(test.database, entry.id)).toBeUndefined();
    return result.outcome === 'refused' ? result.refusal : result.outcome;
  };

  it('is before service, in the future, after retirement, after the watch', async () => {
    const assetId = await newAsset({ retired_on: '2026-03-01' });
    const on = (failedOn: string) => anEntry(assetId, { failedOn, failedAt: null, itemFittedOn: null });
    expect(await refusalOf(on('2023-12-31'))).toEqual({ code: 'before-service', day: '2024-01-01' });
    expect(await refusalOf(on('2026-03-15'))).toEqual({ code: 'in-future' });
    expect(await refusalOf(on('2026-03-02'))).toEqual({ code: 'after-retirement', day: '2026-03-01' });
    expect(await log(on('2024-01-01'))).toEqual({ outcome: 'stored' });
    expect(await log(on('2026-03-01'))).toEqual({ outcome: 'stored' });

    const unwatched = await newAsset({ watched_until: '2025-06-30' });
    const late = anEntry(unwatched, { failedOn: '2025-07-01', failedAt: null });
    expect(await refusalOf(late)).toEqual({ code: 'after-watch', day: '2025-06-30' });
  });

  it('is a moment later today', async () => {
    const entry = anEntry(await newAsset(), { failedAt: new Date('2026-03-14T10:31:00Z') });
    expect(await refusalOf(entry)).toEqual({ code: 'in-future' });
  });

  it('is an item fitted after it failed, or before the asset was there', async () => {
    const assetId = await newAsset();
    const fitted = (itemFittedOn: string) =>
      anEntry(assetId, { failedOn: '2026-01-10', failedAt: null, itemFittedOn });
    expect(await refusalOf(fitted('2026-01-11'))).toEqual({ code: 'fitted-after-failed', day: '2026-01-11' });
    expect(await refusalOf(fitted('2023-12-31'))).toEqual({
      code: 'fitted-before-service',
      day: '2024-01-01',
    });
    expect(await log(fitted('2026-01-10'))).toEqual({ outcome: 'stored' });
  });

  it('is a mode of another class, an unknown mode, an unknown asset', async () => {
    const assetId = await newAsset();
    expect(await refusalOf(anEntry(assetId, { modeId: otherModeId }))).toEqual({
      code: 'mode-of-another-class',
    });
    expect(await refusalOf(anEntry(assetId, { modeId: randomUUID() }))).toEqual({
      code: 'mode-of-another-class',
    });
    expect(await refusalOf(anEntry(randomUUID()))).toEqual({ code: 'unknown-asset' });
  });

  it('is what only the database sees, told in the same way', async () => {
    const assetId = await newAsset();
    const entry = anEntry(assetId, { failedOn: '2999-01-01', failedAt: null });
    expect(await refusalOf(entry, { today: '2999-01-02' })).toEqual({ code: 'in-future' });
  });
});

describe('a failure that may be logged already', () => {
  it('of the same position on the same day is shown first, and stored once confirmed', async () => {
    const assetId = await newAsset();
    const first = anEntry(assetId, { failedAt: null, failedOn: '2026-02-01' });
    await log(first);
    const second = anEntry(assetId, { failedAt: null, failedOn: '2026-02-01' });
    const result = await log(second);
    expect(result.outcome).toBe('perhaps-repeated');
    expect(result.outcome === 'perhaps-repeated' && result.failures.map(({ id }) => id)).toEqual([first.id]);
    expect(await stored(assetId)).toHaveLength(1);
    expect(await log(second, rosa, { seenIds: [first.id] })).toEqual({ outcome: 'stored' });
    expect(await stored(assetId)).toHaveLength(2);
  });

  it('is one that somebody else logged in the last hour, whatever its day', async () => {
    const assetId = await newAsset();
    await log(anEntry(assetId, { failedOn: '2026-02-01', failedAt: null }), ann);
    expect((await log(anEntry(assetId))).outcome).toBe('perhaps-repeated');
    const after = new Date(now.getTime() + 3_600_001);
    expect((await log(anEntry(assetId), rosa, { now: after })).outcome).toBe('stored');
  });

  it('is not a voided one, nor another one of a group', async () => {
    const assetId = await newAsset();
    const first = anEntry(assetId);
    await log(first);
    await voidFailure(test.database, {
      failureId: first.id,
      version: 1,
      reason: 'slip',
      personId: rosa,
      now,
    });
    expect((await log(anEntry(assetId))).outcome).toBe('stored');

    const group = await newAsset({ quantity: 96 });
    expect((await log(anEntry(group))).outcome).toBe('stored');
    expect((await log(anEntry(group))).outcome).toBe('stored');
  });

  it('is shown to the second of two who log at the same moment', async () => {
    const assetId = await newAsset();
    const results = await Promise.all([log(anEntry(assetId), rosa), log(anEntry(assetId), ann)]);
    expect(results.map(({ outcome }) => outcome).sort()).toEqual(['perhaps-repeated', 'stored']);
    expect(await stored(assetId)).toHaveLength(1);
  });
});

describe('voiding and putting back', () => {
  const voiding = (failureId: string, version: number, personId = rosa) =>
    voidFailure(test.database, { failureId, version, reason: 'logged by mistake', personId, now });
  const restoring = (failureId: string, version: number, personId = rosa) =>
    restoreFailure(test.database, { failureId, version, personId, now, today });

  it('keeps the failure, counts it no more, and back again, each with its audit entry', async () => {
    const entry = anEntry(await newAsset());
    await log(entry);
    expect(await voiding(entry.id, 1)).toEqual({ outcome: 'done' });
    expect(await findFailure(test.database, entry.id)).toMatchObject({
      voidedAt: now,
      voidedByName: 'rosa',
      voidReason: 'logged by mistake',
      version: 2,
    });
    expect((await listFailures(test.database, { assetId: entry.assetId })).total).toBe(0);
    expect(await restoring(entry.id, 2)).toEqual({ outcome: 'done' });
    expect(await findFailure(test.database, entry.id)).toMatchObject({
      voidedAt: null,
      voidReason: null,
      version: 3,
    });
    expect((await listFailures(test.database, { assetId: entry.assetId })).total).toBe(1);
    const audit: unknown[] = await auditOf(entry.id);
    expect(audit).toMatchObject([
      { action: 'log' },
      { action: 'void', before: { voided: false }, after: { voided: true, reason: 'logged by mistake' } },
      { action: 'restore', before: { voided: true, reason: 'logged by mistake' }, after: { voided: false } },
    ]);
  });

  it('tells the second person what the first one did', async () => {
    const entry = anEntry(await newAsset());
    await log(entry);
    const [one, two] = await Promise.all([voiding(entry.id, 1, rosa), voiding(entry.id, 1, ann)]);
    expect([one.outcome, two.outcome].sort()).toEqual(['changed-meanwhile', 'done']);
    const loser = one.outcome === 'done' ? two : one;
    expect(loser).toMatchObject({
      lastChange: { action: 'void', personName: one.outcome === 'done' ? 'rosa' : 'ann' },
    });
    expect(await auditOf(entry.id)).toHaveLength(2);
  });

  it('takes the same wish sent twice as done', async () => {
    const entry = anEntry(await newAsset());
    await log(entry);
    await voiding(entry.id, 1);
    expect(await voiding(entry.id, 1)).toEqual({ outcome: 'done' });
    expect(await restoring(entry.id, 2)).toEqual({ outcome: 'done' });
    expect(await restoring(entry.id, 2)).toEqual({ outcome: 'done' });
    expect(await auditOf(entry.id)).toHaveLength(3);
  });

  it('does not put back what the asset has been retired before', async () => {
    const assetId = await newAsset();
    const entry = anEntry(assetId);
    await log(entry);
    await voiding(entry.id, 1);
    await test.database('assets').where('id', assetId).update({ retired_on: '2026-03-01' });
    expect(await restoring(entry.id, 2)).toEqual({
      outcome: 'refused',
      refusal: { code: 'after-retirement', day: '2026-03-01' },
    });
    expect((await findFailure(test.database, entry.id))?.voidedAt).toEqual(now);
  });
});

describe('what the screens read', () => {
  it('finds a tag by a part of it in any case, and only at the sites given', async () => {
    const db = test.database;
    await addAsset(db, { classId, siteId: otherSiteId }, 'OL-Odd_100%-1');
    await addAsset(db, { classId, siteId: otherSiteId }, 'OL-OddX1000-1', { retired_on: '2025-01-01' });
    const find = async (tagPart: string, scope: string[] | 'all' = 'all') =>
      (await listAssets(db, { scope, tagPart }, { page: 1, perPage: 10 })).assets.map(({ tag }) => tag);
    expect(await find('ol-oDD')).toEqual(['OL-Odd_100%-1', 'OL-OddX1000-1']);
    expect(await find('_100%')).toEqual(['OL-Odd_100%-1']);
    expect(await find('ol-odd', [siteId])).toEqual([]);
    expect(await find('ol-odd', [])).toEqual([]);
  });

  it('pages through assets', async () => {
    const paged = async (page: number) =>
      listAssets(test.database, { scope: 'all', siteId: otherSiteId, classId }, { page, perPage: 1 });
    expect(await paged(2)).toMatchObject({ total: 2, assets: [{ tag: 'OL-OddX1000-1' }] });
  });

  it('puts the mode that happens most first and leaves voided failures out of its count', async () => {
    const db = test.database;
    const ownClass = await addClass(db, 'Door closer');
    const [rare, common] = [await addMode(ownClass, 'A rare one'), await addMode(ownClass, 'Common')];
    await addMode(ownClass, 'Never');
    const assetId = await addAsset(db, { classId: ownClass, siteId }, 'FB-DOOR-1');
    const asset = { assetId, classId: ownClass };
    for (const day of ['2025-01-01', '2025-02-01']) await addFailure(db, asset, day, { mode_id: common });
    await addFailure(db, asset, '2025-03-01', { mode_id: rare });
    const voided = { voided_at: now, void_reason: 'slip' };
    for (const day of ['2025-04-01', '2025-05-01'])
      await addFailure(db, asset, day, { mode_id: rare, ...voided });
    expect((await listFailureModes(db, ownClass)).map(({ name, failures }) => [name, failures])).toEqual([
      ['Common', 2],
      ['A rare one', 1],
      ['Never', 0],
    ]);
  });

  it('gives the assets a person logged last, the latest first', async () => {
    const person = await addPerson(test.database, { email: 'recent@larkmoor.example' });
    const [one, two] = [await newAsset(), await newAsset()];
    await log(anEntry(one), person);
    await log(anEntry(two), person, { now: new Date(now.getTime() + 1000) });
    const ids = async (scope: string[] | 'all') =>
      (await listRecentAssets(test.database, person, scope, 5)).map(({ id }) => id);
    expect(await ids('all')).toEqual([two, one]);
    expect(await ids([otherSiteId])).toEqual([]);
  });

  it('says when the item in place was fitted, from the last renewal that counts', async () => {
    const db = test.database;
    const fitted = async (assetId: string, by = today) => {
      const asset = await findAsset(db, assetId);
      return lastFitted(db, asset!, by);
    };
    const assetId = await newAsset();
    const asset = { assetId, classId };
    expect(await fitted(assetId)).toEqual({ on: '2024-01-01', standing: 'recorded' });
    await addPlannedWork(db, asset, '2024-06-01');
    await addPlannedWork(db, asset, '2024-09-01', { kind: 'inspect', renewed: false });
    await addFailure(db, asset, '2025-02-01', { outside_cause: 'flooded' });
    await addFailure(db, asset, '2025-05-01', { effect: 'patched' });
    await addFailure(db, asset, '2025-07-01', { voided_at: now, void_reason: 'slip' });
    expect(await fitted(assetId)).toEqual({ on: '2025-02-01', standing: 'recorded' });
    expect(await fitted(assetId, '2025-01-31')).toEqual({ on: '2024-06-01', standing: 'recorded' });

    const unknown = await newAsset({ watched_from: '2025-01-01' });
    expect(await fitted(unknown)).toEqual({ on: '2024-01-01', standing: 'assumed' });
    const known = await newAsset({ watched_from: '2025-01-01', item_fitted_on: '2024-10-01' });
    expect(await fitted(known)).toEqual({ on: '2024-10-01', standing: 'recorded' });
    const group = await newAsset({ quantity: 4 });
    await addFailure(db, { assetId: group, classId }, '2025-02-01');
    expect(await fitted(group)).toEqual({ on: '2024-01-01', standing: 'recorded' });
  });
});
