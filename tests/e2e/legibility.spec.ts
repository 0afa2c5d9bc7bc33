import type { Page } from '@playwright/test';
import { assetOfClass, idOf } from './support/class-records';
import { ensureNight } from './support/run-nightly';
import { expectNoSidewaysScroll } from './support/sideways';
import { expect, test } from './support/test';

test.use({ person: 'lead' });

test.beforeAll(async () => {
  test.setTimeout(120_000);
  await ensureNight();
});

const widths = [390, 768, 1280];

/** Text in sight that is drawn smaller than 12 px, with its size. */
async function smallText(page: Page): Promise<string[]> {
  return page.evaluate(() => {
    const small: string[] = [];
    for (const element of document.querySelectorAll<HTMLElement | SVGElement>('body *')) {
      const words = [...element.childNodes]
        .filter((node) => node.nodeType === Node.TEXT_NODE)
        .map((node) => node.textContent?.trim() ?? '')
        .join(' ')
        .trim();
      const box = element.getBoundingClientRect();
      if (words === '' || box.width <= 1 || box.height <= 1 || !element.checkVisibility()) continue;
      const svg = element.closest('svg');
      const view = svg?.viewBox.baseVal;
      const scale = svg && view && view.width > 0 ? svg.getBoundingClientRect().width / view.width : 1;
      const size = Number.parseFloat(getComputedStyle(element).fontSize) * scale;
      // A subscript of a formula is as small as mathematics sets it.
      if (size < 11.95 && element.closest('math') === null)
        small.push(`${size.toFixed(1)} px: ${words.slice(0, 40)}`);
    }
    return small;
  });
}

const classPaths = ['', '/records', '/positions', '/tasks', '/clean', '/change', '/settings'];
const otherPaths = [
  '/since',
  '/classes',
  '/changes',
  '/year-ahead',
  '/methods',
  '/search?q=pmp',
  '/nights',
  '/imports',
  '/log',
];

for (const width of widths) {
  test(`at ${width} px no text is under 12 px and nothing is cut`, async ({ page }) => {
    test.setTimeout(180_000);
    await page.setViewportSize({ width, height: 900 });
    const seal = `/classes/${await idOf('asset_classes', 'Circulation pump seal')}`;
    const mixed = `/classes/${await idOf('asset_classes', 'Boiler ignition electrode')}`;
    const asset = `/assets/${(await assetOfClass('Extract fan motor')).id}`;
    for (const path of [...otherPaths, ...classPaths.map((part) => seal + part), mixed, asset]) {
      await page.goto(path);
      expect(await smallText(page), path).toEqual([]);
      await expectNoSidewaysScroll(page);
    }
  });
}

for (const name of [
  'Circulation pump seal',
  'Lift door gear',
  'Boiler ignition electrode',
  'Corridor lamp',
]) {
  test(`the page of ${name} prints as a sheet of two pages`, async ({ page }) => {
    await page.goto(`/classes/${await idOf('asset_classes', name)}`);
    const pdf = await page.pdf({ preferCSSPageSize: true });
    expect(pdf.toString('latin1').match(/\/Type\s*\/Page\b(?!s)/g)).toHaveLength(2);
  });
}
