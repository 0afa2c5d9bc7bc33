import type { Database } from '../../db/connection';
import { writeAudit } from './audit.server';
import { constraintOf } from './constraint';
import { type LastChange, findLastChange } from './last-change.server';

export type Clock = 'calendar-days' | 'operating-hours';

/** What people decide about a class. Costs are minor units of the organisation's currency, null when unknown. */
export interface ClassSettings {
  readonly name: string;
  readonly itemSingular: string;
  readonly itemPlural: string;
  readonly clock: Clock;
  /** 1 matters most, 4 least. */
  readonly criticality: number;
  readonly statutory: boolean;
  readonly endangersPeople: boolean;
  readonly hiddenFailures: boolean;
  readonly plannedCostMinor: number | null;
  readonly failureCostMinor: number | null;
  /** A planned replacement where all items of an asset are done in one visit: one item's part. */
  readonly groupPlannedCostMinor: number | null;
  readonly sparesLeadTimeDays: number | null;
  /** Share of the time a hidden function is to be there, within (0, 1); only with hidden failures. */
  readonly requiredAvailability: number | null;
}

export interface AssetClass extends ClassSettings {
  readonly id: string;
  readonly version: number;
}

/** Changes that take something away and are made only when the person says so expressly. */
export type ConfirmedChange = 'statutory-off' | 'endangers-people-off' | 'clock';

export type SaveSettingsResult =
  | { readonly outcome: 'saved' | 'unchanged' | 'not-found' | 'name-taken' }
  /** Nothing saved: these changes need a word of confirmation. */
  | { readonly outcome: 'unconfirmed'; readonly changes: ConfirmedChange[] }
  /** Nothing saved: so many records give an item's age in units of the present clock. */
  | { readonly outcome: 'clock-in-use'; readonly agesRecorded: number }
  /** Nothing saved: somebody else saved first. */
  | {
      readonly outcome: 'changed-meanwhile';
      readonly current: AssetClass;
      readonly lastChange: LastChange | null;
    };

const columns = {
  name: 'name',
  itemSingular: 'item_singular',
  itemPlural: 'item_plural',
  clock: 'clock',
  criticality: 'criticality',
  statutory: 'statutory',
  endangersPeople: 'endangers_people',
  hiddenFailures: 'hidden_failures',
  plannedCostMinor: 'planned_cost_minor',
  failureCostMinor: 'failure_cost_minor',
  groupPlannedCostMinor: 'group_planned_cost_minor',
  sparesLeadTimeDays: 'spares_lead_time_days',
  requiredAvailability: 'required_availability',
} as const satisfies Record<keyof ClassSettings, string>;

export const settingNames = Object.keys(columns) as (keyof ClassSettings)[];

export async function findAssetClass(db: Database, classId: string): Promise<AssetClass | undefined> {
  return classQuery(db, classId).first<AssetClass | undefined>();
}

function classQuery(db: Database, classId: string) {
  return db('asset_classes')
    .where('id', classId)
    .select({ ...columns, id: 'id', version: 'version' });
}

/** What a change of the class's clock would run into. */
export async function readClockUse(
  db: Database,
  classId: string,
): Promise<{ records: number; agesRecorded: number; assets: number; assetsWithoutDuty: number }> {
  const failures = await db('failures')
    .where('class_id', classId)
    .first<{ all: number; ages: number }>(db.raw('count(*) as "all", count(item_age) as ages'));
  const planned = await db('planned_work')
    .where('class_id', classId)
    .first<{ all: number }>(db.raw('count(*) as "all"'));
  const assets = await db('assets')
    .where('class_id', classId)
    .whereNull('retired_on')
    .first<{ all: number; duties: number }>(db.raw('count(*) as "all", count(duty_hours_per_day) as duties'));
  return {
    records: failures.all + planned.all,
    agesRecorded: failures.ages,
    assets: assets.all,
    assetsWithoutDuty: assets.all - assets.duties,
  };
}

/**
 * Saves a class's settings, whole or not at all.
 *
 * The clock stays as it is while a record gives an item's age in its units, since the figure would be read
 * in the other unit from then on. A changed clock also sets the assessment in force aside: its numbers are
 * in the old unit, and the next night makes new ones.
 *
 * @param input.version the version the person saw.
 * @param input.confirmed the changes the person expressly confirmed.
 */
export async function saveClassSettings(
  db: Database,
  input: {
    classId: string;
    version: number;
    settings: ClassSettings;
    confirmed: readonly ConfirmedChange[];
    personId: string;
    now: Date;
  },
): Promise<SaveSettingsResult> {
  const { classId, settings, personId, now } = input;
  try {
    return await db.transaction(async (trx) => {
      const current = await classQuery(trx, classId).forUpdate().first<AssetClass | undefined>();
      if (!current) return { outcome: 'not-found' };
      if (current.version !== input.version) {
        const lastChange = await findLastChange(trx, { subject: 'asset-class', subjectId: classId });
        return { outcome: 'changed-meanwhile', current, lastChange };
      }
      const changed = settingNames.filter((name) => settings[name] !== current[name]);
      if (changed.length === 0) return { outcome: 'unchanged' };

      const use = settings.clock === current.clock ? null : await readClockUse(trx, classId);
      if (use && use.agesRecorded > 0) return { outcome: 'clock-in-use', agesRecorded: use.agesRecorded };
      const unconfirmed = changesToConfirm(current, settings, use?.records ?? 0).filter(
        (change) => !input.confirmed.includes(change),
      );
      if (unconfirmed.length > 0) return { outcome: 'unconfirmed', changes: unconfirmed };

      await trx('asset_classes')
        .where('id', classId)
        .update({
          ...Object.fromEntries(changed.map((name) => [columns[name], settings[name]])),
          ...(use ? { current_assessment_id: null } : {}),
          version: current.version + 1,
          updated_at: now,
        });
      await writeAudit(trx, {
        personId,
        action: 'change-settings',
        subject: 'asset-class',
        subjectId: classId,
        before: Object.fromEntries(changed.map((name) => [name, current[name]])),
        after: Object.fromEntries(changed.map((name) => [name, settings[name]])),
      });
      return { outcome: 'saved' };
    });
  } catch (error) {
    if (constraintOf(error) === 'asset_classes_name_unique') return { outcome: 'name-taken' };
    throw error;
  }
}

function changesToConfirm(current: ClassSettings, next: ClassSettings, records: number): ConfirmedChange[] {
  const changes: ConfirmedChange[] = [];
  if (current.statutory && !next.statutory) changes.push('statutory-off');
  if (current.endangersPeople && !next.endangersPeople) changes.push('endangers-people-off');
  if (current.clock !== next.clock && records > 0) changes.push('clock');
  return changes;
}
