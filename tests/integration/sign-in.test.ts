import type * as argon2 from '@node-rs/argon2';
import { hash, verify } from '@node-rs/argon2';
import { createHash } from 'node:crypto';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import * as signInRoute from '~/routes/sign-in';
import { hashPassword } from '~/services/password.server';
import { database } from '../../db/connection';
import { addPerson, password } from '../support/people';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { cookiesOf, formRequest, visit } from '../support/visit';

vi.mock('@node-rs/argon2', async (importOriginal) => {
  const real = await importOriginal<typeof argon2>();
  return { ...real, verify: vi.fn(real.verify) };
});

const site = 'http://intervale.test';
const route = { path: 'sign-in', ...signInRoute };

let test: TestDatabase;

beforeAll(async () => {
  test = await createTestDatabase();
  vi.stubEnv('DATABASE_URL', test.url);
  await addPerson(test.database, {
    email: 'lead@larkmoor.example',
    roles: ['lead'],
    passwordHash: await hashPassword(password),
  });
  await addPerson(test.database, {
    email: 'gone@larkmoor.example',
    roles: ['lead'],
    disabled: true,
    passwordHash: await hashPassword(password),
  });
  await addPerson(test.database, { email: 'sso@larkmoor.example', roles: ['lead'], passwordHash: null });
  vi.unstubAllEnvs();
});

beforeEach(async () => {
  vi.stubEnv('DATABASE_URL', test.url);
  await test.database('sign_in_limits').delete();
  vi.mocked(verify).mockClear();
});

afterEach(() => vi.unstubAllEnvs());

afterAll(async () => {
  await database().destroy();
  await test.drop();
});

function tryToSignIn(
  fields: Record<string, string>,
  headers?: Record<string, string>,
  at = site,
): Promise<Response> {
  return visit(route, formRequest(`${at}/sign-in`, fields, headers));
}

const right = { email: 'lead@larkmoor.example', password };

describe('a sign-in that is refused', () => {
  const kinds: [string, { email: string; password: string }][] = [
    ['wrong password', { email: 'lead@larkmoor.example', password: 'wrong' }],
    ['unknown e-mail', { email: 'nobody@larkmoor.example', password }],
    ['disabled person', { email: 'gone@larkmoor.example', password }],
    ['person without a password', { email: 'sso@larkmoor.example', password }],
  ];

  it.each(kinds)('answers alike after the work of one full check: %s', async (_, fields) => {
    const answer = await tryToSignIn(fields);
    expect(answer.status).toBe(400);
    expect(answer.headers.getSetCookie()).toEqual([]);
    expect(await answer.json()).toMatchObject({
      error: { '': ['This e-mail and password do not go together, or the account is closed.'] },
    });
    expect(verify).toHaveBeenCalledTimes(1);
    expect(vi.mocked(verify).mock.calls[0]?.[0]).toContain('$argon2id$v=19$m=19456,t=2,p=1$');
    expect(await test.database('sessions').count('* as n').first()).toEqual({ n: 0 });
  });

  it('gives back the e-mail and not the password', async () => {
    const answer = await tryToSignIn({ email: 'lead@larkmoor.example', password: 'mistyped secret' });
    const text = await answer.text();
    expect(text).toContain('lead@larkmoor.example');
    expect(text).not.toContain('mistyped secret');
  });

  it('says beside each field what is missing, and checks nothing', async () => {
    const answer = await tryToSignIn({ email: '', password: '' });
    expect(answer.status).toBe(400);
    expect(await answer.json()).toMatchObject({
      error: { email: ['Enter your e-mail address.'], password: ['Enter your password.'] },
    });
    expect(verify).not.toHaveBeenCalled();
  });
});

describe('a sign-in that succeeds', () => {
  it('keeps only a hash of the token, in a cookie scripts cannot read', async () => {
    const answer = await tryToSignIn({ ...right, email: 'LEAD@larkmoor.example ', next: '/classes?site=1' });
    expect(answer.status).toBe(302);
    expect(answer.headers.get('Location')).toBe('/classes?site=1');
    expect(answer.headers.get('Cache-Control')).toBe('private, no-store');
    const [cookie = ''] = answer.headers.getSetCookie();
    expect(cookie).toMatch(/^session=[^;]+; Max-Age=5184000; Path=\/; HttpOnly; SameSite=Lax$/);

    const value = decodeURIComponent(cookie.slice('session='.length, cookie.indexOf(';')));
    const token = JSON.parse(Buffer.from(value, 'base64').toString()) as string;
    expect(Buffer.from(token, 'base64url')).toHaveLength(32);
    const stored = (await test.database('sessions').first('token_hash')) as { token_hash: Buffer };
    expect(stored.token_hash).toEqual(createHash('sha256').update(token).digest());
    expect(await test.database('audit_entries').where({ action: 'sign-in' }).first()).toMatchObject({
      subject: 'person',
    });
  });

  it('binds the cookie to https and to this host where people come by https', async () => {
    vi.stubEnv('APP_ORIGIN', 'https://intervale.example');
    const answer = await tryToSignIn(right, { Origin: 'https://intervale.example' });
    expect(answer.headers.getSetCookie()[0]).toMatch(
      /^__Host-session=.*; Path=\/; HttpOnly; Secure; SameSite=Lax$/,
    );
    expect(answer.headers.get('Strict-Transport-Security')).toBe('max-age=31536000');
  });

  it('ends the session it came with', async () => {
    const first = cookiesOf(await tryToSignIn(right));
    const second = cookiesOf(await tryToSignIn(right, { Cookie: first }));
    expect(second).not.toBe(first);
    const page = (cookie: string) =>
      visit(route, new Request(`${site}/sign-in`, { headers: { Cookie: cookie } }));
    expect((await page(first)).status).toBe(200);
    expect((await page(second)).status).toBe(302);
  });

  it('makes the hash anew when it was made with less than the present cost', async () => {
    const email = 'old-hash@larkmoor.example';
    const old = await hash(password, { memoryCost: 4096, timeCost: 1, parallelism: 1 });
    const id = await addPerson(test.database, { email, roles: ['lead'], passwordHash: old });
    const readHash = async () =>
      (await test.database('people').where({ id }).first('password_hash'))?.password_hash as string;

    expect((await tryToSignIn({ email, password })).status).toBe(302);
    const renewed = await readHash();
    expect(renewed).toContain('$argon2id$v=19$m=19456,t=2,p=1$');
    expect((await tryToSignIn({ email, password })).status).toBe(302);
    expect(await readHash()).toBe(renewed);
  });
});

