// npm start: from a fresh clone to a running product, and at the end back to nothing running.
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { fileURLToPath } from 'node:url';
import { PlainError } from '../../db/local/plain-error.mjs';
import { ensureBuild } from './build.mjs';
import { migrate, obtainDatabase } from './database.mjs';
import { serviceEnvironment } from './environment.mjs';
import { live } from './life.mjs';
import { assertNodeVersion } from './node-version.mjs';
import { ensurePackages } from './packages.mjs';
import { assertPortFree, parsePort } from './port.mjs';
import { startService } from './processes.mjs';
import { SERVE_BUILD, answering } from './web.mjs';

/** @typedef {import('./life.mjs').Life} Life */

const root = fileURLToPath(new URL('../..', import.meta.url));
const dev = process.argv.includes('--dev');
let isUp = false;

/** @param {number} port */
function webArguments(port) {
  if (!dev) return SERVE_BUILD;
  const host = process.env.HOST ? ['--host', process.env.HOST] : [];
  return ['node_modules/@react-router/dev/bin.js', 'dev', '--port', String(port), '--strictPort', ...host];
}

/** Rejects when one of the things we started ends by itself. @param {[string, Promise<string>][]} parts */
function anyEnding(parts) {
  return Promise.race(
    parts.map(async ([name, ended]) => {
      throw new PlainError(`${name} ${await ended}: everything else is stopped too.`);
    }),
  );
}

/** @param {AbortSignal} signal @returns {Promise<never>} */
function aborted(signal) {
  return new Promise((_, reject) =>
    signal.addEventListener('abort', () => reject(signal.reason), { once: true }),
  );
}

/** @param {{ isRunning: () => boolean }} server @returns {Promise<string>} */
async function serverEnded(server) {
  while (server.isRunning()) await sleep(1000, undefined, { ref: false });
  return 'ended';
}

function printSignIns() {
  const file = join(root, 'fixtures', 'demo-people.json');
  if (!existsSync(file)) return;
  /** @type {{ role: string, email: string, password: string, name: string }[]} */
  const people = JSON.parse(readFileSync(file, 'utf8'));
  /** @param {'email' | 'password'} field */
  const widest = (field) => Math.max(...people.map((person) => person[field].length));
  console.log('\nDemo sign-ins');
  for (const { role, email, password, name } of people) {
    console.log(
      `  ${role.padEnd(11)} ${email.padEnd(widest('email'))}  ${password.padEnd(widest('password'))}  ${name}`,
    );
  }
}

/** @param {Life} life */
async function start(life) {
  assertNodeVersion();
  const port = parsePort(process.env.PORT);
  const demo = !process.env.DATABASE_URL;
  await assertPortFree(port, process.env.HOST || (demo ? '127.0.0.1' : undefined));
  await ensurePackages(root, life.signal);
  const { url, server } = await obtainDatabase(root, life);
  await migrate(root, url, { signal: life.signal, demo });
  if (!dev) await ensureBuild(root, life.signal);

  const env = serviceEnvironment(root, { url, demo, port, dev });
  const options = { cwd: root, env, hurry: life.hurry };
  const web = startService('web', webArguments(port), options);
  const jobs = startService('jobs', ['--import', 'tsx', 'jobs/scheduler.ts'], options);
  life.onEnd(async () => {
    await Promise.all([web.stop(), jobs.stop()]);
  });
  /** @type {[string, Promise<string>][]} */
  const parts = [
    ['The web server', web.ended],
    ['The job scheduler', jobs.ended],
  ];
  if (server) parts.push(['PostgreSQL', serverEnded(server)]);
  const ending = Promise.race([anyEnding(parts), aborted(life.signal)]);

  await Promise.race([answering(env.HOST, port, life.signal), ending]);
  isUp = true;
  console.log(`\nIntervale is ready: ${env.APP_ORIGIN}`);
  if (demo) printSignIns();
  console.log('\nCtrl-C stops it, with everything it started.\n');
  await ending;
  return 0;
}

// A product that ran and was asked to stop has done well; a start broken off has not.
await live(start, { interruptedCode: () => (isUp ? 0 : 130) });
