import { readFileSync } from 'node:fs';
import { request, type BrowserContext } from '@playwright/test';
import { z } from 'zod';

const peopleSchema = z.array(
  z.object({ role: z.string(), email: z.string(), password: z.string(), name: z.string() }),
);

/** Whom a test is; the technician works at Fenwick Baths and Orrin Library. */
export type PersonKey = 'technician' | 'lead' | 'manager' | 'admin';

/** Sign-in of the first person of that role in the demo. */
export function personOf(role: PersonKey): { email: string; password: string; name: string } {
  const people = peopleSchema.parse(JSON.parse(readFileSync('fixtures/demo-people.json', 'utf8')));
  const person = people.find((candidate) => candidate.role === role);
  if (person === undefined) throw new Error(`the demo has no ${role}`);
  return person;
}

type SignedInState = Awaited<ReturnType<BrowserContext['storageState']>>;
const states = new Map<PersonKey, SignedInState>();

/** Cookies of a person who is signed in; signs in once for all tests of this process. */
export async function signedInState(role: PersonKey, origin: string): Promise<SignedInState> {
  const known = states.get(role);
  if (known !== undefined) return known;
  const { email, password } = personOf(role);
  // With no cookies of the test it is called from: signing in ends the session a request comes with.
  const visitor = await request.newContext({
    baseURL: origin,
    extraHTTPHeaders: { Origin: origin },
    storageState: { cookies: [], origins: [] },
  });
  const answer = await visitor.post('/sign-in', { form: { email, password }, maxRedirects: 0 });
  if (answer.status() !== 302) throw new Error(`signing in as ${email} answered ${answer.status()}`);
  const state = await visitor.storageState();
  await visitor.dispose();
  states.set(role, state);
  return state;
}
