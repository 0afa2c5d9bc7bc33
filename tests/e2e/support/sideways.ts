import { expect, type Page } from '@playwright/test';

/** Expects that the page fits its width: nothing to scroll to sideways. */
export async function expectNoSidewaysScroll(page: Page): Promise<void> {
  const { content, screen } = await page.evaluate(() => ({
    content: document.documentElement.scrollWidth,
    screen: document.documentElement.clientWidth,
  }));
  expect(content, `width of ${page.url()}`).toBeLessThanOrEqual(screen);
}
