import { z } from 'zod';
import type { Database } from '../../db/connection';

export const roles = ['technician', 'lead', 'manager', 'admin'] as const;

export type Role = (typeof roles)[number];

/** The roles as people read them. */
export const roleWords: Record<Role, string> = {
  technician: 'Technician',
  lead: 'Reliability lead',
  manager: 'Facilities manager',
  admin: 'Administrator',
};

/** A person who may use the product, with what decides what they see. */
export interface Person {
  id: string;
  name: string;
  email: string;
  roles: readonly Role[];
  /** Sites the person is put down for; only a technician's view is limited to them. */
  siteIds: readonly string[];
}

/** What signing in with a password needs of a person. */
export interface Credentials {
  personId: string;
  /** Null for a person who cannot sign in with a password. */
  passwordHash: string | null;
  disabled: boolean;
}

const credentialsRow = z.object({
  id: z.string(),
  password_hash: z.string().nullable(),
  disabled_at: z.date().nullable(),
});

/** The person with this e-mail, in any case; undefined when there is none. Disabled people are found too. */
export async function findCredentials(db: Database, email: string): Promise<Credentials | undefined> {
  const row: unknown = await db('people')
    .whereRaw('lower(email) = lower(?)', [email])
    .first('id', 'password_hash', 'disabled_at');
  if (!row) return undefined;
  const person = credentialsRow.parse(row);
  return { personId: person.id, passwordHash: person.password_hash, disabled: person.disabled_at !== null };
}

/** Stores a new hash of the password a person has. */
export async function setPasswordHash(db: Database, personId: string, passwordHash: string): Promise<void> {
  await db('people').where({ id: personId }).update({ password_hash: passwordHash, updated_at: db.fn.now() });
}

const personRow = z.object({
  id: z.string(),
  name: z.string(),
  email: z.string(),
  roles: z.array(z.enum(roles)),
  site_ids: z.array(z.string()),
});

/** Columns for a query on `people`: everything `toPerson` needs. */
export const personColumns = `people.id, people.name, people.email,
  array(select role from person_roles where person_id = people.id order by role) as roles,
  array(select site_id::text from person_sites where person_id = people.id order by site_id) as site_ids`;

/** Turns a row of `personColumns` into a person. */
export function toPerson(row: unknown): Person {
  const { site_ids, ...person } = personRow.parse(row);
  return { ...person, siteIds: site_ids };
}
