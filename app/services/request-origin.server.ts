import { peerAddress } from './peer-address.server';
import { settings } from './settings.server';

/** Scheme, host and port people use to reach this page: APP_ORIGIN, or what a trusted proxy or the request says. */
export function publicOrigin(request: Request): string {
  const { appOrigin, trustedProxies } = settings();
  if (appOrigin) return appOrigin;
  const url = new URL(request.url);
  if (trustedProxies > 0) {
    const scheme = lastOf(request.headers.get('X-Forwarded-Proto'));
    const host = lastOf(request.headers.get('X-Forwarded-Host')) ?? url.host;
    const seen = `${scheme === 'https' ? 'https' : url.protocol.slice(0, -1)}://${host}`;
    if (URL.canParse(seen)) return new URL(seen).origin;
  }
  return url.origin;
}

/** Whether people reach this page over https. */
export function isSecure(request: Request): boolean {
  return publicOrigin(request).startsWith('https:');
}

/**
 * Whether a page of this site sent the request, so that no other site can act in somebody's name. Programs
 * that are not browsers send no Origin, and carry nobody's cookies by accident: they pass.
 */
export function isFromOwnSite(request: Request): boolean {
  const origin = request.headers.get('Origin');
  if (origin !== null) return origin === publicOrigin(request) || origin === new URL(request.url).origin;
  const site = request.headers.get('Sec-Fetch-Site');
  return site === null || site === 'same-origin' || site === 'none';
}

/**
 * The network address of the client, null when unknown. X-Forwarded-For counts only as far as trusted
 * proxies wrote it: each adds the address it saw at the end, and what stands before theirs is hearsay.
 */
export function clientAddress(request: Request): string | null {
  const { trustedProxies } = settings();
  if (trustedProxies === 0) return peerAddress();
  const hops = listOf(request.headers.get('X-Forwarded-For'));
  return hops.at(-Math.min(trustedProxies, hops.length)) ?? peerAddress();
}

function listOf(header: string | null): string[] {
  return (header ?? '')
    .split(',')
    .map((part) => part.trim())
    .filter((part) => part !== '');
}

function lastOf(header: string | null): string | undefined {
  return listOf(header).at(-1);
}
