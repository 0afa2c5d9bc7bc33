import { expect, it } from 'vitest';
import { settings } from '~/services/settings.server';

const secret = 'a'.repeat(32);

it('needs nothing outside production', () => {
  expect(settings({ NODE_ENV: 'development' })).toMatchObject({
    appOrigin: undefined,
    trustedProxies: 0,
    demo: false,
    demoPeople: [],
  });
  expect(settings({ NODE_ENV: 'development' }).sessionSecret.length).toBeGreaterThanOrEqual(32);
});

it.each([undefined, '', 'too short to sign with'])(
  'needs a long SESSION_SECRET in production, not %j',
  (given) => {
    expect(() => settings({ NODE_ENV: 'production', SESSION_SECRET: given })).toThrow(/SESSION_SECRET must/);
    expect(settings({ NODE_ENV: 'production', SESSION_SECRET: secret }).sessionSecret).toBe(secret);
  },
);

it('takes no NODE_ENV for production', () => {
  expect(() => settings({})).toThrow(/SESSION_SECRET must/);
});

it('reads the origin out of APP_ORIGIN, and nothing that is not http', () => {
  const origin = (APP_ORIGIN: string) => settings({ SESSION_SECRET: secret, APP_ORIGIN }).appOrigin;
  expect(origin('https://intervale.example/')).toBe('https://intervale.example');
  expect(origin('http://10.0.0.5:3000/some/path')).toBe('http://10.0.0.5:3000');
  expect(() => origin('intervale.example')).toThrow(/APP_ORIGIN/);
  expect(() => origin('ftp://intervale.example')).toThrow(/APP_ORIGIN/);
});

it('never shows a value that is wrong', () => {
  expect(() => settings({ SESSION_SECRET: 'hunter2' })).toThrow(/^(?!.*hunter2)/);
  expect(() => settings({ SESSION_SECRET: secret, INTERVALE_DEMO_PEOPLE: '[{"password":"hunter2"' })).toThrow(
    /INTERVALE_DEMO_PEOPLE is not JSON$/,
  );
});

it('shows demo people in demo mode alone', () => {
  const people = [{ name: 'Ada', role: 'lead', email: 'lead@larkmoor.example', password: 'open' }];
  const environment = { SESSION_SECRET: secret, INTERVALE_DEMO_PEOPLE: JSON.stringify(people) };
  expect(settings(environment).demoPeople).toEqual([]);
  expect(settings({ ...environment, INTERVALE_DEMO: '1' }).demoPeople).toEqual(people);
});

it.each(['yes', '-1', '1.5'])('counts trusted proxies in whole numbers, not %j', (given) => {
  expect(() => settings({ SESSION_SECRET: secret, INTERVALE_TRUST_PROXY: given })).toThrow(
    /INTERVALE_TRUST_PROXY/,
  );
});
