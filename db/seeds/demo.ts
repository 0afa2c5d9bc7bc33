import { DateTime } from 'luxon';
import { hashPassword } from '../../app/services/password.server';
import type { ClassSpec } from '../../fixtures/demo/class-spec';
import { classSpecs } from '../../fixtures/demo/classes';
import { demoSeed, generateDemo } from '../../fixtures/demo/generate';
import { demoPeople } from '../../fixtures/demo/people';
import { organisation, sites } from '../../fixtures/demo/places';
import { openRandom } from '../../fixtures/demo/random';
import type { DemoRecords } from '../../fixtures/demo/records';
import { truthOf } from '../../fixtures/demo/truth';
import type { Database } from '../connection';
import { demoCalendar } from './demo-calendar';
import { assetRow, failureRow, plannedWorkRow, voidAuditRow, type DemoIds } from './demo-rows';

const rowsABatch = 500;
/** Maintenance tasks were in force long before the records begin. */
const tasksStartedDay = -3650;

/**
 * Fills an empty database with the demo: Larkmoor Civic Trust, its people, register and three years of
 * records that end yesterday. All or nothing.
 *
 * @param options.today 'YYYY-MM-DD' in the organisation's zone; the real one unless given.
 * @throws Error when there is anybody or anything in the database already.
 */
export async function seedDemo(db: Database, options: { today?: string } = {}): Promise<void> {
  const today = options.today ?? DateTime.now().setZone(organisation.timeZone).toISODate();
  if (today === null) throw new Error(`there is no time zone ${organisation.timeZone}`);
  await db.transaction(async (trx) => {
    await refuseUnlessEmpty(trx);
    await trx('organisations').insert({
      name: organisation.name,
      time_zone: organisation.timeZone,
      currency: organisation.currency,
    });
    const calendar = demoCalendar(today, organisation.timeZone);
    const ids = makeIds();
    await insertPlaces(trx, ids);
    await insertPeople(trx, ids);
    for (const spec of classSpecs) await insertClass(trx, spec, ids, calendar.dayOf(tasksStartedDay));
    await insertRecords(trx, generateDemo(), ids, calendar);
  });
}

async function refuseUnlessEmpty(db: Database): Promise<void> {
  for (const table of ['people', 'organisations', 'sites', 'asset_classes']) {
    const row: unknown = await db(table).first(db.raw('1'));
    if (row !== undefined)
      throw new Error(`the demo goes into an empty database only, and ${table} holds rows`);
  }
}

/** Ids of everything that records point at, the same in every demo. */
function makeIds(): DemoIds {
  const random = openRandom(demoSeed, 'ids');
  const idsOf = (keys: readonly string[]) => new Map(keys.map((key) => [key, random.uuid()]));
  return {
    sites: idsOf(Object.keys(sites)),
    areas: idsOf(
      Object.entries(sites).flatMap(([site, { areas }]) => areas.map((area) => `${site}/${area}`)),
    ),
    people: idsOf(demoPeople.map(({ email }) => email)),
    classes: idsOf(classSpecs.map(({ name }) => name)),
    modes: idsOf(classSpecs.flatMap(({ name }) => modesOf(name).map((mode) => `${name}/${mode}`))),
    tasks: idsOf(classSpecs.flatMap(({ name, tasks }) => tasks.map((task) => `${name}/${task.name}`))),
  };
}

async function insertPlaces(db: Database, ids: DemoIds): Promise<void> {
  const names = Object.entries(sites);
  await db('sites').insert(names.map(([name]) => ({ id: ids.sites.get(name), name })));
  await db('areas').insert(
    names.flatMap(([site, { areas }]) =>
      areas.map((name) => ({ id: ids.areas.get(`${site}/${name}`), site_id: ids.sites.get(site), name })),
    ),
  );
}

async function insertPeople(db: Database, ids: DemoIds): Promise<void> {
  const hashes = await Promise.all(demoPeople.map(({ password }) => hashPassword(password)));
  await db('people').insert(
    demoPeople.map(({ email, name }, index) => ({
      id: ids.people.get(email),
      email,
      name,
      password_hash: hashes[index],
    })),
  );
  await db('person_roles').insert(
    demoPeople.map(({ email, role }) => ({ person_id: ids.people.get(email), role })),
  );
  await db('person_sites').insert(
    demoPeople.flatMap(({ email, sites: own }) =>
      own.map((site) => ({ person_id: ids.people.get(email), site_id: ids.sites.get(site) })),
    ),
  );
}

async function insertClass(db: Database, spec: ClassSpec, ids: DemoIds, tasksStartOn: string): Promise<void> {
  const class_id = ids.classes.get(spec.name);
  await db('asset_classes').insert({
    id: class_id,
    name: spec.name,
    item_singular: spec.itemSingular,
    item_plural: spec.itemPlural,
    clock: spec.clock,
    criticality: spec.criticality,
    statutory: spec.statutory,
    endangers_people: spec.endangersPeople,
    hidden_failures: spec.hiddenFailures,
    planned_cost_minor: spec.plannedCostMinor,
    failure_cost_minor: spec.failureCostMinor,
  });
  await db('failure_modes').insert(
    modesOf(spec.name).map((name) => ({ id: ids.modes.get(`${spec.name}/${name}`), class_id, name })),
  );
  await db('maintenance_tasks').insert(
    spec.tasks.map((task) => ({
      id: ids.tasks.get(`${spec.name}/${task.name}`),
      class_id,
      name: task.name,
      kind: task.kind,
      interval_days: task.intervalDays ?? null,
      interval_hours: task.intervalHours ?? null,
      statutory_reference: task.statutoryReference ?? null,
      cost_minor: task.costMinor,
      starts_on: tasksStartOn,
    })),
  );
}

async function insertRecords(
  db: Database,
  { assets, failures, plannedWork }: DemoRecords,
  ids: DemoIds,
  calendar: ReturnType<typeof demoCalendar>,
): Promise<void> {
  const classOf = new Map(assets.map(({ id, className }) => [id, className]));
  const classNameOf = (assetId: string): string => {
    const name = classOf.get(assetId);
    if (name === undefined) throw new Error(`there is no asset ${assetId}`);
    return name;
  };
  const insert = (table: string, rows: Record<string, unknown>[]) => db.batchInsert(table, rows, rowsABatch);
  await insert(
    'assets',
    assets.map((asset) => assetRow(asset, ids, calendar)),
  );
  await insert(
    'failures',
    failures.map((failure) => failureRow(failure, classNameOf(failure.assetId), ids, calendar)),
  );
  await insert(
    'planned_work',
    plannedWork.map((work) => plannedWorkRow(work, classNameOf(work.assetId), ids, calendar)),
  );
  await insert(
    'audit_entries',
    failures.flatMap((failure) => voidAuditRow(failure, ids, calendar)),
  );
}

function modesOf(className: string): string[] {
  return truthOf(className).hazards.flatMap(({ modes }) => Object.keys(modes));
}
