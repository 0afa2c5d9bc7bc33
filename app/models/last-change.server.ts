import { z } from 'zod';
import type { Database } from '../../db/connection';

/** Who changed a record last, and when. */
export interface LastChange {
  readonly action: string;
  readonly personId: string | null;
  /** Null for the product's own jobs. */
  readonly personName: string | null;
  readonly at: Date;
}

/** The latest entry of the audit trail about one record, or null when there is none. */
export async function findLastChange(
  db: Database,
  record: { subject: string; subjectId: string },
): Promise<LastChange | null> {
  const change = await db('audit_entries')
    .leftJoin('people', 'people.id', 'audit_entries.person_id')
    .where({ subject: record.subject, subject_id: record.subjectId })
    .orderBy('audit_entries.id', 'desc')
    .first<LastChange | undefined>({
      action: 'audit_entries.action',
      at: 'audit_entries.at',
      personId: 'audit_entries.person_id',
      personName: 'people.name',
    });
  return change ?? null;
}

const changeSchema = z.object({
  action: z.string(),
  personName: z.string().nullable(),
  at: z.date(),
  before: z.record(z.string(), z.unknown()).nullable(),
  after: z.record(z.string(), z.unknown()).nullable(),
});
/** One entry of the audit trail about a record. */
export type RecordChange = z.output<typeof changeSchema>;

/** All that was changed about one record, the latest first; that it was logged is left out. */
export async function listChangesOf(
  db: Database,
  record: { subject: string; subjectId: string },
): Promise<RecordChange[]> {
  const rows: unknown[] = await db('audit_entries')
    .leftJoin('people', 'people.id', 'audit_entries.person_id')
    .where({ subject: record.subject, subject_id: record.subjectId })
    .whereNot('action', 'log')
    .orderBy('audit_entries.id', 'desc')
    .select({
      action: 'audit_entries.action',
      at: 'audit_entries.at',
      personName: 'people.name',
      before: 'audit_entries.before',
      after: 'audit_entries.after',
    });
  return rows.map((row) => changeSchema.parse(row));
}

/** What was changed last about each of some records, by their ids; records nobody changed are left out. */
export async function listLastChanges(
  db: Database,
  { subject, subjectIds }: { subject: string; subjectIds: readonly string[] },
): Promise<Map<string, RecordChange>> {
  const { rows } = await db.raw<{ rows: { id: string }[] }>(
    `select distinct on (e.subject_id) e.subject_id as id, e.action, p.name as "personName", e.at, e.before, e.after
       from audit_entries e left join people p on p.id = e.person_id
      where e.subject = :subject and e.subject_id = any(:subjectIds)
      order by e.subject_id, e.id desc`,
    { subject, subjectIds: [...subjectIds] },
  );
  return new Map(rows.map(({ id, ...row }) => [id, changeSchema.parse(row)]));
}
