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
