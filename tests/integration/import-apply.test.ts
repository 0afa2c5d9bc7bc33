import { readFile } from 'node:fs/promises';
import { beforeEach, describe, expect, it } from 'vitest';
import { applyImport, discardImport } from '~/models/imports.server';
import type { ImportKind } from '~/models/import-types';
import { addPerson } from '../support/people';
import {
  importDay,
  importFile,
  rejectedText,
  rowsOf,
  sampleFile,
  stageFile,
  summaryOf,
} from '../support/stage-file';
import { createTestDatabase, type TestDatabase } from '../support/test-database';

let test: TestDatabase;
let personId: string;

beforeEach(async () => {
  test = await createTestDatabase();
  await test.database('organisations').insert({ name: 'Larkmoor', time_zone: 'Europe/London' });
  personId = await addPerson(test.database, { email: 'admin@larkmoor.example', roles: ['admin'] });
  return () => test.drop();
});

const stage = (kind: ImportKind, content: string | Buffer) =>
  stageFile(test.database, kind, content, { personId });
const load = (kind: ImportKind, content: string | Buffer) =>
  importFile(test.database, kind, content, { personId });
const loadSamples = async () => {
  await load('register', await sampleFile('register.csv'));
  return load('history', await sampleFile('history.csv'));
};

/** Everything an import may write, to compare before and after. */
async function records() {
  const { database } = test;
  return {
    sites: await database('sites').orderBy('name'),
    classes: await database('asset_classes').orderBy('name'),
    modes: await database('failure_modes').orderBy('name'),
    assets: await database('assets').orderBy('tag'),
    failures: await database('failures').orderBy('id'),
    plannedWork: await database('planned_work').orderBy('id'),
  };
}

describe('a register', () => {
  it('adds assets with their sites, areas and classes', async () => {
    expect(await load('register', await sampleFile('register.csv'))).toEqual({
      outcome: 'applied',
      newRows: 4,
      changedRows: 0,
      rejectedRows: 0,
    });
    const { sites, classes, assets } = await records();
    expect(sites.map(({ name }) => name)).toEqual(['Fenwick Baths', 'Orrin Library']);
    expect(classes).toMatchObject([
      {
        name: 'Extract fan bearing',
        clock: 'operating-hours',
        item_singular: 'bearing',
        item_plural: 'bearings',
      },
      { name: 'Strainer basket', clock: 'calendar-days', item_singular: 'basket', item_plural: 'baskets' },
    ]);
    expect(assets).toMatchObject([
      {
        tag: 'FB-STR-01',
        quantity: 1,
        watched_from: '2022-01-01',
        item_fitted_on: '2021-09-14',
        duty_hours_per_day: null,
      },
      { tag: 'FB-STR-02', item_fitted_on: null },
      { tag: 'OL-EXF-01', quantity: 2, watched_from: '2020-06-15', duty_hours_per_day: 14.5 },
      { tag: 'OL-EXF-02', retired_on: '2025-02-28' },
    ]);
    const areas = await test.database('areas').orderBy('name').pluck<string[]>('name');
    expect(areas).toEqual(['Plant room', 'Roof, east']);
  });

  it('calls the items of a new class by its name when nobody says', async () => {
    await load(
      'register',
      'site,class,clock,tag,in service\nS,Supply fan battery,days,A,2024-01-01\nS,LED driver,days,B,2024-01-01\n',
    );
    const { classes } = await records();
    expect(classes.map(({ item_singular, item_plural }) => [item_singular, item_plural])).toEqual([
      ['LED driver', 'LED drivers'],
      ['supply fan battery', 'supply fan batteries'],
    ]);
  });

  it('changes what the file says and leaves alone what it has no column for; an empty cell clears', async () => {
    await load('register', await sampleFile('register.csv'));
    const file =
      'tag,site,class,in service,retired,quantity\nfb-str-01,Fenwick Baths,Strainer basket,2021-03-01,,3\nOL-EXF-02,Orrin Library,Extract fan bearing,2020-06-15,,1\n';
    const summary = await stage('register', file);
    expect(summary.counts).toEqual({ new: 0, changed: 2, unchanged: 0, rejected: 0 });
    const changed = await rowsOf(test.database, summary.id, 'changed');
    expect(changed.map(({ remarks }) => remarks)).toEqual([
      [{ column: 'quantity', value: '3', reason: 'was 1' }],
      [{ column: 'retired', value: '', reason: 'was 2025-02-28' }],
    ]);
    await load('register', file);
    const { assets } = await records();
    expect(assets).toMatchObject([
      { tag: 'FB-STR-01', quantity: 3, watched_from: '2022-01-01', item_fitted_on: '2021-09-14', version: 2 },
      { tag: 'FB-STR-02', version: 1 },
      { tag: 'OL-EXF-01', version: 1 },
      { tag: 'OL-EXF-02', retired_on: null, duty_hours_per_day: 8, version: 2 },
    ]);
    const audit = await test.database('audit_entries').where({ subject: 'asset' }).orderBy('id');
    expect(audit).toMatchObject([
      { person_id: personId, action: 'import', before: { quantity: 1 }, after: { quantity: 3 } },
      { before: { retired_on: '2025-02-28' }, after: { retired_on: null } },
    ]);
  });

  it('moves an asset to another site, out of the area of the old one', async () => {
    await load('register', await sampleFile('register.csv'));
    await load('register', 'tag,site,class,in service\nFB-STR-01,Orrin Library,Strainer basket,2021-03-01\n');
    const moved = await test
      .database('assets')
      .join('sites', 'sites.id', 'site_id')
      .where('tag', 'FB-STR-01')
      .first('name', 'area_id');
    expect(moved).toEqual({ name: 'Orrin Library', area_id: null });
  });
});

