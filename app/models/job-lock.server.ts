import type { Database } from '../../db/connection';

/**
 * Runs a job's work while holding the job's lock, within one read-only snapshot of the database.
 *
 * The lock belongs to the snapshot's transaction: a process that dies lets go of it.
 *
 * @param work gets the snapshot to read from; it must write through another connection.
 * @returns what the work returns, or null when somebody else holds the lock.
 */
export async function withJobLock<T>(
  db: Database,
  job: string,
  work: (snapshot: Database) => Promise<T>,
): Promise<T | null> {
  return db.transaction(
    async (snapshot) => {
      const { rows } = await snapshot.raw<{ rows: { locked: boolean }[] }>(
        `select pg_try_advisory_xact_lock(hashtextextended('intervale job ' || ?, 0)) as locked`,
        [job],
      );
      return rows[0]?.locked === true ? work(snapshot) : null;
    },
    { isolationLevel: 'repeatable read', readOnly: true },
  );
}
