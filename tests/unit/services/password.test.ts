import { hash } from '@node-rs/argon2';
import { expect, it } from 'vitest';
import { checkPassword, hashPassword, isHashOutdated } from '~/services/password.server';

it('hashes with argon2id at the stated cost and a salt of its own', async () => {
  const [one, two] = await Promise.all([hashPassword('grey gravel'), hashPassword('grey gravel')]);
  expect(one).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
  expect(one).not.toBe(two);
  expect(isHashOutdated(one)).toBe(false);
});

it('knows the password, and no other', async () => {
  const stored = await hashPassword('grey gravel');
  expect(await checkPassword('grey gravel', stored)).toBe(true);
  expect(await checkPassword('Grey gravel', stored)).toBe(false);
  expect(await checkPassword('', stored)).toBe(false);
});

it('lets nobody in without a hash', async () => {
  expect(await checkPassword('grey gravel', null)).toBe(false);
});

it.each([
  { memoryCost: 8192, timeCost: 2, parallelism: 1 },
  { memoryCost: 19_456, timeCost: 1, parallelism: 1 },
])('finds a hash of less cost outdated: %j', async (cost) => {
  expect(isHashOutdated(await hash('grey gravel', cost))).toBe(true);
});

it('finds another algorithm outdated, and more cost not', async () => {
  expect(isHashOutdated(await hash('grey gravel', { algorithm: 1 }))).toBe(true);
  expect(isHashOutdated(await hash('grey gravel', { memoryCost: 32_768, timeCost: 3 }))).toBe(false);
});
