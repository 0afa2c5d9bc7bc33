import type { Page } from '@playwright/test';
import { DateTime } from 'luxon';
import { addPerson, addSite } from '../support/people';
import { addFailure } from '../support/records';
import { addSimulatedClass, addSimulatedRecords, type SimulatedRecords } from '../support/simulated-records';
import { startOwnServer, type OwnServer } from './support/own-server';
import { expect, test } from './support/test';

const lead = 'lead@larkmoor.example';
const manager = 'manager@larkmoor.example';

const today = DateTime.utc();
const daysAgo = (days: number) => today.minus({ days }).toFormat('yyyy-MM-dd');
const morning = (day: string) => `${day}T09:00:00Z`;

/** The desk's day; half a year of records follows it. */
const deskDay = daysAgo(190);
const eve = daysAgo(191);
const lastNight = daysAgo(1);
const watchedFrom = daysAgo(190 + 1240);

let server: OwnServer;
let bearings: SimulatedRecords;
let sensors: SimulatedRecords;
let ofBearings: { classId: string; assetIds: string[] };
let ofSensors: { classId: string; assetIds: string[] };

test.beforeAll(async () => {
  test.setTimeout(120_000);
  server = await startOwnServer(morning(deskDay));
  const db = server.database;
  await db('organisations').insert({ name: 'Larkmoor', time_zone: 'UTC', currency: 'GBP' });
  const siteId = await addSite(db, 'Fenwick Baths');
  await addPerson(db, { email: lead, roles: ['lead'] });
  await addPerson(db, { email: manager, roles: ['manager'] });
  bearings = {
    name: 'Feed pump bearing',
    siteId,
    assets: 40,
    shape: 4,
    scale: 700,
    watchedFrom,
    renewalAge: 1000,
    seed: 5,
    columns: {
      item_singular: 'bearing',
      item_plural: 'bearings',
      planned_cost_minor: 20_000,
      failure_cost_minor: 200_000,
    },
  };
  sensors = {
    name: 'Corridor sensor',
    siteId,
    assets: 300,
    shape: 1,
    scale: 900,
    watchedFrom,
    seed: 11,
    columns: {
      item_singular: 'sensor',
      item_plural: 'sensors',
      planned_cost_minor: 3_000,
      failure_cost_minor: 9_000,
    },
  };
  ofBearings = await addSimulatedClass(db, bearings);
  ofSensors = await addSimulatedClass(db, sensors);
  await db('maintenance_tasks').insert({
    class_id: ofBearings.classId,
    name: 'Bearing round',
    kind: 'replace',
    interval_days: 1000,
    starts_on: watchedFrom,
  });
  // The first night sees little; the second one all up to the eve of the desk's day.
  await server.night(watchedFrom);
  for (const [records, held] of [
    [bearings, ofBearings],
    [sensors, ofSensors],
  ] as const) {
    await addSimulatedRecords(db, records, held, { after: watchedFrom, until: eve });
  }
  for (const [asset, day] of [
    [ofBearings.assetIds[3]!, daysAgo(400)],
    [ofBearings.assetIds[9]!, daysAgo(300)],
  ] as const) {
    await addFailure(db, { classId: ofBearings.classId, assetId: asset }, day, {
      note: 'meant for another pump',
    });
  }
});
test.afterAll(() => server.stop());

async function putForward(page: Page, interval: string, reason: string): Promise<void> {
  await page.getByLabel('How often by plan: every').fill(interval);
  await page.getByLabel('Why').fill(reason);
  await page.getByRole('button', { name: 'Put forward' }).click();
  await expect(page.getByText('Put forward. A manager decides.')).toBeVisible();
}

