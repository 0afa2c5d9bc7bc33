import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import * as home from '~/routes/home';
import * as signInRoute from '~/routes/sign-in';
import * as signOutRoute from '~/routes/sign-out';
import * as themeRoute from '~/routes/theme';
import type { Role } from '~/models/people.server';
import { requireRole, requireSite, requireViewer, type RequestContext } from '~/services/viewer.server';
import { database } from '../../db/connection';
import { addPerson, addSite, password } from '../support/people';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { cookiesOf, formRequest, visit } from '../support/visit';

const site = 'http://intervale.test';
const begun = '2026-03-02T08:00:00Z';

interface Arguments {
  context: RequestContext;
  request: Request;
}

/** A page for anybody signed in, which says who that is. */
const whoAmI = { path: 'who', loader: ({ context, request }: Arguments) => requireViewer(context, request) };

let test: TestDatabase;
let people = 0;

beforeAll(async () => {
  test = await createTestDatabase();
});

beforeEach(async () => {
  vi.stubEnv('DATABASE_URL', test.url);
  vi.stubEnv('INTERVALE_TEST', '1');
  setClock(begun);
  await test.database('sign_in_limits').delete();
});

afterEach(() => vi.unstubAllEnvs());

afterAll(async () => {
  await database().destroy();
  await test.drop();
});

function setClock(instant: string): void {
  vi.stubEnv('INTERVALE_NOW', instant);
}

async function signedIn(roles: readonly Role[], siteIds: readonly string[] = []) {
  const email = `person-${++people}@larkmoor.example`;
  const id = await addPerson(test.database, { email, roles, siteIds });
  const answer = await visit(
    { path: 'sign-in', ...signInRoute },
    formRequest(`${site}/sign-in`, { email, password }),
  );
  return { id, email, cookie: cookiesOf(answer) };
}

function get(route: Parameters<typeof visit>[0], path: string, cookie = ''): Promise<Response> {
  return visit(route, new Request(site + path, { headers: { Cookie: cookie } }));
}

describe('a session', () => {
  it('carries the person, freshly read', async () => {
    const { id, email, cookie } = await signedIn(['lead']);
    expect(await (await get(whoAmI, '/who', cookie)).json()).toMatchObject({ id, email, roles: ['lead'] });
    await test.database('person_roles').insert({ person_id: id, role: 'admin' });
    expect(await (await get(whoAmI, '/who', cookie)).json()).toMatchObject({ roles: ['admin', 'lead'] });
  });

  it.each(['', 'session=', 'session=nonsense', `session=${btoa(JSON.stringify('A'.repeat(43)))}`])(
    'is asked for, with the way back, when the cookie is %j',
    async (cookie) => {
      const answer = await get(whoAmI, '/who?page=2', cookie);
      expect(answer.status).toBe(302);
      expect(answer.headers.get('Location')).toBe('/sign-in?next=%2Fwho%3Fpage%3D2');
    },
  );

  it('ends at once when the person is disabled', async () => {
    const { id, cookie } = await signedIn(['lead']);
    expect((await get(whoAmI, '/who', cookie)).status).toBe(200);
    await test.database('people').where({ id }).update({ disabled_at: new Date() });
    expect((await get(whoAmI, '/who', cookie)).status).toBe(302);
  });

  it('ends when it is revoked elsewhere', async () => {
    const { id, cookie } = await signedIn(['lead']);
    await test.database('sessions').where({ person_id: id }).update({ revoked_at: new Date() });
    expect((await get(whoAmI, '/who', cookie)).status).toBe(302);
  });

  it('ends with signing out, on the server and not only in the browser', async () => {
    const { id, cookie } = await signedIn(['lead']);
    const answer = await visit(
      { path: 'sign-out', ...signOutRoute },
      formRequest(`${site}/sign-out`, {}, { Cookie: cookie }),
    );
    expect(answer.headers.get('Location')).toBe('/sign-in');
    expect(answer.headers.getSetCookie()[0]).toMatch(/^session=; Max-Age=0;/);
    expect((await get(whoAmI, '/who', cookie)).status).toBe(302);
    expect(
      await test.database('audit_entries').where({ person_id: id }).orderBy('id').pluck('action'),
    ).toEqual(['sign-in', 'sign-out']);
  });

  it('ends 14 days after its last use', async () => {
    const { cookie } = await signedIn(['lead']);
    setClock('2026-03-16T07:59:59Z');
    expect((await get(whoAmI, '/who', cookie)).status).toBe(200);
    setClock('2026-03-30T07:59:58Z');
    expect((await get(whoAmI, '/who', cookie)).status).toBe(200);
    setClock('2026-04-13T07:59:58Z');
    expect((await get(whoAmI, '/who', cookie)).status).toBe(302);
  });

  it('ends 60 days after it began, however much it is used', async () => {
    const { cookie } = await signedIn(['lead']);
    for (const day of ['2026-03-15', '2026-03-28', '2026-04-10', '2026-04-23', '2026-05-01']) {
      setClock(`${day}T07:59:59Z`);
      expect((await get(whoAmI, '/who', cookie)).status).toBe(200);
    }
    setClock('2026-05-01T08:00:01Z');
    expect((await get(whoAmI, '/who', cookie)).status).toBe(302);
  });
});