describe('a history', () => {
  it('adds failures and planned work with their modes, in the organisation’s time', async () => {
    expect(await loadSamples()).toMatchObject({ outcome: 'applied', newRows: 6 });
    const { failures, plannedWork, modes } = await records();
    expect(failures).toHaveLength(4);
    expect(plannedWork).toHaveLength(2);
    expect(modes.map(({ name }) => name)).toEqual(['Cracked handle', 'Noisy', 'Torn mesh']);
    const first = failures.find(({ source_key }) => source_key === 'record:1001');
    expect(first).toMatchObject({
      failed_on: '2022-04-02',
      failed_at: new Date('2022-04-02T06:40:00Z'),
      effect: 'renewed',
      note: 'Found "as new", torn at the seam',
      logged_by: personId,
    });
    expect(plannedWork.map(({ kind, renewed }) => [kind, renewed]).sort()).toEqual([
      ['inspect', false],
      ['replace', true],
    ]);
  });

  it('keeps two equal failures of one day as two, in the order of the file', async () => {
    await load('register', await sampleFile('register.csv'));
    const file =
      'tag,date,event,result,note\nFB-STR-02,2022-08-19,failure,renewed,first\nFB-STR-02,2022-08-19,failure,renewed,second\n';
    expect(await load('history', file)).toMatchObject({ newRows: 2 });
    const notes = await test.database('failures').orderBy('logged_at').pluck('note');
    expect(notes).toEqual(['first', 'second']);
    expect((await stage('history', file)).counts).toEqual({ new: 0, changed: 0, unchanged: 2, rejected: 0 });
  });

  it('corrects a record by its number, whatever changed', async () => {
    await loadSamples();
    const file =
      'record,tag,date,event,result,failure mode\n1003,FB-STR-01,2022-08-20,failure,renewed,Bent rim\n';
    const summary = await stage('history', file);
    const [row] = await rowsOf(test.database, summary.id, 'changed');
    expect(row?.remarks).toEqual([
      { column: 'tag', value: 'FB-STR-01', reason: 'was FB-STR-02' },
      { column: 'date', value: '2022-08-20', reason: 'was 2022-08-19' },
      { column: 'result', value: 'renewed', reason: 'was patched' },
      { column: 'failure mode', value: 'Bent rim', reason: 'was Cracked handle' },
    ]);
    await load('history', file);
    expect(await test.database('failures').where('source_key', 'record:1003').first()).toMatchObject({
      failed_on: '2022-08-20',
      effect: 'renewed',
      version: 2,
    });
    expect(await test.database('failures').count('*')).toEqual([{ count: 4 }]);
    expect(await test.database('audit_entries').where('subject', 'failure')).toMatchObject([
      { before: { effect: 'patched' }, after: { effect: 'renewed' } },
    ]);
  });

  it('does not bring back what was voided', async () => {
    await loadSamples();
    await test
      .database('failures')
      .where('source_key', 'record:1001')
      .update({ voided_at: new Date(), void_reason: 'Not ours' });
    const summary = await stage(
      'history',
      (await sampleFile('history.csv')).toString().replace('torn at', 'split at'),
    );
    expect(summary.counts).toEqual({ new: 0, changed: 0, unchanged: 6, rejected: 0 });
    const rows = await rowsOf(test.database, summary.id, 'unchanged');
    expect(rows[0]?.remarks[0]?.reason).toMatch(/^Voided in Intervale/);
  });
});

