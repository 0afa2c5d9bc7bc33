import type { Page } from '@playwright/test';
import { database } from '../../db/connection';
import { idOf, openClass, storedAssessment } from './support/class-records';
import { ensureNight } from './support/run-nightly';
import { expect, test } from './support/test';

test.use({ person: 'lead' });

test.beforeAll(async () => {
  test.setTimeout(120_000);
  await ensureNight();
});

/** The classes that are listed, in their order. */
const listed = (page: Page) =>
  page
    .getByRole('table', { name: /Asset classes/ })
    .getByRole('rowheader')
    .getByRole('link')
    .allInnerTexts();

const show = (page: Page) => page.getByRole('button', { name: 'Show' }).click();

test('the list of classes is filtered and sorted, and the address holds it', async ({ page }) => {
  await page.goto('/classes');
  const all = await listed(page);
  expect(all.length).toBeGreaterThan(10);

  await page.getByLabel('Statutory').selectOption('Statutory');
  await show(page);
  await expect(page).toHaveURL(/statutory=yes/);
  const statutory: unknown[] = await database()('asset_classes').where('statutory', true).pluck('name');
  await expect.poll(async () => (await listed(page)).sort()).toEqual(statutory.sort());

  await page.getByLabel('Statutory').selectOption('Either');
  await page.getByLabel('Verdict').selectOption('memoryless');
  await show(page);
  await expect(page).toHaveURL(/verdict=memoryless/);
  await expect(page).not.toHaveURL(/statutory=yes/);
  await expect.poll(() => listed(page)).not.toContain('Circulation pump seal');
  const memoryless = await listed(page);
  expect(memoryless).toContain('Door operator controller');

  await page.getByRole('columnheader', { name: 'Class' }).getByRole('link').click();
  await expect(page).toHaveURL(/sort=name/);
  await expect(page).toHaveURL(/verdict=memoryless/);
  await expect.poll(() => listed(page)).toEqual([...memoryless].sort());
  await page.getByRole('columnheader', { name: 'Class' }).getByRole('link').click();
  await expect.poll(() => listed(page)).toEqual([...memoryless].sort().reverse());

  await page.reload();
  expect(await listed(page)).toEqual([...memoryless].sort().reverse());
  await expect(page.getByLabel('Verdict')).toHaveValue('memoryless');

  await page.goBack();
  await expect.poll(() => listed(page)).toEqual([...memoryless].sort());
  await page.goBack();
  await page.goBack();
  await expect(page.getByLabel('Statutory')).toHaveValue('yes');
  await expect.poll(async () => (await listed(page)).sort()).toEqual(statutory.sort());
});

test('the list is narrowed to one site', async ({ page }) => {
  await page.goto('/classes');
  const all = await listed(page);
  await page.getByLabel('Site').selectOption('Orrin Library');
  await show(page);
  await expect(page).toHaveURL(new RegExp(`site=${await idOf('sites', 'Orrin Library')}`));
  await expect.poll(() => listed(page)).not.toContain('Corridor lamp');
  const there = await listed(page);
  expect(there).toContain('Chilled beam valve');
  expect(there.length).toBeLessThan(all.length);
});

test('a class page has its sentence first, charts with their numbers, and cautions before the advice', async ({
  page,
}) => {
  await openClass(page, 'Emergency luminaire battery');
  const { headline, together } = (await storedAssessment('Emergency luminaire battery')).detail.conclusion;
  const main = page.getByRole('main');
  await expect(main).toContainText(headline.claim);
  const words = (await main.innerText()).replace(/\s+/g, ' ');
  expect(words.indexOf(headline.claim)).toBeLessThan(words.indexOf('More often than before?'));

  for (const question of [/More often than before/, /Do the old ones go first/]) {
    const charts = page.getByRole('region', { name: question }).getByRole('figure');
    expect(await charts.count()).toBeGreaterThan(0);
    for (const chart of await charts.all()) {
      await expect(chart.getByRole('img').filter({ visible: true })).toHaveCount(1);
      await expect(chart.getByRole('img').filter({ visible: true })).toHaveAccessibleName(/\w/);
      await expect(chart.getByRole('img').filter({ visible: true })).toHaveAccessibleDescription(/\w/);
      await chart.getByText('The numbers behind it').click();
      expect(await chart.getByRole('table').getByRole('row').count()).toBeGreaterThan(1);
    }
  }

  const statutory = page.locator('[data-caution="statutory"]');
  await expect(statutory).toBeVisible();
  const meaning = (await main.innerText()).replace(/\s+/g, ' ');
  const caution = (await statutory.innerText()).replace(/\s+/g, ' ');
  expect(meaning.indexOf(caution)).toBeGreaterThan(-1);
  expect(meaning.indexOf(together)).toBeGreaterThan(meaning.indexOf(caution));
});

test('the records of a class list the voided ones too', async ({ page }) => {
  await openClass(page, 'Circulation pump seal');
  await page
    .getByRole('link', { name: /failures and planned work/i })
    .first()
    .click();
  await page.getByLabel('What', { exact: true }).selectOption('Failures');
  await page.getByRole('button', { name: 'Show' }).click();
  await expect(page).toHaveURL(/kind=failure/);
  const voided: unknown[] = await database()('failures as f')
    .join('asset_classes as c', 'c.id', 'f.class_id')
    .where('c.name', 'Circulation pump seal')
    .whereNotNull('f.voided_at')
    .pluck('f.void_reason');
  expect(voided.length).toBeGreaterThan(0);
  for (const reason of new Set(voided)) {
    await expect(page.getByRole('cell', { name: String(reason) }).first()).toBeVisible();
  }
});

test('class settings: an error stands beside its field, what was typed stays, then it is saved', async ({
  page,
}) => {
  await openClass(page, 'Hand dryer motor');
  await page.getByRole('link', { name: 'Class settings' }).click();
  const planned = page.getByLabel('A planned replacement', { exact: true });
  const failure = page.getByLabel('A failure, with all that follows from it');
  await planned.fill('twelve');
  await failure.fill('345.60');
  await page.getByRole('button', { name: 'Save', exact: true }).click();

  await expect(page.getByRole('alert')).toBeVisible();
  await expect(planned).toHaveAttribute('aria-invalid', 'true');
  await expect(planned).toHaveAccessibleDescription(/amount such as/);
  await expect(planned).toHaveValue('twelve');
  await expect(failure).toHaveValue('345.60');
  await expect(failure).not.toHaveAttribute('aria-invalid', 'true');

  await planned.fill('85');
  await page.getByRole('button', { name: 'Save', exact: true }).click();
  await expect(page.getByRole('status').first()).toContainText('Saved');
  const stored: unknown = await database()('asset_classes')
    .where('name', 'Hand dryer motor')
    .first('planned_cost_minor', 'failure_cost_minor');
  expect(stored).toEqual({ planned_cost_minor: 8500, failure_cost_minor: 34_560 });
});
