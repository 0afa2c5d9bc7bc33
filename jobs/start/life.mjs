/* global AbortController */
import { setInterval } from 'node:timers';
import { PlainError } from '../../db/local/plain-error.mjs';

/** npm hands a Ctrl-C on to us that the terminal has sent us already: one press, two signals. */
const SAME_PRESS_MS = 700;

/** Why a run ends early: a signal, or the process that started us has gone. */
export class Interrupted extends Error {
  /** @param {string} cause */
  constructor(cause) {
    super(`Interrupted by ${cause}`);
    this.name = 'Interrupted';
  }
}

/**
 * @typedef {object} Life the run of one command, from its start to the end of all it started
 * @property {AbortSignal} signal aborted by the first Ctrl-C, SIGTERM or SIGHUP
 * @property {AbortSignal} hurry aborted by the second
 * @property {(ending: () => Promise<void> | void) => void} onEnd what to undo at the end, latest first
 */

/** Under npm: end with it, also when it was killed and could tell nobody. @param {(cause: string) => void} interrupt */
function watchParent(interrupt) {
  if (!process.env.npm_lifecycle_event) return;
  const parent = process.ppid;
  setInterval(() => {
    if (process.ppid !== parent) interrupt('the end of npm');
  }, 1000).unref();
}

/** @param {unknown} error */
function report(error) {
  const text =
    error instanceof PlainError ? error.message : error instanceof Error ? error.stack : String(error);
  console.error(`\n${text}`);
}

/**
 * Runs a command. Whatever ends it (its own end, an error, a signal), everything registered with `onEnd` is
 * undone before the process exits.
 *
 * @param {(life: Life) => Promise<number>} command gives the exit code
 * @param {{ interruptedCode?: () => number, last?: () => void }} [options]
 *   `interruptedCode`: exit code after a signal, 130 unless given; `last`: called when all is undone, unless interrupted
 */
export async function live(command, { interruptedCode = () => 130, last } = {}) {
  const stop = new AbortController();
  const force = new AbortController();
  /** @type {(() => Promise<void> | void)[]} */
  const endings = [];
  let interruptedAt = 0;

  /** @param {string} cause */
  const interrupt = (cause) => {
    if (!interruptedAt) {
      interruptedAt = Date.now();
      console.log('\nStopping …');
      stop.abort(new Interrupted(cause));
    } else if (Date.now() - interruptedAt > SAME_PRESS_MS) force.abort();
  };
  for (const name of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(name, () => interrupt(name));
  watchParent(interrupt);
  // The terminal or the reader of a pipe may go before us: that must not keep us from stopping what we started.
  for (const stream of [process.stdout, process.stderr]) stream.on('error', () => {});

  let code = 1;
  try {
    code = await command({
      signal: stop.signal,
      hurry: force.signal,
      onEnd: (ending) => endings.push(ending),
    });
  } catch (error) {
    if (stop.signal.aborted) code = interruptedCode();
    else report(error);
  }
  for (const ending of endings.reverse()) {
    try {
      await ending();
    } catch (error) {
      report(error);
      code = 1;
    }
  }
  if (!stop.signal.aborted) last?.();
  process.exit(force.signal.aborted ? 130 : code);
}
