import type { Database } from '../../db/connection';

/** One thing somebody, or a job, changed. `before` and `after` hold what a reader needs to see the change: never a secret. */
export interface AuditEntry {
  /** Null for the product's own jobs. */
  personId: string | null;
  /** What was done, as a verb: `log`, `void`, `change-costs`, `sign-in`. */
  action: string;
  /** The kind of record, in the singular: `failure`, `asset-class`, `person`. */
  subject: string;
  subjectId: string;
  before?: unknown;
  after?: unknown;
}

/**
 * Adds an entry to the audit trail. Pass the transaction that makes the change, so that neither is stored
 * without the other. `before` and `after` are stored as JSON; leaving one out stores null.
 */
export async function writeAudit(db: Database, entry: AuditEntry): Promise<void> {
  await db('audit_entries').insert(rowOf(entry));
}

// A statement takes 65,535 values at most, and an entry has six.
const entriesAStatement = 1000;

/** Adds many entries at once, in their order. */
export async function writeAudits(db: Database, entries: readonly AuditEntry[]): Promise<void> {
  for (let start = 0; start < entries.length; start += entriesAStatement) {
    await db('audit_entries').insert(entries.slice(start, start + entriesAStatement).map(rowOf));
  }
}

function rowOf(entry: AuditEntry) {
  return {
    person_id: entry.personId,
    action: entry.action,
    subject: entry.subject,
    subject_id: entry.subjectId,
    before: asJson(entry.before),
    after: asJson(entry.after),
  };
}

// The driver would turn an array into a PostgreSQL array and a string into bare text: encode here instead.
function asJson(value: unknown): string | null {
  return value === undefined ? null : JSON.stringify(value);
}
