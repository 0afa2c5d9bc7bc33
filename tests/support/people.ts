import { hash } from '@node-rs/argon2';
import type { Role } from '~/models/people.server';
import type { Database } from '../../db/connection';

/** The password of everybody `addPerson` adds. */
export const password = 'ordinary grey gravel';

// As cheap as the algorithm allows: what is tested is never the cost.
let cheapHash: Promise<string> | undefined;

interface NewPerson {
  email: string;
  roles?: readonly Role[];
  siteIds?: readonly string[];
  disabled?: boolean;
  /** Null for a person who cannot sign in with a password. */
  passwordHash?: string | null;
}

/** Adds a person and gives their id. */
export async function addPerson(
  db: Database,
  { email, roles = [], siteIds = [], disabled = false, passwordHash }: NewPerson,
): Promise<string> {
  cheapHash ??= hash(password, { memoryCost: 8, timeCost: 1, parallelism: 1 });
  const [row] = (await db('people')
    .insert({
      email,
      name: email.split('@')[0],
      password_hash: passwordHash === undefined ? await cheapHash : passwordHash,
      disabled_at: disabled ? new Date() : null,
    })
    .returning('id')) as { id: string }[];
  const id = row?.id ?? '';
  if (roles.length > 0) await db('person_roles').insert(roles.map((role) => ({ person_id: id, role })));
  if (siteIds.length > 0)
    await db('person_sites').insert(siteIds.map((site) => ({ person_id: id, site_id: site })));
  return id;
}

/** Adds a site and gives its id. */
export async function addSite(db: Database, name: string): Promise<string> {
  const [row] = (await db('sites').insert({ name }).returning('id')) as { id: string }[];
  return row?.id ?? '';
}