describe('the same file twice', () => {
  it('changes nothing', async () => {
    await loadSamples();
    const before = await records();
    for (const kind of ['register', 'history'] as const) {
      const summary = await stage(kind, await sampleFile(`${kind}.csv`));
      expect(summary.counts).toMatchObject({ new: 0, changed: 0, rejected: 0 });
      await applyImport(test.database, {
        importId: summary.id,
        personId,
        mode: 'all-or-nothing',
        today: importDay,
      });
    }
    expect(await records()).toEqual(before);
  });
});

describe('all or nothing', () => {
  it('writes nothing while a row is rejected, and the good rows when asked for them', async () => {
    await load('register', await sampleFile('register.csv'));
    const before = await records();
    const summary = await stage('history', await sampleFile('history-broken.csv'));
    expect(summary.counts).toEqual({ new: 1, changed: 0, unchanged: 0, rejected: 9 });
    const apply = (mode: 'all-or-nothing' | 'good-rows') =>
      applyImport(test.database, { importId: summary.id, personId, mode, today: importDay });
    expect(await apply('all-or-nothing')).toEqual({ outcome: 'refused', rejectedRows: 9 });
    expect(await records()).toEqual(before);
    expect(await apply('good-rows')).toEqual({
      outcome: 'applied',
      newRows: 1,
      changedRows: 0,
      rejectedRows: 9,
    });
    expect((await records()).failures).toMatchObject([{ failed_on: '2024-05-01' }]);
  });

  it('rejects at the last moment what no longer fits, and keeps the reason', async () => {
    await load('register', await sampleFile('register.csv'));
    const summary = await stage('history', await sampleFile('history.csv'));
    await test.database('assets').where('tag', 'FB-STR-02').update({ retired_on: '2022-05-01' });
    const apply = (mode: 'all-or-nothing' | 'good-rows') =>
      applyImport(test.database, { importId: summary.id, personId, mode, today: importDay });
    expect(await apply('all-or-nothing')).toEqual({ outcome: 'refused', rejectedRows: 2 });
    expect((await records()).failures).toEqual([]);
    expect(await summaryOf(test.database, summary.id)).toMatchObject({
      state: 'previewed',
      counts: { new: 4, rejected: 2 },
    });
    const [row] = await rowsOf(test.database, summary.id, 'rejected');
    expect(row?.remarks).toEqual([
      { column: 'date', value: '2022-08-19', reason: 'This lies after the asset was retired on 2022-05-01.' },
    ]);
    expect(await apply('good-rows')).toMatchObject({ outcome: 'applied', newRows: 4, rejectedRows: 2 });
  });
});

describe('two at once', () => {
  it('applies an import once', async () => {
    await load('register', await sampleFile('register.csv'));
    const { id } = await stage('history', await sampleFile('history.csv'));
    const apply = () =>
      applyImport(test.database, { importId: id, personId, mode: 'all-or-nothing', today: importDay });
    const results = await Promise.all([apply(), apply()]);
    expect(results.map(({ outcome }) => outcome).sort()).toEqual(['already-applied', 'applied']);
    expect(await test.database('failures').count('*')).toEqual([{ count: 4 }]);
    expect(await test.database('audit_entries').where({ action: 'apply', subject_id: id })).toHaveLength(1);
  });

  it('stores the records of one file once, though it was uploaded twice before either was applied', async () => {
    await load('register', await sampleFile('register.csv'));
    const twice = [
      await stage('history', await sampleFile('history.csv')),
      await stage('history', await sampleFile('history.csv')),
    ];
    const results = await Promise.all(
      twice.map(({ id }) =>
        applyImport(test.database, { importId: id, personId, mode: 'all-or-nothing', today: importDay }),
      ),
    );
    expect(results.map((result) => (result.outcome === 'applied' ? result.newRows : -1)).sort()).toEqual([
      0, 6,
    ]);
    expect(await test.database('failures').count('*')).toEqual([{ count: 4 }]);
  });
});

