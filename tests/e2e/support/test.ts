import { test as base } from '@playwright/test';
import { signedInState, type PersonKey } from './people';

interface Options {
  /** Who is signed in from the start; null for nobody. */
  person: PersonKey | null;
}

/** Playwright's test with a person signed in: `test.use({ person: 'lead' })`. */
export const test = base.extend<Options>({
  person: [null, { option: true }],
  actionTimeout: 20_000,
  storageState: async ({ person, baseURL }, provide) => {
    await provide(
      person === null || baseURL === undefined ? undefined : await signedInState(person, baseURL),
    );
  },
});

export { expect } from '@playwright/test';
