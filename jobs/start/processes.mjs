import { spawn } from 'node:child_process';
import { createInterface } from 'node:readline';
import { setTimeout as sleep } from 'node:timers/promises';
import { PlainError } from '../../db/local/plain-error.mjs';

/** A process left without its group's leader is still reached. @param {number | undefined} pid @param {NodeJS.Signals} signal */
function signalGroup(pid, signal) {
  try {
    if (pid) process.kill(-pid, signal);
  } catch {
    // The group has gone.
  }
}

/**
 * Runs a program to its end, its output shown as it comes. An abort ends it and what it started.
 *
 * @param {string} program
 * @param {string[]} args
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv, signal: AbortSignal, quiet?: boolean }} options
 *   `quiet`: keep the output back unless the program fails
 * @returns {Promise<number>} its exit code; 1 when a signal ended it
 */
export async function run(program, args, { cwd, env = process.env, signal, quiet = false }) {
  signal.throwIfAborted();
  // A group of its own: the abort below reaches all of it, however it was asked for.
  const child = spawn(program, args, {
    cwd,
    env,
    detached: true,
    stdio: ['ignore', quiet ? 'pipe' : 'inherit', quiet ? 'pipe' : 'inherit'],
  });
  let kept = '';
  for (const stream of [child.stdout, child.stderr]) stream?.on('data', (chunk) => (kept += chunk));
  const abort = () => {
    // As the terminal would: test runners take down their browsers and workers on this signal alone.
    signalGroup(child.pid, 'SIGINT');
    setTimeout(() => signalGroup(child.pid, 'SIGKILL'), 8000).unref();
  };
  signal.addEventListener('abort', abort, { once: true });
  try {
    const code = await new Promise((resolve, reject) => {
      child.on('error', (error) => reject(new PlainError(`${program} cannot be run: ${error.message}`)));
      child.on('close', (exit) => resolve(exit ?? 1));
    });
    signal.throwIfAborted();
    if (quiet && code !== 0) process.stderr.write(kept);
    return code;
  } finally {
    signal.removeEventListener('abort', abort);
  }
}

/**
 * @typedef {object} Service a program that runs as long as we do
 * @property {Promise<string>} ended resolves, when it ends, with how
 * @property {() => Promise<void>} stop
 */

/**
 * Starts a Node program that serves until it is stopped. Its lines are shown with its name before them. It
 * ends by itself when we are killed.
 *
 * @param {string} name
 * @param {string[]} args of node
 * @param {{ cwd: string, env: NodeJS.ProcessEnv, hurry: AbortSignal, quiet?: boolean }} options
 *   `hurry`: cuts its last work short; `quiet`: show only what it writes to its standard error
 * @returns {Service}
 */
export function startService(name, args, { cwd, env, hurry, quiet = false }) {
  const tether = new URL('./tether.mjs', import.meta.url).href;
  const child = spawn(process.execPath, ['--import', tether, ...args], {
    cwd,
    env,
    detached: true,
    stdio: ['ignore', quiet ? 'ignore' : 'pipe', 'pipe', 'ipc'],
  });
  for (const [from, to] of /** @type {const} */ ([
    [child.stdout, process.stdout],
    [child.stderr, process.stderr],
  ])) {
    if (from) createInterface({ input: from }).on('line', (line) => line && to.write(`[${name}] ${line}\n`));
  }
  let hasEnded = false;
  /** @type {Promise<string>} */
  const ended = new Promise((resolve) => {
    child.on('error', (error) => resolve(error.message));
    child.on('exit', (code, signal) =>
      resolve(signal ? `was ended by ${signal}` : `ended with exit code ${code}`),
    );
  });
  void ended.then(() => (hasEnded = true));
  const force = () => signalGroup(child.pid, 'SIGKILL');
  return {
    ended,
    async stop() {
      signalGroup(child.pid, 'SIGTERM');
      hurry.addEventListener('abort', force, { once: true });
      if (hurry.aborted) force();
      for (let waitedMs = 0; !hasEnded && waitedMs < 8000; waitedMs += 50) await sleep(50);
      force();
      await ended;
    },
  };
}