describe('where a sign-in leads', () => {
  it.each([
    '//evil.example',
    'https://evil.example/',
    '/\\evil.example',
    '\\\\evil.example',
    '/\t/evil.example',
    '/.//evil.example',
    'javascript:alert(1)',
    'evil.example',
    '',
  ])('never to another site: %j', async (next) => {
    expect((await tryToSignIn({ ...right, next })).headers.get('Location')).toBe('/');
    const page = await visit(route, new Request(`${site}/sign-in?${new URLSearchParams({ next })}`));
    expect(await page.json()).toMatchObject({ next: '/' });
  });
});

describe('the limit on tries', () => {
  it.each(['lead@larkmoor.example', 'nobody@larkmoor.example'])('slows %s down after five', async (email) => {
    for (let tried = 0; tried < 5; tried++) {
      expect((await tryToSignIn({ email, password: `guess ${tried}` })).status).toBe(400);
    }
    // The right password does not help now, and is not even looked at.
    vi.mocked(verify).mockClear();
    const answer = await tryToSignIn({ email: email.toUpperCase(), password });
    expect(answer.status).toBe(429);
    expect(answer.headers.get('Retry-After')).toBe('120');
    expect(await answer.json()).toMatchObject({ error: { '': ['Too many tries. Wait 2 minutes.'] } });
    expect(verify).not.toHaveBeenCalled();
  });

  it('counts tries that arrive together', async () => {
    const answers = await Promise.all(
      Array.from({ length: 9 }, (_, n) => tryToSignIn({ email: right.email, password: `guess ${n}` })),
    );
    expect(answers.filter(({ status }) => status === 400)).toHaveLength(5);
    expect(answers.filter(({ status }) => status === 429)).toHaveLength(4);
  });

  it('lets in again after the wait, and forgets the tries of who gets in', async () => {
    for (let tried = 0; tried < 6; tried++) await tryToSignIn({ email: right.email, password: 'guess' });
    expect((await tryToSignIn(right)).status).toBe(429);
    await test.database('sign_in_limits').update({ expire: Date.now() - 1 });
    expect((await tryToSignIn(right)).status).toBe(302);
    expect(await test.database('sign_in_limits').select()).toEqual([]);
  });

  it('keeps no e-mail in its table', async () => {
    await tryToSignIn({ email: right.email, password: 'guess' });
    const keys = (await test.database('sign_in_limits').pluck('key')) as string[];
    expect(keys).toEqual([expect.stringMatching(/^email:[0-9a-f]{64}$/)]);
  });

  it('slows one address down whatever e-mails it tries, and no other', async () => {
    vi.stubEnv('INTERVALE_TRUST_PROXY', '1');
    const from = (address: string, email: string) =>
      tryToSignIn({ email, password: 'guess' }, { 'X-Forwarded-For': address });
    for (let tried = 0; tried < 30; tried++) {
      // What stands before the proxy's own entry is the client's invention, and one /64 is one home.
      const address = `198.51.100.${tried}, 2001:db8:0:7::${tried + 1}`;
      expect((await from(address, `person-${tried}@larkmoor.example`)).status).toBe(400);
    }
    const refused = await from('2001:db8:0:7:ffff::1', 'another@larkmoor.example');
    expect(refused.status).toBe(429);
    expect(refused.headers.get('Retry-After')).toBe('300');
    expect((await from('2001:db8:0:8::1', 'another@larkmoor.example')).status).toBe(400);
  });

  it('believes no forwarded address unless a proxy is trusted', async () => {
    await tryToSignIn({ email: right.email, password: 'guess' }, { 'X-Forwarded-For': '203.0.113.9' });
    const keys = (await test.database('sign_in_limits').pluck('key')) as string[];
    expect(keys.filter((key) => key.startsWith('address:'))).toEqual([]);
  });
});

describe('the demonstration', () => {
  const people = [{ name: 'Ada', role: 'lead', email: 'lead@larkmoor.example', password }];

  it('fills in the form only in demo mode', async () => {
    vi.stubEnv('INTERVALE_DEMO_PEOPLE', JSON.stringify(people));
    const page = () => visit(route, new Request(`${site}/sign-in?as=lead@larkmoor.example`));
    expect(await (await page()).json()).toMatchObject({ demoPeople: [], chosen: null });
    vi.stubEnv('INTERVALE_DEMO', '1');
    expect(await (await page()).json()).toMatchObject({
      demoPeople: [{ name: 'Ada', role: 'Reliability lead', email: 'lead@larkmoor.example' }],
      chosen: { email: 'lead@larkmoor.example', password },
    });
  });
});
