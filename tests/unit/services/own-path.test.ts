import fc from 'fast-check';
import { expect, it } from 'vitest';
import { ownPath } from '~/services/own-path.server';

it.each(['/', '/classes', '/classes?verdict=wear-out&page=2', '/log/7#note', '/classes?to=//elsewhere'])(
  'keeps %s',
  (path) => expect(ownPath(path)).toBe(path),
);

it.each([
  null,
  undefined,
  7,
  '',
  'classes',
  '//evil.example',
  '/\\evil.example',
  '/\n/evil.example',
  '/a/..//evil.example',
])('gives the fallback for %j', (value) => expect(ownPath(value, '/fallback')).toBe('/fallback'));

it('never leads to another site, whatever is written', () => {
  const pieces = fc.constantFrom(
    '/',
    '\\',
    '.',
    '..',
    ':',
    '@',
    '?',
    '#',
    '\t',
    '\n',
    ' ',
    '%2f',
    '%5c',
    'evil.example',
    'https:',
    'javascript:',
  );
  fc.assert(
    fc.property(fc.array(pieces, { maxLength: 8 }), (written) => {
      const path = ownPath(written.join(''));
      expect(new URL(path, 'https://intervale.example/sign-in').origin).toBe('https://intervale.example');
      expect(path).toMatch(/^\/(?![/\\])/);
    }),
    { numRuns: 2_000, seed: 20260301 },
  );
});
