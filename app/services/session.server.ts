import { createHash, randomBytes } from 'node:crypto';
import { createCookie } from 'react-router';
import { createSession, extendSession, findLiveSession, revokeSession } from '~/models/sessions.server';
import type { Person } from '~/models/people.server';
import type { Database } from '../../db/connection';
import { now } from './clock.server';
import { isSecure } from './request-origin.server';
import type { Viewer } from './viewer.server';

const minute = 60_000;
const day = 24 * 60 * minute;

/** A session ends when it was not used for this long… */
const idleMs = 14 * day;
/** …and in any case this long after it began. */
const absoluteMs = 60 * day;
/** How stale `last_seen_at` may grow before it is written again. */
const touchMs = 5 * minute;

/** 256 random bits in base64url. */
const tokenPattern = /^[\w-]{43}$/;

/** The cookie holds nothing but the token; only the token's hash is stored. The server decides when it ends. */
function sessionCookie(request: Request) {
  const secure = isSecure(request);
  // With the __Host- prefix a browser takes the cookie from this very host alone, over https alone.
  return createCookie(secure ? '__Host-session' : 'session', {
    path: '/',
    httpOnly: true,
    sameSite: 'lax',
    secure,
    maxAge: absoluteMs / 1000,
  });
}

/** The person whose session the request carries; null when it carries none that is alive. */
export async function loadViewer(db: Database, request: Request): Promise<Viewer | null> {
  const tokenHash = await readTokenHash(request);
  if (!tokenHash) return null;
  const moment = now();
  const session = await findLiveSession(db, tokenHash, moment);
  if (!session) return null;
  if (moment.getTime() - session.lastSeenAt.getTime() > touchMs) {
    await extendSession(db, tokenHash, moment, expiry(session.createdAt, moment));
  }
  return toViewer(session.person);
}

/**
 * Begins a session for a person and ends the one the request came with, so that a token known before
 * signing in is worth nothing after it.
 *
 * @returns the Set-Cookie header.
 */
export async function startSession(db: Database, request: Request, personId: string): Promise<string> {
  await endSession(db, request);
  const token = randomBytes(32).toString('base64url');
  const createdAt = now();
  await createSession(db, {
    tokenHash: hashToken(token),
    personId,
    createdAt,
    expiresAt: expiry(createdAt, createdAt),
    userAgent: request.headers.get('User-Agent')?.slice(0, 400) ?? null,
  });
  return sessionCookie(request).serialize(token);
}

/**
 * Ends the session the request carries.
 *
 * @returns the Set-Cookie header that takes the cookie away, and the id of the person whose session it was.
 */
export async function endSession(
  db: Database,
  request: Request,
): Promise<{ setCookie: string; personId: string | undefined }> {
  const tokenHash = await readTokenHash(request);
  const personId = tokenHash && (await revokeSession(db, tokenHash, now()));
  return { setCookie: await sessionCookie(request).serialize('', { maxAge: 0 }), personId };
}

function toViewer({ siteIds, ...person }: Person): Viewer {
  const seesAllSites = person.roles.some((role) => role !== 'technician');
  return { ...person, siteIds: seesAllSites ? 'all' : siteIds };
}

function expiry(createdAt: Date, seenAt: Date): Date {
  return new Date(Math.min(seenAt.getTime() + idleMs, createdAt.getTime() + absoluteMs));
}

async function readTokenHash(request: Request): Promise<Buffer | undefined> {
  const token: unknown = await sessionCookie(request).parse(request.headers.get('Cookie'));
  return typeof token === 'string' && tokenPattern.test(token) ? hashToken(token) : undefined;
}

function hashToken(token: string): Buffer {
  return createHash('sha256').update(token).digest();
}
