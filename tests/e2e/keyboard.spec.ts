import type { Locator, Page } from '@playwright/test';
import { personOf } from './support/people';
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
