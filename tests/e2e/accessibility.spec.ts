import { alarmInForce, assetAt, assetOfClass, failureAt, idOf } from './support/class-records';
import { csvFile, upload } from './support/imports';
import { ensureNight } from './support/run-nightly';
import { expect, test } from './support/test';
import { expectNoViolations } from './support/violations';

test.beforeAll(async () => {
  test.setTimeout(120_000);
  await ensureNight();
});

test.beforeEach(() => test.setTimeout(180_000));

test('sign-in page, empty and refused', async ({ page }) => {
  await page.goto('/sign-in');
  await expectNoViolations(page);
  await page.getByLabel('E-mail').fill('nobody@larkmoor.example');
  await page.getByLabel('Password').fill('not the password');
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page.getByText('You are not signed in')).toBeVisible();
  await expectNoViolations(page);
});

test.describe('for a lead', () => {
  test.use({ person: 'lead' });

  test('classes', async ({ page }) => {
    await page.goto('/classes');
    await expectNoViolations(page);
    await page.goto('/classes?verdict=not-assessed&statutory=yes');
    await expectNoViolations(page);
  });

  for (const [verdict, name] of [
    ['wear-out', 'Circulation pump seal'],
    ['memoryless', 'Corridor LED driver'],
    ['early-life', 'Access reader'],
    ['undecided', 'Fire damper actuator'],
  ] as const) {
    test(`a class that is ${verdict}`, async ({ page }) => {
      await page.goto(`/classes/${await idOf('asset_classes', name)}`);
      await expect(page.getByRole('main')).toContainText(verdict);
      for (const more of await page.locator('main summary').all()) await more.click();
      await expectNoViolations(page);
    });
  }

  test('records of a class', async ({ page }) => {
    await page.goto(`/classes/${await idOf('asset_classes', 'Chilled beam valve')}/records`);
    await expect(page.getByRole('table')).toBeVisible();
    await expectNoViolations(page);
  });

  test('settings of a class, with and without errors', async ({ page }) => {
    await page.goto(`/classes/${await idOf('asset_classes', 'Circulation pump seal')}/settings`);
    await expectNoViolations(page);
    await page.getByLabel('A planned replacement', { exact: true }).fill('twelve');
    await page.getByRole('button', { name: 'Save', exact: true }).click();
    await expect(page.getByRole('alert')).toBeVisible();
    await expectNoViolations(page);
  });

  test('clearing an alarm, with and without a reason', async ({ page }) => {
    await page.goto(`/alarms/${await alarmInForce()}/clear`);
    await expectNoViolations(page);
    await page.getByRole('textbox', { name: /why/i }).fill('   ');
    await page.getByRole('button', { name: 'Clear the alarm' }).click();
    await expect(page.getByRole('alert')).toBeVisible();
    await expectNoViolations(page);
  });

  test('when the items of a group were fitted', async ({ page }) => {
    const { id } = await assetOfClass('Corridor lamp');
    await page.goto(`/assets/${id}/fitted`);
    await expect(page.getByRole('main')).toContainText('fitted');
    await expectNoViolations(page);
  });

  for (const path of [
    '/since',
    '/since?show=seen',
    '/changes',
    '/year-ahead?by=site',
    '/methods',
    '/search?q=pmp',
  ]) {
    test(`the page at ${path}`, async ({ page }) => {
      await page.goto(path);
      await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
      await expectNoViolations(page);
    });
  }

  for (const part of ['positions', 'tasks', 'clean', 'change']) {
    test(`the ${part} of a class`, async ({ page }) => {
      await page.goto(`/classes/${await idOf('asset_classes', 'Circulation pump seal')}/${part}`);
      for (const more of await page.locator('main summary').all()) await more.click();
      await expectNoViolations(page);
    });
  }

  test('an asset with its timeline', async ({ page }) => {
    await page.goto(`/assets/${(await assetOfClass('Extract fan motor')).id}`);
    await expectNoViolations(page);
  });

  test('trying a number, and a class that is not decided here', async ({ page }) => {
    await page.goto(
      `/classes/${await idOf('asset_classes', 'Circulation pump seal')}?try-interval=9&try-planned=200&try-failure=900`,
    );
    await expect(page.getByText('Replaced every 9 months')).toBeVisible();
    await expectNoViolations(page);
    await page.goto(`/classes/${await idOf('asset_classes', 'Lift door gear')}/change`);
    await expect(page.getByText('Not decided here')).toBeVisible();
    await expectNoViolations(page);
  });

  test('the preview of a correction', async ({ page }) => {
    await page.goto(`/classes/${await idOf('asset_classes', 'Circulation pump seal')}/clean`);
    await page.getByRole('row').nth(1).getByRole('checkbox').check();
    await page.getByRole('radio', { name: 'They should not count (void)' }).check();
    await page.getByLabel('To void: why they should not count').fill('logged twice');
    await page.getByRole('button', { name: 'See what it does' }).click();
    await expect(page.getByText('Nothing is saved yet')).toBeVisible();
    await expectNoViolations(page);
  });

  test('nights', async ({ page }) => {
    await page.goto('/nights');
    await expect(page.getByRole('table')).toBeVisible();
    await expectNoViolations(page);
  });
});

