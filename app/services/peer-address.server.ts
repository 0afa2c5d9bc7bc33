import { AsyncLocalStorage } from 'node:async_hooks';
import { subscribe } from 'node:diagnostics_channel';
import type { IncomingMessage } from 'node:http';

const peerAddresses = new AsyncLocalStorage<string | undefined>();

// The web server hands on what a request says, but not where it came from. Node announces each request before
// anybody handles it, so its connection's address can be kept for all that happens in its course.
subscribe('http.server.request.start', (message) => {
  const { request } = message as { request: IncomingMessage };
  peerAddresses.enterWith(request.socket.remoteAddress);
});

/** The address at the other end of the connection the present request came by; null outside of a request. */
export function peerAddress(): string | null {
  return peerAddresses.getStore() ?? null;
}
