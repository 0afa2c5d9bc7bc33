import { linkSync, mkdirSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { PlainError } from './plain-error.mjs';
import { identityRuns, processIdentity } from './process-identity.mjs';

/** @param {unknown} error */
const codeOf = (error) => /** @type {NodeJS.ErrnoException} */ (error).code;

/**
 * Takes the lock if nobody who still lives holds it.
 *
 * @param {string} file
 */
function tryLock(file) {
  const mine = `${file}.${process.pid}`;
  writeFileSync(mine, processIdentity(), { mode: 0o600 });
  try {
    // A link appears with its content, so nobody reads a lock whose holder is not yet written.
    linkSync(mine, file);
    return true;
  } catch (error) {
    if (codeOf(error) !== 'EEXIST') throw error;
  } finally {
    rmSync(mine, { force: true });
  }
  try {
    if (!identityRuns(readFileSync(file, 'utf8'))) rmSync(file, { force: true });
  } catch (error) {
    if (codeOf(error) !== 'ENOENT') throw error;
  }
  return false;
}

/**
 * Runs a task while holding a lock file; a lock left by a process that died is taken over.
 *
 * @template T
 * @param {string} file
 * @param {() => Promise<T>} task
 * @param {{ signal?: AbortSignal, waitMs?: number }} [options]
 * @returns {Promise<T>}
 * @throws {PlainError} when another living process holds it longer than `waitMs` (5 minutes)
 */
export async function withLock(file, task, { signal, waitMs = 300_000 } = {}) {
  const until = Date.now() + waitMs;
  while (!tryLock(file)) {
    signal?.throwIfAborted();
    if (Date.now() > until) throw new PlainError(`Another process holds ${file} and does not finish.`);
    await sleep(50);
  }
  try {
    return await task();
  } finally {
    rmSync(file, { force: true });
  }
}

/**
 * The processes that use something shared, kept as one file each in a folder. Change it under a lock only.
 *
 * @param {string} folder
 */
export function userRegister(folder) {
  mkdirSync(folder, { recursive: true, mode: 0o700 });
  const mine = join(folder, String(process.pid));
  return {
    add: () => writeFileSync(mine, processIdentity(), { mode: 0o600 }),
    remove: () => rmSync(mine, { force: true }),
    /** Whether another living process is in the register; those that died are struck out. */
    hasOthers() {
      let found = false;
      for (const name of readdirSync(folder)) {
        const file = join(folder, name);
        if (file === mine) continue;
        if (identityRuns(readFileSync(file, 'utf8'))) found = true;
        else rmSync(file, { force: true });
      }
      return found;
    },
  };
}
