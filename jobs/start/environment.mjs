import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { keptSecret, localFolder } from '../../db/local/place.mjs';

/**
 * The environment that web and jobs run in: what is set stays, what is missing gets a value that works here.
 *
 * @param {string} root
 * @param {{ url: string, demo: boolean, port?: number, dev?: boolean }} options `demo` only on a private database
 * @param {NodeJS.ProcessEnv} [given]
 * @returns {NodeJS.ProcessEnv}
 */
export function serviceEnvironment(root, { url, demo, port = 3000, dev = false }, given = process.env) {
  /** @type {NodeJS.ProcessEnv} */
  const env = {
    ...given,
    DATABASE_URL: url,
    NODE_ENV: dev ? 'development' : 'production',
    PORT: String(port),
    APP_ORIGIN: given.APP_ORIGIN || `http://localhost:${port}`,
    SESSION_SECRET: given.SESSION_SECRET || keptSecret(join(localFolder(root), 'session-secret'), 32),
  };
  delete env.INTERVALE_DEMO;
  delete env.INTERVALE_DEMO_PEOPLE;
  if (demo) {
    env.INTERVALE_DEMO = '1';
    const people = join(root, 'fixtures', 'demo-people.json');
    if (existsSync(people)) env.INTERVALE_DEMO_PEOPLE = readFileSync(people, 'utf8');
    // The demo's passwords are public: it is offered to this machine only, unless HOST says otherwise.
    env.HOST = given.HOST || '127.0.0.1';
  }
  return env;
}
