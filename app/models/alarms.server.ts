import { z } from 'zod';
import { alarmFindings } from '~/advice/advance-alarm-state';
import { alarmStateSchema, type AlarmKind, type AlarmState } from '~/advice/alarm-findings';
import type { RaisedAlarm, StandingAlarms } from '~/advice/raise-alarms';
import type { Database } from '../../db/connection';
import { writeAudit } from './audit.server';

/** An alarm as raised, and how it was cleared. */
export interface Alarm {
  id: string;
  classId: string;
  className: string;
  itemPlural: string;
  /** Whether the class is statutory or endangers people. */
  isMarked: boolean;
  kind: AlarmKind;
  raisedAsOf: string;
  raisedAt: Date;
  /** ln E when raised: since the clearing before, and over the whole record. */
  logE: number;
  logETotal: number;
  failures: number;
  clearedAt: Date | null;
  /** Null while open, and where the person is gone. */
  clearedByName: string | null;
  clearReason: string | null;
}

export type ClearAlarmResult =
  | { outcome: 'cleared'; classId: string }
  /** Somebody cleared it before; their reason stands. */
  | { outcome: 'already-cleared'; classId: string }
  | { outcome: 'no-such-alarm' };

const stateRowSchema = z.object({ classId: z.string(), state: alarmStateSchema });

