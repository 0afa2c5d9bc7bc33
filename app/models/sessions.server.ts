import { z } from 'zod';
import type { Database } from '../../db/connection';
import { personColumns, toPerson, type Person } from './people.server';

/** A session that has neither ended nor been revoked, of a person who is not disabled. */
export interface LiveSession {
  person: Person;
  createdAt: Date;
  lastSeenAt: Date;
}

const times = z.object({ session_created_at: z.date(), last_seen_at: z.date() });

/** Stores a session under the hash of its token. */
export async function createSession(
  db: Database,
  session: {
    tokenHash: Buffer;
    personId: string;
    createdAt: Date;
    expiresAt: Date;
    userAgent: string | null;
  },
): Promise<void> {
  await db('sessions').insert({
    token_hash: session.tokenHash,
    person_id: session.personId,
    created_at: session.createdAt,
    last_seen_at: session.createdAt,
    expires_at: session.expiresAt,
    user_agent: session.userAgent,
  });
}

/** The session of this token and its person; undefined once it has ended, was revoked, or the person is disabled. */
export async function findLiveSession(
  db: Database,
  tokenHash: Buffer,
  at: Date,
): Promise<LiveSession | undefined> {
  const row: unknown = await db('sessions')
    .join('people', 'people.id', 'sessions.person_id')
    .where('sessions.token_hash', tokenHash)
    .where('sessions.expires_at', '>', at)
    .whereNull('sessions.revoked_at')
    .whereNull('people.disabled_at')
    .first(db.raw(`${personColumns}, sessions.created_at as session_created_at, sessions.last_seen_at`));
  if (!row) return undefined;
  const { session_created_at, last_seen_at } = times.parse(row);
  return { person: toPerson(row), createdAt: session_created_at, lastSeenAt: last_seen_at };
}

/** Notes that a session was used, and when it now ends. */
export async function extendSession(
  db: Database,
  tokenHash: Buffer,
  seenAt: Date,
  expiresAt: Date,
): Promise<void> {
  await db('sessions')
    .where({ token_hash: tokenHash })
    .update({ last_seen_at: seenAt, expires_at: expiresAt });
}

/** Ends a session for good. Gives the id of its person, or undefined when no live session has this token. */
export async function revokeSession(db: Database, tokenHash: Buffer, at: Date): Promise<string | undefined> {
  const rows: unknown = await db('sessions')
    .where({ token_hash: tokenHash, revoked_at: null })
    .update({ revoked_at: at })
    .returning('person_id');
  return z.array(z.object({ person_id: z.string() })).parse(rows)[0]?.person_id;
}
