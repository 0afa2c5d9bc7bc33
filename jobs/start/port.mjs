import { connect, createServer } from 'node:net';
import { PlainError } from '../../db/local/plain-error.mjs';

/**
 * The port to serve on.
 *
 * @param {string | undefined} text value of PORT
 * @throws {PlainError} when it is not a port number
 */
export function parsePort(text) {
  const trimmed = text?.trim();
  if (!trimmed) return 3000;
  const port = Number(trimmed);
  if (/^\d+$/.test(trimmed) && port >= 1 && port <= 65535) return port;
  throw new PlainError(`PORT is "${text}"; it must be a number from 1 to 65535.`);
}

/** @param {number} port @param {string | undefined} host @returns {Promise<string | undefined>} why it cannot be had */
function tryListen(port, host) {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.on('error', (error) => resolve(/** @type {NodeJS.ErrnoException} */ (error).code ?? error.message));
    probe.listen(port, host, () => probe.close(() => resolve(undefined)));
  });
}

/** @param {number} port @param {string} host @returns {Promise<boolean>} whether anybody answers there */
function answers(port, host) {
  return new Promise((resolve) => {
    const socket = connect({ port, host, timeout: 1000 });
    /** @param {boolean} result */
    const end = (result) => {
      socket.destroy();
      resolve(result);
    };
    socket.on('connect', () => end(true));
    socket.on('error', () => end(false));
    socket.on('timeout', () => end(false));
  });
}

/**
 * Makes sure that the port can be had, and that `localhost` on it will be us: another program may hold only
 * one of the two loopback addresses.
 *
 * @param {number} port
 * @param {string | undefined} host
 * @throws {PlainError} naming the port and the variable that changes it
 */
export async function assertPortFree(port, host) {
  const reason = await tryListen(port, host);
  const busy =
    reason === 'EADDRINUSE' ||
    (!reason && ((await answers(port, '127.0.0.1')) || (await answers(port, '::1'))));
  if (busy) {
    throw new PlainError(
      `Port ${port} is taken by another program. Set PORT to serve on another: PORT=${port + 1} npm start`,
    );
  }
  if (reason === 'EACCES')
    throw new PlainError(`This user may not serve on port ${port}. Set PORT to another, 1024 or above.`);
  if (reason)
    throw new PlainError(
      `HOST ${host ?? ''} with port ${port} cannot be served on (${reason}). Set HOST or PORT.`,
    );
}