test.describe('for a technician', () => {
  test.use({ person: 'technician' });

  test('finding an asset', async ({ page }) => {
    await page.goto('/log');
    await expectNoViolations(page);
    await page.goto('/log?tag=FB-PMP');
    await expect(page.getByRole('link', { name: /FB-PMP-01/ })).toBeVisible();
    await expectNoViolations(page);
  });

  test('the log form, with and without errors', async ({ page }) => {
    await page.goto(`/log/${(await assetAt('Orrin Library')).id}`);
    await expectNoViolations(page);
    await page.getByRole('button', { name: 'Save', exact: true }).click();
    await expect(page.getByRole('alert')).toBeVisible();
    await expectNoViolations(page);
  });

  test('the confirmation of a failure, then undone', async ({ page }) => {
    await page.goto(`/log/${(await assetAt('Orrin Library')).id}`);
    await page.getByRole('radio', { name: 'Something else' }).check();
    await page.getByLabel('What was it, in a few words?').fill('A loose cover');
    await page.getByRole('radio', { name: 'Fixed the same one' }).check();
    await page.getByRole('radio', { name: 'No, or not sure' }).check();
    await page.getByRole('button', { name: 'Save', exact: true }).click();
    await expect(page).toHaveURL(/\/failures\//);
    await expectNoViolations(page);
    await page.getByRole('button', { name: 'Undo this entry' }).click();
    await expect(page.getByRole('button', { name: 'Put it back' })).toBeVisible();
    await expectNoViolations(page);
  });

  test('a meter reading, with and without errors', async ({ page }) => {
    const { id } = await assetAt('Orrin Library');
    await page.goto(`/log/${id}/reading`);
    await expectNoViolations(page);
    await page.getByRole('button', { name: 'Save', exact: true }).click();
    await expect(page.getByRole('alert')).toBeVisible();
    await expectNoViolations(page);
  });

  test('a failure logged by others', async ({ page }) => {
    await page.goto(`/failures/${await failureAt('Fenwick Baths')}`);
    await expectNoViolations(page);
  });

  test('what is not there, and what is not open', async ({ page }) => {
    expect((await page.goto('/nowhere'))?.status()).toBe(404);
    await expectNoViolations(page);
    expect((await page.goto('/nights'))?.status()).toBe(403);
    await expectNoViolations(page);
  });
});

test.describe('for an admin', () => {
  test.use({ person: 'admin' });

  test('uploading, a preview with rejected rows, and the list of imports', async ({ page }) => {
    await page.goto('/imports/new');
    await expectNoViolations(page);
    const file = csvFile('gutter-heaters.csv', [
      'site,class,clock,item,items,tag,in service',
      'Tarn House,Gutter heater,days,heater,heaters,TH-GUT-01,2022-01-01',
      'Tarn House,Gutter heater,days,heater,heaters,TH-GUT-02,yesterday',
    ]);
    await upload(page, 'register', file);
    await expect(page.getByRole('table', { name: 'Rejected rows' })).toBeVisible();
    await expectNoViolations(page);
    await page.getByRole('button', { name: 'Discard' }).click();
    await expect(page).toHaveURL(/\/imports$/);
    await expectNoViolations(page);
  });
});
