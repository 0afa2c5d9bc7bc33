import { AxeBuilder } from '@axe-core/playwright';
import { expect, type Page } from '@playwright/test';

const looks = [
  { colorScheme: 'light', width: 1280, height: 900 },
  { colorScheme: 'light', width: 390, height: 844 },
  { colorScheme: 'dark', width: 390, height: 844 },
  { colorScheme: 'dark', width: 1280, height: 900 },
] as const;

/** Expects that axe finds nothing on the page that is open, in light and dark, at a desk and on a phone. */
export async function expectNoViolations(page: Page): Promise<void> {
  for (const { colorScheme, width, height } of looks) {
    await page.emulateMedia({ colorScheme, reducedMotion: 'reduce' });
    await page.setViewportSize({ width, height });
    // In the page itself: there are no frames of others to look into.
    const { violations } = await new AxeBuilder({ page }).setLegacyMode().analyze();
    const found = violations.flatMap(({ id, nodes }) =>
      nodes.map(({ target, failureSummary }) => `${id}: ${target.join(' ')}: ${failureSummary}`),
    );
    expect.soft(found, `${page.url()}, ${colorScheme}, ${width} px`).toEqual([]);
  }
}