test('from an alarm in the morning to a schedule that changed, and to what came of it', async ({
  browser,
}) => {
  test.setTimeout(300_000);
  const db = server.database;
  await server.night(eve);

  await test.step('the lead sees the alarm first and opens the class', async () => {
    const page = await server.signIn(browser, lead);
    await expect(page).toHaveURL(/\/since$/);
    const news = page.getByRole('listitem').filter({ hasText: 'Feed pump bearing' }).first();
    await expect(news).toContainText('Alarm: The old bearings fail first.');
    await news.getByRole('link', { name: 'Feed pump bearing' }).click();
    await expect(page.getByText('Bearings wear out.').first()).toBeVisible();

    await test.step('voids two wrong records after seeing what it does', async () => {
      await page.getByRole('link', { name: 'Put records right' }).click();
      const wrong = page.getByRole('row').filter({ hasText: 'meant for another pump' });
      await expect(wrong).toHaveCount(2);
      for (const row of await wrong.all()) await row.getByRole('checkbox').check();
      await page.getByRole('radio', { name: 'They should not count (void)' }).check();
      await page.getByLabel('To void: why they should not count').fill('meant for another pump');
      await page.getByRole('button', { name: 'See what it does' }).click();
      await expect(page.getByRole('heading', { name: 'What it does to the verdict' })).toBeVisible();
      await expect(page.getByText('2 failures would be corrected')).toBeVisible();
      expect(await db('failures').whereNotNull('voided_at')).toHaveLength(0);
      await page.getByRole('button', { name: 'Save 2 corrections' }).click();
      await expect(page.getByText('2 failures corrected.')).toBeVisible();
      expect(await db('failures').whereNotNull('voided_at')).toHaveLength(2);
    });

    await test.step('puts the proposal forward', async () => {
      await page.goto(`/classes/${ofBearings.classId}`);
      await page.getByRole('link', { name: 'Put this change forward' }).click();
      await page.getByLabel('Why').fill('They wear out well before the round comes.');
      await page.getByRole('button', { name: 'Put forward' }).click();
      await expect(page.getByText('waits for a decision')).toBeVisible();
    });
    await page.context().close();
  });

  await test.step('the manager declines', async () => {
    const page = await server.signIn(browser, manager);
    await page.getByRole('link', { name: /^Feed pump bearing: Shorten/ }).click();
    await expect(page).toHaveURL(/\/changes\//);
    await page.getByText('Decline', { exact: true }).first().click();
    await page.getByLabel('Why not').fill('Too short for the contractor; propose ten months.');
    await page.getByRole('button', { name: 'Decline' }).click();
    await expect(page.getByText('Declined, with your reason.')).toBeVisible();
    await page.context().close();
  });

  await test.step('the lead puts a second one forward, and one for the sensors by hand', async () => {
    const page = await server.signIn(browser, lead);
    await page.goto(`/classes/${ofBearings.classId}/change`);
    await putForward(page, '10', 'Ten months, as the contractor can keep.');
    await page.goto(`/classes/${ofSensors.classId}/change`);
    await page.getByRole('radio', { name: 'Replace sensors by plan' }).check();
    await putForward(page, '12', 'The supplier asks for it.');
    await page.context().close();
  });

  await test.step('the manager approves both, and the interval changes', async () => {
    const page = await server.signIn(browser, manager);
    for (const name of ['Feed pump bearing', 'Corridor sensor']) {
      await page.goto('/changes?group=open');
      await page.getByRole('link', { name }).click();
      await page.getByRole('button', { name: 'Approve' }).click();
      await expect(page.getByText(/^Approved\./)).toBeVisible();
    }
    await page.goto(`/classes/${ofBearings.classId}/tasks`);
    await expect(page.getByText('replace every 10 months')).toBeVisible();
    await expect(page.getByText('What was planned before')).toBeVisible();
    await page.context().close();
  });

  await test.step('half a year later the follow-up says what came of each', async () => {
    for (const [records, held, renewalAge] of [
      [bearings, ofBearings, 304],
      [sensors, ofSensors, 365],
    ] as const) {
      const changed = { ...records, changed: { on: deskDay, renewalAge } };
      await addSimulatedRecords(db, changed, held, { after: eve, until: lastNight });
    }
    await server.night(lastNight);
    await server.moveTo(morning(today.toFormat('yyyy-MM-dd')));
    const page = await server.signIn(browser, manager);
    await expect(page.getByText('A change helped.')).toBeVisible();
    await page.goto('/changes?group=followed');
    const row = (name: string) => page.getByRole('row').filter({ hasText: name });
    await expect(row('Feed pump bearing')).toContainText('helped');
    await expect(row('Corridor sensor')).toContainText('made no difference');
    await page.getByRole('link', { name: 'Feed pump bearing' }).click();
    await expect(page.getByText(/^It helped: fewer fail\./)).toBeVisible();
    await page.context().close();
  });
});
