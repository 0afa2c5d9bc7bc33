import type { Database } from '../../db/connection';
import { writeAudit } from './audit.server';
import { constraintOf } from './constraint';

export interface FailureMode {
  readonly id: string;
  readonly name: string;
  /** Failures logged with it and not voided. */
  readonly failures: number;
}

/** Thrown when the class has another mode of that name, in any case. */
export class ModeNameTakenError extends Error {
  override name = 'ModeNameTakenError';
}

/** Thrown when the mode is not there under the name the person saw. */
export class ModeChangedError extends Error {
  override name = 'ModeChangedError';
  constructor(readonly currentName: string | undefined) {
    super('the mode has another name by now');
  }
}

/** The modes of a class that failures are logged with, those that happen most often first. */
export async function listFailureModes(db: Database, classId: string): Promise<FailureMode[]> {
  return db('failure_modes')
    .leftJoin('failures', (join) =>
      join.on('failures.mode_id', 'failure_modes.id').andOnNull('failures.voided_at'),
    )
    .where('failure_modes.class_id', classId)
    .whereNull('failure_modes.merged_into')
    .groupBy('failure_modes.id')
    .orderByRaw('count(failures.id) desc, lower(failure_modes.name)')
    .select<FailureMode[]>('failure_modes.id', 'failure_modes.name')
    .count({ failures: 'failures.id' });
}

/** What a class's modes are called, merged ones too, by id. */
export async function listModeNames(db: Database, classId: string): Promise<Record<string, string>> {
  const rows = (await db('failure_modes').where('class_id', classId).select('id', 'name')) as {
    id: string;
    name: string;
  }[];
  return Object.fromEntries(rows.map(({ id, name }) => [id, name]));
}

/** @throws ModeNameTakenError */
export async function addFailureMode(
  db: Database,
  input: { classId: string; name: string; personId: string },
): Promise<{ id: string }> {
  return db.transaction(async (trx) => {
    const [mode] = await refusingTakenName(
      trx('failure_modes')
        .insert({ class_id: input.classId, name: input.name })
        .returning<{ id: string }[]>('id'),
    );
    if (!mode) throw new Error('an insert returned no row');
    await writeAudit(trx, {
      personId: input.personId,
      action: 'add',
      subject: 'failure-mode',
      subjectId: mode.id,
      after: { classId: input.classId, name: input.name },
    });
    return mode;
  });
}

/**
 * Gives a mode another name; its failures stay with it.
 *
 * @param input.seenName the name the person saw, so that two people renaming do not overwrite each other.
 * @throws ModeNameTakenError, ModeChangedError
 */
export async function renameFailureMode(
  db: Database,
  input: { classId: string; modeId: string; seenName: string; name: string; personId: string },
): Promise<void> {
  await db.transaction(async (trx) => {
    const mode = await trx('failure_modes')
      .where({ id: input.modeId, class_id: input.classId })
      .forUpdate()
      .first<{ name: string } | undefined>('name');
    if (mode?.name !== input.seenName) throw new ModeChangedError(mode?.name);
    if (input.name === mode.name) return;
    await refusingTakenName(trx('failure_modes').where({ id: input.modeId }).update({ name: input.name }));
    await writeAudit(trx, {
      personId: input.personId,
      action: 'rename',
      subject: 'failure-mode',
      subjectId: input.modeId,
      before: { name: mode.name },
      after: { name: input.name },
    });
  });
}

async function refusingTakenName<T>(statement: PromiseLike<T>): Promise<T> {
  try {
    return await statement;
  } catch (error) {
    if (constraintOf(error) === 'failure_modes_class_name_unique') throw new ModeNameTakenError();
    throw error;
  }
}
