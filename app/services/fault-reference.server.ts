import { randomInt } from 'node:crypto';
import { createContext } from 'react-router';
import type { RequestContext } from './viewer.server';

/** Set once a request by the root middleware. */
export const faultReferenceContext = createContext<string | null>(null);

/** Letters and digits nobody mixes up when reading them out. */
const alphabet = 'ACDEFGHJKLMNPQRTUVWXY34679';

/** A short name for one request: a fault is logged under it and the page shows it, so that the two can be matched. */
export function makeFaultReference(): string {
  return Array.from({ length: 8 }, () => alphabet[randomInt(alphabet.length)]).join('');
}

/**
 * Writes a fault to the log under the request's reference. Only path and stack are written: query strings,
 * forms and the details a database adds to its errors may hold what is nobody's to read.
 */
export function logFault(error: unknown, request: Request, context: RequestContext): void {
  const reference = context.get(faultReferenceContext) ?? '-';
  const { pathname } = new URL(request.url);
  const account = error instanceof Error ? (error.stack ?? error.message) : String(error);
  console.error(`fault ${reference} ${request.method} ${pathname}\n${account}`);
}

/** Carries the reference to pages that are rendered in the browser, where nothing else of the answer arrives. */
export function faultCookie(reference: string): string {
  return `fault=${reference}; Path=/; Max-Age=300; SameSite=Lax`;
}
