import { execFile, spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { promisify } from 'node:util';
import type { Browser, Page } from '@playwright/test';
import { freePort } from '../../../db/local/cluster.mjs';
import type { Database } from '../../../db/connection';
import { SERVE_BUILD, answering } from '../../../jobs/start/web.mjs';
import { password } from '../../support/people';
import { createTestDatabase } from '../../support/test-database';

/** The built product on an empty database of its own, at a moment of one's choice. */
export interface OwnServer {
  readonly origin: string;
  readonly database: Database;
  /** Serves on, at another moment. */
  moveTo(now: string): Promise<void>;
  /** The nightly job as of a day; gives what it said. */
  night(asOf: string): Promise<string>;
  /** A page of a browser in which the person is signed in. */
  signIn(browser: Browser, email: string): Promise<Page>;
  stop(): Promise<void>;
}

/** @param now ISO instant that the product takes for the present. */
export async function startOwnServer(now: string): Promise<OwnServer> {
  const test = await createTestDatabase();
  const port = await freePort();
  const origin = `http://localhost:${port}`;
  const env = {
    ...process.env,
    DATABASE_URL: test.url,
    NODE_ENV: 'production',
    INTERVALE_TEST: '1',
    HOST: '127.0.0.1',
    PORT: String(port),
    APP_ORIGIN: origin,
    SESSION_SECRET: 'a secret of this browser test alone, 40 long',
  };
  let web: ChildProcess | undefined;

  const serve = async (moment: string) => {
    const child = spawn(process.execPath, SERVE_BUILD, {
      env: { ...env, INTERVALE_NOW: moment },
      stdio: ['ignore', 'ignore', 'inherit'],
    });
    web = child;
    await answering('127.0.0.1', port, AbortSignal.timeout(30_000));
  };
  const stopServing = async () => {
    if (web === undefined || web.exitCode !== null) return;
    web.kill('SIGTERM');
    await once(web, 'exit');
  };

  await serve(now);
  return {
    origin,
    database: test.database,
    async moveTo(moment) {
      await stopServing();
      await serve(moment);
    },
    async night(asOf) {
      const args = ['node_modules/tsx/dist/cli.mjs', 'jobs/run-job.ts', 'nightly', '--as-of', asOf];
      const { stdout, stderr } = await promisify(execFile)(process.execPath, args, { env });
      return stderr + stdout;
    },
    async signIn(browser, email) {
      const context = await browser.newContext({ baseURL: origin, locale: 'en-GB' });
      const page = await context.newPage();
      await page.goto('/sign-in');
      await page.getByLabel('E-mail').fill(email);
      await page.getByLabel('Password').fill(password);
      await page.getByRole('button', { name: 'Sign in' }).click();
      await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
      return page;
    },
    async stop() {
      await stopServing();
      await test.drop();
    },
  };
}