describe('what a person may see', () => {
  function pageOf(siteId: string) {
    return {
      path: 'site',
      loader: ({ context, request }: Arguments) => {
        requireSite(requireViewer(context, request), siteId);
        return 'seen';
      },
    };
  }

  it('is limited to their sites for a technician, and for nobody who is more than that', async () => {
    const own = await addSite(test.database, 'Fenwick Baths');
    const other = await addSite(test.database, 'Tarn House');
    const technician = (await signedIn(['technician'], [own])).cookie;
    expect((await get(pageOf(own), '/site', technician)).status).toBe(200);
    expect((await get(pageOf(other), '/site', technician)).status).toBe(404);
    const both = (await signedIn(['technician', 'lead'], [own])).cookie;
    expect((await get(pageOf(other), '/site', both)).status).toBe(200);
    const nobody = (await signedIn([], [])).cookie;
    expect((await get(pageOf(own), '/site', nobody)).status).toBe(404);
  });

  it('depends on the role, refused in plain words', async () => {
    const page = {
      path: 'people',
      loader: ({ context, request }: Arguments) => requireRole(context, request, 'lead', 'admin'),
    };
    expect((await get(page, '/people', (await signedIn(['admin'])).cookie)).status).toBe(200);
    const refused = await get(page, '/people', (await signedIn(['technician', 'manager'])).cookie);
    expect(refused.status).toBe(403);
    expect(await refused.text()).toBe(
      'This needs the role of lead or admin. Ask your administrator if you should have it.',
    );
    expect((await get(page, '/people')).headers.get('Location')).toBe('/sign-in?next=%2Fpeople');
  });

  it.each<[Role[], string]>([
    [['technician'], '/log'],
    [['admin'], '/imports'],
    [['lead'], '/since'],
    [['manager'], '/since'],
    [['technician', 'lead'], '/since'],
    [['technician', 'admin'], '/log'],
  ])('begins, for %j, at %s', async (roles, first) => {
    const { cookie } = await signedIn(roles);
    expect((await get({ path: '/', ...home }, '/', cookie)).headers.get('Location')).toBe(first);
  });

  it('is nothing without a role, and says whom to ask', async () => {
    const { cookie } = await signedIn([]);
    const answer = await get({ path: '/', ...home }, '/', cookie);
    expect(answer.status).toBe(403);
    expect(await answer.text()).toContain('Ask your administrator');
  });
});

describe('a form from another site', () => {
  const signOut = { path: 'sign-out', ...signOutRoute };

  beforeEach(() => {
    vi.spyOn(console, 'warn').mockImplementation(() => undefined);
  });

  it.each<Record<string, string>>([
    { Origin: 'https://evil.example' },
    { Origin: 'null' },
    { Origin: 'http://intervale.test.evil.example' },
    { Origin: 'https://intervale.test' },
  ])('is refused and does nothing: %j', async (headers) => {
    const { cookie } = await signedIn(['lead']);
    const answer = await visit(signOut, formRequest(`${site}/sign-out`, {}, { ...headers, Cookie: cookie }));
    expect(answer.status).toBe(403);
    expect((await get(whoAmI, '/who', cookie)).status).toBe(200);
  });

  it('is told by Sec-Fetch-Site where there is no Origin', async () => {
    const request = new Request(`${site}/sign-out`, {
      method: 'POST',
      headers: { 'Sec-Fetch-Site': 'cross-site' },
    });
    expect((await visit(signOut, request)).status).toBe(403);
  });

  it('is not one from where people reach this site through a proxy', async () => {
    vi.stubEnv('APP_ORIGIN', 'https://intervale.example');
    const answer = await visit(
      signOut,
      formRequest('http://10.0.0.5:3000/sign-out', {}, { Origin: 'https://intervale.example' }),
    );
    expect(answer.status).toBe(302);
  });
});

describe('the theme', () => {
  const theme = { path: 'theme', ...themeRoute };

  it('is kept, and the page it was chosen on is shown again', async () => {
    const answer = await visit(
      theme,
      formRequest(`${site}/theme`, { theme: 'night', returnTo: '/log?tag=B-7' }),
    );
    expect(answer.headers.get('Location')).toBe('/log?tag=B-7');
    expect(answer.headers.getSetCookie()[0]).toContain('Max-Age=31536000');
  });

  it('leads to no other site and is one of three', async () => {
    const away = await visit(
      theme,
      formRequest(`${site}/theme`, { theme: 'light', returnTo: '//evil.example' }),
    );
    expect(away.headers.get('Location')).toBe('/');
    expect((await visit(theme, formRequest(`${site}/theme`, { theme: 'pink' }))).status).toBe(400);
  });
});

describe('every answer', () => {
  it('is kept by no cache and run, framed or sniffed by nobody', async () => {
    const { cookie } = await signedIn(['lead']);
    const { headers } = await get(whoAmI, '/who', cookie);
    expect(headers.get('Cache-Control')).toBe('private, no-store');
    expect(headers.get('Content-Security-Policy')).toBe("default-src 'none'; frame-ancestors 'none'");
    expect(headers.get('X-Content-Type-Options')).toBe('nosniff');
    expect(headers.get('Referrer-Policy')).toBe('same-origin');
    expect(headers.get('Strict-Transport-Security')).toBeNull();
  });

  it('that is a fault names itself to the page', async () => {
    const broken = { path: 'broken', loader: () => new Response(null, { status: 500 }) };
    expect((await get(broken, '/broken')).headers.getSetCookie()[0]).toMatch(
      /^fault=[A-Z0-9]{8}; Path=\/; Max-Age=300/,
    );
  });
});
