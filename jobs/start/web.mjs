import { setTimeout as sleep } from 'node:timers/promises';

/** What node runs to serve the built product. */
export const SERVE_BUILD = ['node_modules/@react-router/serve/bin.js', './build/server/index.js'];

/**
 * Waits until the web server answers, with whatever.
 *
 * @param {string | undefined} host that it listens on
 * @param {number} port
 * @param {AbortSignal} signal
 */
export async function answering(host, port, signal) {
  const name = !host || host === '0.0.0.0' || host === '::' ? '127.0.0.1' : host;
  const address = `http://${name.includes(':') ? `[${name}]` : name}:${port}/`;
  for (;;) {
    signal.throwIfAborted();
    const answer = await fetch(address, { redirect: 'manual', signal }).catch(() => undefined);
    if (answer) return;
    await sleep(100);
  }
}
