import type { Locator, Page } from '@playwright/test';
import { personOf, signedInState } from './support/people';
import { expect, test } from './support/test';

/** Presses Tab until something has the focus. */
async function tabTo(page: Page, target: Locator, mostPresses = 80): Promise<void> {
  for (let presses = 0; presses < mostPresses; presses += 1) {
    await page.keyboard.press('Tab');
    if (await target.evaluate((element) => element === document.activeElement)) return;
  }
  throw new Error(`not reached with ${mostPresses} presses of Tab: ${target}`);
}

test('signs in and opens a class by keyboard alone', async ({ page }) => {
  const { email, password } = personOf('lead');
  await page.goto('/sign-in');
  await tabTo(page, page.getByLabel('E-mail'));
  await page.keyboard.type(email);
  await tabTo(page, page.getByLabel('Password'), 1);
  await page.keyboard.type(password);
  await page.keyboard.press('Enter');
  await expect(page).toHaveURL(/\/since/);

  await tabTo(page, page.getByRole('link', { name: 'Classes', exact: true }));
  await page.keyboard.press('Enter');
  await expect(page).toHaveURL(/\/classes/);
  const link = page.getByRole('link', { name: 'Circulation pump seal', exact: true });
  await tabTo(page, link);
  expect(await link.evaluate((element) => getComputedStyle(element).outlineStyle)).not.toBe('none');
  await page.keyboard.press('Enter');
  await expect(page.getByRole('heading', { level: 1, name: 'Circulation pump seal' })).toBeVisible();
});

test('the first stop is a link past the navigation', async ({ page }) => {
  await page.goto('/sign-in');
  await page.keyboard.press('Tab');
  const skip = page.getByRole('link', { name: 'Skip to content' });
  await expect(skip).toBeFocused();
  await expect(skip).toBeInViewport();
  await page.keyboard.press('Enter');
  await expect(page.getByRole('main')).toBeFocused();
  await page.keyboard.press('Tab');
  await expect(page.getByLabel('E-mail')).toBeFocused();
});

test('searches from anywhere: the slash key, arrows and Enter', async ({ browser, baseURL }) => {
  const context = await browser.newContext({ storageState: await signedInState('lead', baseURL!), baseURL });
  const page = await context.newPage();
  await page.goto('/methods');
  await page.keyboard.press('/');
  const box = page.getByRole('combobox', { name: 'Search classes and assets' });
  await expect(box).toBeFocused();
  await page.keyboard.type('FB-PMP-0');
  const option = page.getByRole('option').filter({ hasText: 'FB-PMP-01' });
  await expect(option).toBeVisible();
  await page.keyboard.press('ArrowDown');
  await expect(option).toHaveAttribute('aria-selected', 'true');
  await page.keyboard.press('Escape');
  await expect(option).toBeHidden();
  await page.keyboard.type('1');
  await expect(option).toBeVisible();
  await page.keyboard.press('ArrowDown');
  await page.keyboard.press('Enter');
  await expect(page.getByRole('heading', { level: 1, name: 'FB-PMP-01' })).toBeVisible();
  await context.close();
});
