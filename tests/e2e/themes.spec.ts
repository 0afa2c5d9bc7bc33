import { signedInState } from './support/people';
import { expect, test } from './support/test';

const paper = 'getComputedStyle(document.body).backgroundColor';

/** Light of a colour such as "rgb(20, 20, 20)", from 0 to 255. */
function lightOf(colour: string): number {
  const parts = (colour.match(/[\d.]+/g) ?? []).slice(0, 3).map(Number);
  return parts.reduce((sum, part) => sum + part, 0) / 3;
}

test.use({ javaScriptEnabled: false });

test('the theme is chosen without JavaScript, stays, and goes with the person’s browser', async ({
  page,
  context,
  baseURL,
}) => {
  await page.goto('/sign-in');
  await expect(page.locator('html')).toHaveAttribute('data-theme', 'auto');
  await page.getByText('Theme', { exact: true }).first().click();
  await page.getByRole('button', { name: 'Night' }).click();
  await expect(page).toHaveURL(/\/sign-in/);
  await expect(page.locator('html')).toHaveAttribute('data-theme', 'night');

  const { cookies } = await signedInState('lead', baseURL ?? '');
  await context.addCookies(cookies);
  const another = await context.newPage();
  await another.goto('/classes?sort=name&direction=asc');
  await expect(another.locator('html')).toHaveAttribute('data-theme', 'night');
  expect(lightOf(await another.evaluate<string>(paper))).toBeLessThan(80);

  await another.locator('summary', { hasText: 'Ottoline Garsdale' }).click();
  await another.getByRole('button', { name: 'Light' }).click();
  await expect(another).toHaveURL(/\/classes\?sort=name&direction=asc/);
  await expect(another.locator('html')).toHaveAttribute('data-theme', 'light');
  expect(lightOf(await another.evaluate<string>(paper))).toBeGreaterThan(200);
});

test('left to the device, the page follows it', async ({ page }) => {
  await page.emulateMedia({ colorScheme: 'dark' });
  await page.goto('/sign-in');
  expect(lightOf(await page.evaluate<string>(paper))).toBeLessThan(80);
  await page.emulateMedia({ colorScheme: 'light' });
  expect(lightOf(await page.evaluate<string>(paper))).toBeGreaterThan(200);
});
