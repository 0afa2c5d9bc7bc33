import { expect, it } from 'vitest';
import { withArticle } from '~/format/article';

it('puts "an" before a vowel and "a" before anything else', () => {
  expect(withArticle('seal')).toBe('a seal');
  expect(withArticle('electrode')).toBe('an electrode');
  expect(withArticle('LED driver')).toBe('a LED driver');
});