describe('rejected rows', () => {
  it('come back corrected, formulas and all, and are then what they would have been', async () => {
    await load('register', await sampleFile('register.csv'));
    const summary = await stage('history', await sampleFile('history-broken.csv'));
    await applyImport(test.database, { importId: summary.id, personId, mode: 'good-rows', today: importDay });
    const rejected = await rejectedText(test.database, summary);
    expect(rejected.startsWith('\ufefftag,date,time,')).toBe(true);
    expect(rejected).toContain('occurrence,line,why\r\n');
    expect(rejected).toContain(`"'=HYPERLINK(""http://example.invalid"")"`);
    expect(rejected).not.toMatch(/(^|,)"?[=+@]/m);
    expect(rejected).toContain('date: There is no such day.');

    const again = await stage('history', rejected);
    expect(again.counts).toEqual({ new: 0, changed: 0, unchanged: 0, rejected: 9 });
    expect(again.header?.corrected).toBe(true);

    const corrected = await stage('history', rejected.replace('not renewed,,rain', 'renewed,,weather'));
    expect(corrected.counts).toMatchObject({ new: 1, rejected: 8 });
    await applyImport(test.database, {
      importId: corrected.id,
      personId,
      mode: 'good-rows',
      today: importDay,
    });
    expect(await test.database('failures').where('outside_cause', 'weather').pluck('note')).toEqual([
      '=HYPERLINK("http://example.invalid")',
    ]);
  });

  it('keep their place among equal rows, so that a corrected second failure is not taken for the first', async () => {
    await load('register', await sampleFile('register.csv'));
    const file =
      'tag;date;event;result;outside cause\nFB-STR-02;2022-08-19;failure;renewed;\nFB-STR-02;2022-08-19;failure;renewed;rain\n';
    const summary = await stage('history', file);
    await applyImport(test.database, { importId: summary.id, personId, mode: 'good-rows', today: importDay });
    const corrected = (await rejectedText(test.database, summary)).replace(';rain;', ';weather;');
    expect(await load('history', corrected)).toMatchObject({ newRows: 1 });
    expect(await test.database('failures').count('*')).toEqual([{ count: 2 }]);
    const whole = await stage('history', file.replace('rain', 'weather'));
    expect(whole.counts).toMatchObject({ unchanged: 2 });
  });
});

describe('the published data sets laid out as files', () => {
  it.each([
    ['valve-seats', 41, 48],
    ['generator-fans', 70, 12],
  ])('%s', async (name, assets, failures) => {
    const read = (kind: ImportKind) => readFile(new URL(`../e2e/data/${name}-${kind}.csv`, import.meta.url));
    expect(await load('register', await read('register'))).toMatchObject({
      newRows: assets,
      rejectedRows: 0,
    });
    expect(await load('history', await read('history'))).toMatchObject({
      newRows: failures,
      rejectedRows: 0,
    });
    expect(await test.database('failures').count('*')).toEqual([{ count: failures }]);
  });
});

describe('discarding', () => {
  it('writes nothing, keeps the rejected rows, and cannot be applied afterwards', async () => {
    const summary = await stage('register', await sampleFile('register-broken.csv'));
    expect(await discardImport(test.database, { importId: summary.id, personId })).toBe(true);
    expect(await discardImport(test.database, { importId: summary.id, personId })).toBe(false);
    expect(await rowsOf(test.database, summary.id, 'rejected')).toHaveLength(summary.counts.rejected);
    expect(await rowsOf(test.database, summary.id, 'new')).toEqual([]);
    expect(
      await applyImport(test.database, {
        importId: summary.id,
        personId,
        mode: 'good-rows',
        today: importDay,
      }),
    ).toEqual({ outcome: 'not-ready' });
  });
});
