import { database } from '../../db/connection';
import { idOf, openClass } from './support/class-records';
import { personOf } from './support/people';
import { ensureNight } from './support/run-nightly';
import { expect, test } from './support/test';

test.beforeAll(async () => {
  test.setTimeout(120_000);
  await ensureNight();
});

test('signing in leads to what is new', async ({ page }) => {
  const { email, password } = personOf('manager');
  await page.goto('/');
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page).toHaveURL(/\/since$/);
});

test.describe('signed in', () => {
  test.use({ person: 'manager' });

  test('reads the classes and a class, and changes nothing', async ({ page }) => {
    await openClass(page, 'Circulation pump seal');
    await expect(page.getByRole('region', { name: /More often than before/ })).toBeVisible();
    await expect(page.getByRole('region', { name: /Do the old ones go first/ })).toBeVisible();
    await expect(page.getByRole('main').getByRole('textbox')).toHaveCount(0);
    await expect(page.getByRole('link', { name: 'Class settings' })).toHaveCount(0);
    await expect(page.getByRole('link', { name: 'Imports' })).toHaveCount(0);
    await expect(page.getByRole('link', { name: 'Log a failure' })).toHaveCount(0);
  });

  test('cannot open or send settings, imports and logged failures', async ({ page }) => {
    const classId = await idOf('asset_classes', 'Circulation pump seal');
    const asset = await idOf('assets', 'FB-PMP-05');
    const settings = `/classes/${classId}/settings`;
    for (const address of [settings, '/imports', '/imports/new', '/nights', '/log', `/log/${asset}`]) {
      const answer = await page.goto(address);
      expect(answer?.status(), address).toBe(403);
    }
    const costs = () =>
      database()('asset_classes')
        .where('id', classId)
        .first<unknown>('planned_cost_minor', 'failure_cost_minor', 'version');
    const before = await costs();
    const form = { intent: 'save', version: '1', plannedCost: '1', failureCost: '1' };
    expect((await page.request.post(settings, { form })).status()).toBe(403);
    expect((await page.request.post(`/log/${asset}`, { form: { effect: 'renewed' } })).status()).toBe(403);
    expect((await page.request.post('/imports/new', { multipart: { kind: 'register' } })).status()).toBe(403);
    expect(await costs()).toEqual(before);
  });
});
