import { readFileSync, readlinkSync, realpathSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { PlainError } from './plain-error.mjs';
import { isRunning } from './process-identity.mjs';

/** @typedef {{ pid: number, port: number, status: string }} Postmaster a server process, as it describes itself */

/**
 * Reads the lines of `postmaster.pid`: process, data folder, start, port, socket folder, address, memory,
 * status.
 *
 * @param {string} text
 * @returns {Postmaster | undefined} nothing while the file is half written
 */
export function parsePostmaster(text) {
  const lines = text.split('\n');
  const pid = Number(lines[0]);
  const port = Number(lines[3]);
  if (!Number.isInteger(pid) || pid <= 0 || !Number.isInteger(port) || port <= 0) return undefined;
  return { pid, port, status: (lines[7] ?? '').trim() };
}

/** Whether a process works in this data folder, as every server does. @param {number} pid @param {string} data */
function worksIn(pid, data) {
  try {
    return readlinkSync(`/proc/${pid}/cwd`) === realpathSync(data);
  } catch {
    // No /proc here, or the process has just gone: the caller looks again.
    return isRunning(pid) && process.platform !== 'linux';
  }
}

/**
 * The server that runs on a data folder, if one does. A `postmaster.pid` whose process is now something
 * else (ids are used again after a restart of the machine) would keep PostgreSQL from starting: it is removed.
 *
 * @param {string} data
 * @returns {Postmaster | undefined}
 */
export function runningPostmaster(data) {
  const file = join(data, 'postmaster.pid');
  let postmaster;
  try {
    postmaster = parsePostmaster(readFileSync(file, 'utf8'));
  } catch {
    return undefined;
  }
  if (!postmaster) return undefined;
  if (isRunning(postmaster.pid) && worksIn(postmaster.pid, data)) return postmaster;
  if (isRunning(postmaster.pid)) rmSync(file, { force: true });
  return undefined;
}

/**
 * Waits until a process has gone.
 *
 * @param {number} pid
 * @param {number} waitMs
 * @param {AbortSignal} [hurry] ends the wait early
 */
async function gone(pid, waitMs, hurry) {
  const until = Date.now() + waitMs;
  while (isRunning(pid)) {
    if (Date.now() > until || hurry?.aborted) return false;
    await sleep(30);
  }
  return true;
}

/**
 * Stops a server: fast shutdown first (open transactions roll back, data is written out); at once when
 * that takes over half a minute or `hurry` says so.
 *
 * @param {number} pid
 * @param {AbortSignal} [hurry]
 */
export async function stopPostmaster(pid, hurry) {
  /** @type {[NodeJS.Signals, number, AbortSignal | undefined][]} */
  const steps = [
    ['SIGINT', 30_000, hurry],
    ['SIGQUIT', 6_000, undefined],
  ];
  for (const [signal, waitMs, early] of steps) {
    try {
      process.kill(pid, signal);
    } catch {
      return;
    }
    if (await gone(pid, waitMs, early)) return;
  }
  throw new PlainError(`PostgreSQL (process ${pid}) does not stop.`);
}
