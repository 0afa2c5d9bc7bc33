import type { Page } from '@playwright/test';
import { assetAt, failureAt, failuresOf, idOf } from './support/class-records';
import { personOf } from './support/people';
import { expectNoSidewaysScroll } from './support/sideways';
import { Taps } from './support/taps';
import { expect, test } from './support/test';

// Each test logs on a pump of its own: a second failure of one asset on one day is asked about.
const ownPumps = ['FB-PMP-01', 'FB-PMP-02', 'FB-PMP-03', 'FB-PMP-04'] as const;

test.use({
  person: 'technician',
  viewport: { width: 390, height: 844 },
  hasTouch: true,
  isMobile: true,
});

/** Fills in the form of the pump that is open, all but the sending. */
async function fillIn(page: Page, taps = new Taps()): Promise<void> {
  await taps.on(page.getByRole('radiogroup', { name: 'What failed?' }).getByRole('radio').first());
  await taps.on(page.getByRole('radio', { name: 'Put a new one in' }));
  await taps.on(page.getByRole('radio', { name: 'No, or not sure' }));
}

async function findByTag(page: Page, tag: string, taps = new Taps()): Promise<void> {
  const field = page.getByRole('searchbox', { name: 'Tag of the asset' });
  await taps.on(field);
  await field.fill(tag);
  await taps.on(page.getByRole('button', { name: 'Find' }));
  await expect(page.getByRole('heading', { level: 1 })).toContainText(tag);
}

const save = (page: Page) => page.getByRole('button', { name: 'Save', exact: true });

test.describe('at the door', () => {
  test.use({ person: null });

  test('signing in leads to the log', async ({ page }) => {
    const { email, password } = personOf('technician');
    await page.goto('/');
    await page.getByLabel('E-mail').fill(email);
    await page.getByLabel('Password').fill(password);
    await page.getByRole('button', { name: 'Sign in' }).tap();
    await expect(page).toHaveURL(/\/log$/);
    await expect(page.getByRole('heading', { level: 1, name: 'Log a failure' })).toBeVisible();
  });
});

