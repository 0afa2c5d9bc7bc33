import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

import { describe, expect, it } from 'vitest';

const css = readFileSync(fileURLToPath(new URL('../../../app/app.css', import.meta.url)), 'utf8');

/** Colour tokens of the first block that opens with `opening`. */
function tokensAfter(opening: string): Record<string, string> {
  const start = css.indexOf(opening);
  expect(start, opening).toBeGreaterThanOrEqual(0);
  const block = css.slice(start, css.indexOf('}', start));
  return Object.fromEntries(
    [...block.matchAll(/--([a-z]+): (#[0-9a-f]{6});/g)].map(([, name = '', hex = '']) => [name, hex]),
  );
}

/** Relative luminance and contrast ratio after WCAG 2.2, "relative luminance" and "contrast ratio". */
function luminance(hex: string): number {
  const [r = 0, g = 0, b = 0] = [1, 3, 5].map((at) => {
    const channel = parseInt(hex.slice(at, at + 2), 16) / 255;
    return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}

function contrast(a: string, b: string): number {
  const [light = 0, dark = 0] = [luminance(a), luminance(b)].sort((x, y) => y - x);
  return (light + 0.05) / (dark + 0.05);
}

const GROUNDS = ['paper', 'sheet', 'pick'];
const TEXTS = ['ink', 'grey', 'rust', 'slate', 'moss', 'amber', 'danger'];

const themes = {
  light: tokensAfter(':root {'),
  night: tokensAfter(":root[data-theme='night'] {"),
  print: tokensAfter(":root:not([data-theme='light']) {\n    color-scheme: light"),
};

describe.each(Object.entries(themes))('%s theme', (_, tokens) => {
  it.each(TEXTS.flatMap((text) => GROUNDS.map((ground) => [text, ground] as const)))(
    '%s on %s reaches 4.5 : 1',
    (text, ground) => {
      expect(contrast(tokens[text] ?? '', tokens[ground] ?? '')).toBeGreaterThanOrEqual(4.5);
    },
  );

  it.each(GROUNDS)('the edge of a field shows on %s with 3 : 1', (ground) => {
    expect(contrast(tokens.rule ?? '', tokens[ground] ?? '')).toBeGreaterThanOrEqual(3);
  });

  it('shows the focus ring on paper with 3 : 1', () => {
    expect(contrast(tokens.slate ?? '', tokens.paper ?? '')).toBeGreaterThanOrEqual(3);
  });
});

describe('tokens', () => {
  it('know black on white as 21 : 1', () => {
    expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 10);
  });

  it('are the same at night whether the machine or the page asks for it', () => {
    expect(tokensAfter(":root:not([data-theme='light']) {\n    color-scheme: dark")).toEqual(themes.night);
  });

  it('have the same names in every theme', () => {
    expect(Object.keys(themes.night)).toEqual(Object.keys(themes.light));
    expect(Object.keys(themes.print)).toEqual(Object.keys(themes.light));
  });
});
