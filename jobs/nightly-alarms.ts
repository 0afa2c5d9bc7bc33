import { alarmFindings } from '~/advice/advance-alarm-state';
import type { AlarmState } from '~/advice/alarm-findings';
import { raiseAlarms, type RaisedAlarm, type StandingAlarms } from '~/advice/raise-alarms';
import { insertAlarms, laterNightSettled, readStandingAlarms, saveAlarmStates } from '~/models/alarms.server';
import type { Database } from '../db/connection';

const neverRaised: StandingAlarms = { open: new Set(), logEAtClearing: {} };

/**
 * Raises the alarms of a run and stores what its classes' failures leave for the next night.
 *
 * Belongs in the transaction that puts the run in force: a run that is cut off before raises nothing and
 * takes nothing in. A night earlier than one already settled raises and stores nothing: looking back is no
 * new evidence.
 *
 * @param computed every class the run could compute; they are the classes e-BH counts.
 * @returns what was raised.
 */
export async function settleAlarms(
  transaction: Database,
  run: { runId: string; asOf: string },
  computed: readonly { classId: string; alarmState: AlarmState }[],
): Promise<RaisedAlarm[]> {
  if (await laterNightSettled(transaction, run.asOf)) return [];
  const standing = await readStandingAlarms(transaction);
  const raised = raiseAlarms(
    computed.map(({ classId, alarmState }) => ({
      classId,
      alarms: alarmFindings(alarmState),
      standing: standing.get(classId) ?? neverRaised,
    })),
  );
  await insertAlarms(transaction, run, raised);
  await saveAlarmStates(transaction, run.asOf, computed);
  return raised;
}