/** What the last settled night left of every class. */
export async function loadAlarmStates(db: Database): Promise<Map<string, AlarmState>> {
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select class_id as "classId", state || jsonb_build_object('fingerprint', fingerprint) as state
       from alarm_states`,
  );
  return new Map(rows.map((row) => stateRowSchema.parse(row)).map(({ classId, state }) => [classId, state]));
}

/** Whether the alarms of a later night have been settled already. */
export async function laterNightSettled(db: Database, asOf: string): Promise<boolean> {
  const { rows } = await db.raw<{ rows: { later: boolean }[] }>(
    `select exists (select from alarm_states where as_of > ?) as later`,
    [asOf],
  );
  return rows[0]?.later === true;
}

/** Stores what a night leaves of the classes it computed. */
export async function saveAlarmStates(
  db: Database,
  asOf: string,
  states: readonly { classId: string; alarmState: AlarmState }[],
): Promise<void> {
  const rows = states.map(({ classId, alarmState: { fingerprint, ...state } }) => ({
    class_id: classId,
    failures: state.trend.failures,
    fingerprint,
    state,
  }));
  await inParts(rows, (part) =>
    db.raw(
      `insert into alarm_states (class_id, as_of, failures, fingerprint, state)
       select class_id, :asOf::date, failures, fingerprint, state
         from jsonb_to_recordset(:part) as fresh(class_id uuid, failures integer, fingerprint text, state jsonb)
       on conflict (class_id) do update
         set as_of = excluded.as_of, failures = excluded.failures,
             fingerprint = excluded.fingerprint, state = excluded.state`,
      { asOf, part: JSON.stringify(part) },
    ),
  );
}

/** What has been raised and cleared before, of the classes where anything was. */
export async function readStandingAlarms(db: Database): Promise<Map<string, StandingAlarms>> {
  const { rows } = await db.raw<{
    rows: { classId: string; kind: AlarmKind; open: boolean; logEAtClearing: number | null }[];
  }>(
    `select class_id as "classId", kind, bool_or(cleared_at is null) as open,
            (array_agg(log_e_at_clearing order by cleared_at desc) filter (where cleared_at is not null))[1]
              as "logEAtClearing"
       from alarms group by class_id, kind`,
  );
  const standing = new Map<
    string,
    { open: Set<AlarmKind>; logEAtClearing: Partial<Record<AlarmKind, number>> }
  >();
  for (const { classId, kind, open, logEAtClearing } of rows) {
    const entry = standing.get(classId) ?? { open: new Set(), logEAtClearing: {} };
    standing.set(classId, entry);
    if (open) entry.open.add(kind);
    if (logEAtClearing !== null) entry.logEAtClearing[kind] = logEAtClearing;
  }
  return standing;
}

/** Stores the alarms a run raised. A kind that is open for its class already is left as it is. */
export async function insertAlarms(
  db: Database,
  run: { runId: string; asOf: string },
  raised: readonly RaisedAlarm[],
): Promise<void> {
  await inParts(raised, (part) =>
    db.raw(
      `insert into alarms (class_id, kind, raised_as_of, run_id, log_e, log_e_total, failures)
       select "classId", kind, :asOf::date, :runId, "logE", "logETotal", failures
         from jsonb_to_recordset(:part)
           as fresh("classId" uuid, kind text, "logE" float8, "logETotal" float8, failures integer)
       on conflict (class_id, kind) where cleared_at is null do nothing`,
      { ...run, part: JSON.stringify(part) },
    ),
  );
}

/**
 * Alarms of the classes that have an asset at one of the sites, open ones first, then the latest raised.
 *
 * @param siteIds the sites the viewer may see.
 * @param filter.open only open ones, or only cleared ones; both unless given.
 */
export async function listAlarms(
  db: Database,
  siteIds: readonly string[] | 'all',
  { classId, open }: { classId?: string; open?: boolean } = {},
): Promise<Alarm[]> {
  const query = db('alarms')
    .join('asset_classes', 'asset_classes.id', 'alarms.class_id')
    .leftJoin('people', 'people.id', 'alarms.cleared_by')
    .orderByRaw('alarms.cleared_at is not null, alarms.raised_as_of desc, asset_classes.name, alarms.kind')
    .select({
      id: 'alarms.id',
      classId: 'alarms.class_id',
      className: 'asset_classes.name',
      itemPlural: 'asset_classes.item_plural',
      kind: 'alarms.kind',
      raisedAsOf: 'alarms.raised_as_of',
      raisedAt: 'alarms.raised_at',
      logE: 'alarms.log_e',
      logETotal: 'alarms.log_e_total',
      failures: 'alarms.failures',
      clearedAt: 'alarms.cleared_at',
      clearedByName: 'people.name',
      clearReason: 'alarms.clear_reason',
    })
    .select<Alarm[]>(db.raw('asset_classes.statutory or asset_classes.endangers_people as "isMarked"'));
  if (classId !== undefined) query.where('alarms.class_id', classId);
  if (open === true) query.whereNull('alarms.cleared_at');
  if (open === false) query.whereNotNull('alarms.cleared_at');
  if (siteIds !== 'all') {
    query.whereExists(
      db('assets')
        .whereRaw('assets.class_id = alarms.class_id')
        .whereIn('assets.site_id', siteIds)
        .select(db.raw('1')),
    );
  }
  return query;
}

/** One alarm; undefined where there is none, or none at a site the viewer may see. */
export async function findAlarm(
  db: Database,
  siteIds: readonly string[] | 'all',
  alarmId: string,
): Promise<Alarm | undefined> {
  const row = await db('alarms').where('id', alarmId).first<{ class_id: string } | undefined>('class_id');
  if (row === undefined) return undefined;
  const alarms = await listAlarms(db, siteIds, { classId: row.class_id });
  return alarms.find(({ id }) => id === alarmId);
}

/**
 * Clears an alarm for a reason. From the evidence of the last settled night on, counting starts anew.
 *
 * The caller has made sure that the person may.
 */
export async function clearAlarm(
  db: Database,
  { alarmId, personId, reason, now }: { alarmId: string; personId: string; reason: string; now: Date },
): Promise<ClearAlarmResult> {
  return db.transaction(async (trx) => {
    const alarm = await lockAlarm(trx, alarmId);
    if (alarm === undefined) return { outcome: 'no-such-alarm' };
    const { classId, kind } = alarm;
    if (alarm.clearedAt !== null) return { outcome: 'already-cleared', classId };

    const logEAtClearing = (await logENow(trx, classId, kind)) ?? alarm.logETotal;
    await trx('alarms').where('id', alarmId).update({
      cleared_at: now,
      cleared_by: personId,
      clear_reason: reason,
      log_e_at_clearing: logEAtClearing,
    });
    await writeAudit(trx, {
      personId,
      action: 'clear',
      subject: 'alarm',
      subjectId: alarmId,
      before: { classId, kind, open: true },
      after: { open: false, reason, logEAtClearing },
    });
    return { outcome: 'cleared', classId };
  });
}

async function lockAlarm(trx: Database, alarmId: string) {
  return trx('alarms')
    .where('id', alarmId)
    .forUpdate()
    .first<{ classId: string; kind: AlarmKind; logETotal: number; clearedAt: Date | null } | undefined>({
      classId: 'class_id',
      kind: 'kind',
      logETotal: 'log_e_total',
      clearedAt: 'cleared_at',
    });
}

async function logENow(trx: Database, classId: string, kind: AlarmKind): Promise<number | null> {
  const row = await trx('alarm_states')
    .where('class_id', classId)
    .first<{ fingerprint: string; state: object } | undefined>('fingerprint', 'state');
  if (row === undefined) return null;
  return alarmFindings(alarmStateSchema.parse({ ...row.state, fingerprint: row.fingerprint })).logE[kind];
}

const partSize = 1000;

/** Runs a statement over rows in parts, so that no single one grows with the number of classes. */
async function inParts<Row>(
  rows: readonly Row[],
  statement: (part: Row[]) => Promise<unknown>,
): Promise<void> {
  for (let start = 0; start < rows.length; start += partSize) {
    await statement(rows.slice(start, start + partSize));
  }
}
