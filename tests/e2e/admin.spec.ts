import { readFile } from 'node:fs/promises';
import { database } from '../../db/connection';
import { chooseAndSend, csvFile, previewCounts, upload, writeAll } from './support/imports';
import { personOf } from './support/people';
import { runNightly } from './support/run-nightly';
import { expect, test } from './support/test';

const headings = 'site,class,clock,item,items,tag,quantity,in service';
const vent = (tag: string, quantity: string, inService: string) =>
  `Tarn House,Roof vent actuator,days,actuator,actuators,${tag},${quantity},${inService}`;

const vents = () => database()('assets').where('tag', 'like', 'TH-RVA-%').orderBy('tag').pluck('tag');

test('signing in leads to the imports', async ({ page }) => {
  const { email, password } = personOf('admin');
  await page.goto('/');
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page).toHaveURL(/\/imports$/);
});

test.describe('signed in', () => {
  test.use({ person: 'admin' });

  test('a broken file is explained row by row, downloaded, corrected and taken', async ({ page }) => {
    test.setTimeout(120_000);
    const broken = csvFile('roof-vents.csv', [
      headings,
      vent('TH-RVA-01', '1', '2022-01-01'),
      vent('TH-RVA-02', '1', '2022-13-01'),
      vent('TH-RVA-03', '=1+1', '2022-01-01'),
    ]);

    await upload(page, 'register', broken);
    expect(await previewCounts(page)).toEqual({ new: 1, changed: 0, unchanged: 0, rejected: 2 });
    const rows = page.getByRole('table', { name: 'Rejected rows' }).getByRole('row');
    const badDay = rows.filter({ has: page.getByRole('rowheader', { name: '3' }) });
    await expect(badDay).toContainText('in service “2022-13-01”');
    const badQuantity = rows.filter({ has: page.getByRole('rowheader', { name: '4' }) });
    await expect(badQuantity).toContainText('quantity “=1+1”');
    await expect(page.getByRole('button', { name: /all or nothing/ })).toHaveCount(0);

    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('link', { name: 'Download the rejected rows' }).click(),
    ]);
    expect(download.suggestedFilename()).toBe('roof-vents-rejected.csv');
    const rejected = await readFile(await download.path(), 'utf8');
    expect(rejected).toContain('2022-13-01');
    // A spreadsheet must not run what a cell holds.
    expect(rejected).not.toMatch(/(^|[,;\t"])=1\+1/m);

    await page.getByRole('button', { name: /good row/ }).click();
    await expect(page.getByText(/^Applied /)).toBeVisible();
    expect(await vents()).toEqual(['TH-RVA-01']);

    const corrected = rejected.replace('2022-13-01', '2022-03-01').replace(/'?=1\+1/, '2');
    await page.goto('/imports/new?kind=register');
    await chooseAndSend(
      page,
      'register',
      csvFile('roof-vents-corrected.csv', corrected.trim().split(/\r?\n/)),
    );
    expect(await previewCounts(page)).toEqual({ new: 2, changed: 0, unchanged: 0, rejected: 0 });
    await writeAll(page);
    expect(await vents()).toEqual(['TH-RVA-01', 'TH-RVA-02', 'TH-RVA-03']);

    await page.goto('/imports');
    await expect(page.getByRole('row').filter({ hasText: 'roof-vents-corrected.csv' })).toContainText(
      'Applied',
    );
  });

  test('an import can be put aside with nothing written', async ({ page }) => {
    await upload(
      page,
      'register',
      csvFile('put-aside.csv', [headings, vent('TH-RVA-90', '1', '2022-01-01')]),
    );
    await page.getByRole('button', { name: 'Discard' }).click();
    await expect(page).toHaveURL(/\/imports$/);
    await expect(page.getByRole('row').filter({ hasText: 'put-aside.csv' })).toContainText('Discarded');
    expect(await vents()).not.toContain('TH-RVA-90');
  });

  test('a picture with the wrong name is refused in plain words', async ({ page }) => {
    await page.goto('/imports/new');
    await page.getByLabel('CSV file').setInputFiles('fixtures/imports/picture.csv');
    await page.getByRole('button', { name: 'Upload and look' }).click();
    await expect(page.getByText(/The file was not taken|The file could not be read/)).toBeVisible();
  });

  test('the nights list the run', async ({ page }) => {
    test.setTimeout(120_000);
    await page.goto('/nights');
    const runs = page.getByRole('table', { name: 'Nightly runs' }).getByRole('row');
    const before = await runs.count();
    const printed = await runNightly();
    const assessed = /Assessed (\d+) classes/.exec(printed)?.[1] ?? 'no count';
    await page.reload();
    expect(await runs.count()).toBeGreaterThan(before);
    await expect(runs.nth(1)).toContainText('finished');
    await expect(runs.nth(1).getByRole('cell', { name: assessed, exact: true })).toBeVisible();
  });
});
