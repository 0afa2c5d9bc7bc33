import { spawn } from 'node:child_process';
import {
  chownSync,
  closeSync,
  existsSync,
  openSync,
  readFileSync,
  renameSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { createServer } from 'node:net';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { PlainError } from './plain-error.mjs';
import { runningPostmaster, stopPostmaster } from './postmaster.mjs';

/**
 * @typedef {import('./place.mjs').ServerUser} ServerUser
 * @typedef {object} Cluster
 * @property {string} folder what holds the data folder; it belongs to the server's user
 * @property {string} binaries folder of `initdb` and `postgres`
 * @property {ServerUser | undefined} user whom to run as, when that is not ourselves
 * @property {string} password
 * @property {string} logFile
 * @property {boolean} throwaway data that need not survive: written without waiting for the disk
 */

export const DATABASE_USER = 'intervale';
export const DATABASE_NAME = 'intervale';

/** @param {{ folder: string }} cluster */
export const dataFolder = (cluster) => join(cluster.folder, 'data');

/** Nothing of the caller's PG… variables may reach the server. */
const serverEnvironment = () => ({ PATH: process.env.PATH ?? '/usr/bin:/bin', LC_ALL: 'C.UTF-8' });

/**
 * Runs one of PostgreSQL's programs to its end.
 *
 * @param {Cluster} cluster
 * @param {string} program
 * @param {string[]} args
 * @param {{ input?: string, signal?: AbortSignal }} [options]
 * @throws {PlainError} with what it printed
 */
function runProgram(cluster, program, args, { input = '', signal } = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(join(cluster.binaries, program), args, {
      cwd: '/',
      env: serverEnvironment(),
      stdio: 'pipe',
      detached: true,
      ...cluster.user,
    });
    let output = '';
    child.stdout.on('data', (chunk) => (output += chunk));
    child.stderr.on('data', (chunk) => (output += chunk));
    child.stdin.on('error', () => {});
    child.stdin.end(input);
    const abort = () => child.kill('SIGTERM');
    signal?.addEventListener('abort', abort, { once: true });
    child.on('error', reject);
    child.on('close', (code) => {
      signal?.removeEventListener('abort', abort);
      if (signal?.aborted) reject(signal.reason);
      else if (code === 0) resolve(undefined);
      else reject(new PlainError(`${program} failed:\n${output.trim()}`));
    });
  });
}

/**
 * Makes the data folder with its one role and one database, under another name until it is whole: what an
 * interrupted start leaves behind is never taken for a database.
 *
 * @param {Cluster} cluster
 * @param {AbortSignal} [signal]
 */
export async function initialise(cluster, signal) {
  const draft = join(cluster.folder, 'data.new');
  const passwordFile = join(cluster.folder, 'password');
  rmSync(draft, { recursive: true, force: true });
  rmSync(passwordFile, { force: true });
  try {
    writeFileSync(passwordFile, `${cluster.password}\n`, { mode: 0o600, flag: 'wx' });
    if (cluster.user) chownSync(passwordFile, cluster.user.uid, cluster.user.gid);
    const options = [`--pgdata=${draft}`, `--username=${DATABASE_USER}`, `--pwfile=${passwordFile}`];
    options.push('--auth=scram-sha-256', '--encoding=UTF8', '--locale=C.UTF-8');
    if (cluster.throwaway) options.push('--no-sync');
    await runProgram(cluster, 'initdb', options, { signal });
    await runProgram(cluster, 'postgres', ['--single', '-D', draft, 'postgres'], {
      input: `create database ${DATABASE_NAME};\n`,
      signal,
    });
    renameSync(draft, dataFolder(cluster));
  } finally {
    rmSync(passwordFile, { force: true });
  }
}

/** @returns {Promise<number>} a port on loopback that nobody listens on at this moment */
export function freePort() {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.on('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address();
      const port = typeof address === 'object' && address ? address.port : 0;
      probe.close(() => resolve(port));
    });
  });
}

/** @param {Cluster} cluster @param {number} port */
function serverArguments(cluster, port) {
  /** @type {Record<string, string | number>} */
  const settings = {
    listen_addresses: '127.0.0.1',
    port,
    // A socket's path may be no longer than 107 bytes, which a deep clone exceeds.
    unix_socket_directories: '',
    timezone: 'UTC',
    log_timezone: 'UTC',
  };
  if (cluster.throwaway)
    Object.assign(settings, { fsync: 'off', synchronous_commit: 'off', full_page_writes: 'off' });
  return [
    '-D',
    dataFolder(cluster),
    ...Object.entries(settings).flatMap(([name, value]) => ['-c', `${name}=${value}`]),
  ];
}

/**
 * Starts the server, in a session of its own, so that a Ctrl-C meant for us does not reach it first.
 *
 * @param {Cluster} cluster
 * @param {AbortSignal} [signal]
 * @returns {Promise<import('./postmaster.mjs').Postmaster | undefined>} nothing when it ended at once
 */
async function launch(cluster, signal) {
  const log = openSync(cluster.logFile, 'w', 0o600);
  const child = spawn(join(cluster.binaries, 'postgres'), serverArguments(cluster, await freePort()), {
    cwd: '/',
    env: serverEnvironment(),
    stdio: ['ignore', log, log],
    detached: true,
    ...cluster.user,
  });
  closeSync(log);
  let ended = false;
  child.on('error', () => (ended = true));
  child.on('exit', () => (ended = true));
  child.unref();
  while (!ended) {
    const postmaster = runningPostmaster(dataFolder(cluster));
    if (postmaster?.pid === child.pid && postmaster?.status === 'ready') return postmaster;
    if (signal?.aborted) {
      if (child.pid) await stopPostmaster(child.pid);
      signal.throwIfAborted();
    }
    await sleep(30);
  }
  return undefined;
}

/**
 * Starts the server and waits until it takes connections.
 *
 * @param {Cluster} cluster
 * @param {AbortSignal} [signal]
 * @throws {PlainError} with the end of the server's log when it does not come up
 */
export async function startServer(cluster, signal) {
  for (let tries = 0; tries < 3; tries += 1) {
    const postmaster = await launch(cluster, signal);
    if (postmaster) return postmaster;
    // Somebody may have taken the port between our look and the server's.
    if (!/in use/i.test(readFileSync(cluster.logFile, 'utf8'))) break;
  }
  const log = existsSync(cluster.logFile) ? readFileSync(cluster.logFile, 'utf8') : '';
  throw new PlainError(
    `PostgreSQL did not start. The end of ${cluster.logFile}:\n${log.trim().split('\n').slice(-8).join('\n')}`,
  );
}