test('logs a failure in at most 8 taps, undoes it and puts it back', async ({ page }) => {
  const tag = ownPumps[0];
  const before = await failuresOf(tag);
  const taps = new Taps();
  await page.goto('/log');
  await findByTag(page, tag, taps);
  await fillIn(page, taps);
  await taps.on(save(page));

  await expect(page).toHaveURL(/\/failures\//);
  expect(taps.count).toBeLessThanOrEqual(8);
  await expect(page.getByRole('status')).toContainText('Stored');
  await expect(page.getByRole('heading', { name: 'What is stored' })).toBeVisible();
  const [stored, ...earlier] = await failuresOf(tag);
  expect(earlier).toHaveLength(before.length);
  expect(page.url()).toContain(stored?.id);

  await page.getByRole('button', { name: 'Undo this entry' }).tap();
  await expect(page.getByRole('button', { name: 'Put it back' })).toBeVisible();
  await expect(page.getByRole('main')).toContainText('logged by mistake');
  expect((await failuresOf(tag)).find(({ id }) => id === stored?.id)?.voided_at).not.toBeNull();

  await page.getByRole('button', { name: 'Put it back' }).tap();
  await expect(page.getByRole('button', { name: 'Undo this entry' })).toBeVisible();
  expect((await failuresOf(tag)).find(({ id }) => id === stored?.id)?.voided_at).toBeNull();
});

test('what is missing is said beside the field, and nothing given is lost', async ({ page }) => {
  await page.goto(`/log/${await idOf('assets', ownPumps[0])}`);
  await page.getByRole('radio', { name: 'Fixed the same one' }).tap();
  await page.getByText('Note', { exact: true }).tap();
  await page.getByLabel('Anything the next person should know').fill('Wet floor on arrival');
  await save(page).tap();
  await expect(page.getByRole('alert')).toBeVisible();
  const modes = page.getByRole('radiogroup', { name: 'What failed?' });
  await expect(modes).toHaveAttribute('aria-invalid', 'true');
  await expect(page.getByRole('radio', { name: 'Fixed the same one' })).toBeChecked();
  await expect(page.getByLabel('Anything the next person should know')).toHaveValue('Wet floor on arrival');
});

test('the same form sent twice at once is stored once', async ({ page }) => {
  const tag = ownPumps[1];
  const before = await failuresOf(tag);
  await page.goto(`/log/${await idOf('assets', tag)}`);
  await fillIn(page);
  const fields = await page
    .locator('form', { has: save(page) })
    .evaluate((form: HTMLFormElement) =>
      [...new FormData(form)].map(([name, value]) => [name, String(value)]),
    );
  const send = () =>
    page.request.post(page.url(), {
      form: Object.fromEntries(fields) as Record<string, string>,
      maxRedirects: 0,
    });
  const answers = await Promise.all([send(), send()]);
  expect(answers.map((answer) => answer.status())).toEqual([302, 302]);
  expect(await failuresOf(tag)).toHaveLength(before.length + 1);
});

test('going back and sending again does not store it twice unawares', async ({ page }) => {
  const tag = ownPumps[2];
  const before = await failuresOf(tag);
  await page.goto(`/log/${await idOf('assets', tag)}`);
  await fillIn(page);
  await save(page).tap();
  await expect(page).toHaveURL(/\/failures\//);

  await page.goBack();
  await expect(save(page)).toBeVisible();
  await fillIn(page);
  await save(page).tap();
  await expect(
    page.getByText('Is this one logged already?').or(page.getByText('Stored already')),
  ).toBeVisible();
  expect(await failuresOf(tag)).toHaveLength(before.length + 1);
});

test.describe('without JavaScript', () => {
  test.use({ javaScriptEnabled: false });

  test('a failure is found, logged, undone and put back', async ({ page }) => {
    const tag = ownPumps[3];
    const before = await failuresOf(tag);
    await page.goto('/log');
    await findByTag(page, tag);
    await save(page).tap();
    await expect(page.getByRole('alert')).toBeVisible();
    await fillIn(page);
    await save(page).tap();
    await expect(page).toHaveURL(/\/failures\//);
    await expect(page.getByRole('status')).toContainText('Stored');
    expect(await failuresOf(tag)).toHaveLength(before.length + 1);

    await page.getByRole('button', { name: 'Undo this entry' }).tap();
    await expect(page.getByRole('button', { name: 'Put it back' })).toBeVisible();
    await page.getByRole('button', { name: 'Put it back' }).tap();
    await expect(page.getByRole('button', { name: 'Undo this entry' })).toBeVisible();
  });
});

test('other sites stay closed', async ({ page }) => {
  // Corridor lamps hang at Castlegate Hall only, where this technician does not work.
  const lampClass = await idOf('asset_classes', 'Corridor lamp');
  const elsewhere = await assetAt('Castlegate Hall');
  for (const address of [
    `/classes/${lampClass}`,
    `/classes/${lampClass}/records`,
    `/log/${elsewhere.id}`,
    `/log?site=${await idOf('sites', 'Castlegate Hall')}`,
    `/failures/${await failureAt('Castlegate Hall')}`,
  ]) {
    const answer = await page.goto(address);
    expect(answer?.status(), address).toBe(404);
  }
  const post = await page.request.post(`/log/${elsewhere.id}`, { form: { effect: 'renewed' } });
  expect(post.status()).toBe(404);
  await page.goto(`/log?tag=${elsewhere.tag}`);
  await expect(page.getByRole('link', { name: new RegExp(elsewhere.tag) })).toHaveCount(0);
});

test('the set-up pages and the nights are not for technicians', async ({ page }) => {
  const pumpClass = await idOf('asset_classes', 'Circulation pump seal');
  for (const address of ['/imports', '/imports/new', '/nights', `/classes/${pumpClass}/settings`]) {
    const answer = await page.goto(address);
    expect(answer?.status(), address).toBe(403);
  }
  await expect(page.getByRole('link', { name: 'Imports' })).toHaveCount(0);
});

test.describe('on the narrowest phone', () => {
  test.use({ viewport: { width: 360, height: 740 } });

  test('nothing has to be scrolled sideways', async ({ page }) => {
    const pump = await idOf('assets', ownPumps[0]);
    const pumpClass = await idOf('asset_classes', 'Circulation pump seal');
    for (const address of [
      '/log',
      '/log?tag=FB-PMP',
      `/log/${pump}`,
      `/failures/${await failureAt('Fenwick Baths')}`,
      '/classes',
      `/classes/${pumpClass}`,
      `/classes/${pumpClass}/records`,
      '/nowhere',
    ]) {
      await page.goto(address);
      await expectNoSidewaysScroll(page);
    }
  });
});
