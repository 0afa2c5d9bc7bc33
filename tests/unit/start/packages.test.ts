import { describe, expect, it } from 'vitest';
import { isInstalled, type Lockfile } from '../../../jobs/start/packages.mjs';

const one = { version: '1.0.0', integrity: 'sha512-a' };
const lock = (packages: NonNullable<Lockfile['packages']>): Lockfile => ({
  packages: { '': { version: '0.1.0' }, ...packages },
});

describe('isInstalled', () => {
  it('accepts what the lock file asks for, without the root entry that npm’s note lacks', () => {
    expect(isInstalled(lock({ 'node_modules/one': one }), { packages: { 'node_modules/one': one } })).toBe(
      true,
    );
  });

  it('accepts that a package for another system is missing', () => {
    expect(isInstalled(lock({ 'node_modules/win': { ...one, optional: true } }), { packages: {} })).toBe(
      true,
    );
  });

  it.each([
    ['a package is missing', {}],
    ['a version differs', { 'node_modules/one': { ...one, version: '1.0.1' } }],
    ['the content differs', { 'node_modules/one': { ...one, integrity: 'sha512-b' } }],
    ['a package is there that was removed', { 'node_modules/one': one, 'node_modules/two': one }],
  ])('refuses when %s', (_, installed) => {
    expect(isInstalled(lock({ 'node_modules/one': one }), { packages: installed })).toBe(false);
  });

  it('refuses an empty note', () => {
    expect(isInstalled(lock({ 'node_modules/one': one }), {})).toBe(false);
  });
});
