import type { Database } from '../../db/connection';

/** The last day of the first night; the second night is the day after. */
export const firstNight = '2026-06-30';
export const secondNight = '2026-07-01';

const watchedFrom = '2016-07-01';

/** An even number in (0, 1) made of a row's own numbers: the same on every machine and for any plan. */
const even = (seed: string, number: string) =>
  `((hashint8extended((${number})::bigint, ${seed}) & 4503599627370495) + 0.5) / 4503599627370496`;

/**
 * Fills an empty database with classes of so many assets (30 unless said otherwise, 99 at most) watched for ten
 * years, made within PostgreSQL: about 3.4 failures an asset, of two modes, two inspections an asset, and in every third class planned renewals.
 *
 * Lives are Weibull with shapes 0.8, 1, 1.6, 2.5 and 4 in turn. Every fifth class runs on operating hours,
 * every seventh is renewed as a group; a tenth of the failures is patched; all have costs and a lead time.
 */
export async function fillEstate(db: Database, classes: number, assetsAClass = 30): Promise<void> {
  await db.raw(`insert into organisations (name, time_zone) values ('Bench Estate', 'Europe/London')`);
  await db.raw(`insert into sites (name) select 'Site ' || n from generate_series(1, 10) n`);
  await db.raw(
    `insert into asset_classes (id, name, item_singular, item_plural, clock, planned_cost_minor,
                                failure_cost_minor, group_planned_cost_minor, spares_lead_time_days)
     select md5('class ' || c)::uuid, 'Class ' || c, 'item', 'items',
            case when c % 5 = 0 then 'operating-hours' else 'calendar-days' end,
            20000, 90000, case when c % 7 = 0 then 12000 end, 30
       from generate_series(1, :classes::integer) c`,
    { classes },
  );
  await db.raw(
    `insert into failure_modes (id, class_id, name)
     select md5('mode ' || c || ' ' || m)::uuid, md5('class ' || c)::uuid, 'Mode ' || m
       from generate_series(1, :classes::integer) c, generate_series(1, 2) m`,
    { classes },
  );
  await db.raw(
    `insert into maintenance_tasks (class_id, name, kind, interval_days, starts_on)
     select md5('class ' || c)::uuid, 'Renewal', 'replace', 1200, '${watchedFrom}'
       from generate_series(3, :classes::integer, 3) c`,
    { classes },
  );
  await db.raw(
    `insert into assets (id, class_id, site_id, tag, in_service_on, watched_from, item_fitted_on, duty_hours_per_day)
     select md5('asset ' || c || ' ' || a)::uuid, md5('class ' || c)::uuid, s.id, c || '-' || a,
            '${watchedFrom}', '${watchedFrom}', '${watchedFrom}', case when c % 5 = 0 then 9 end
       from generate_series(1, :classes::integer) c, generate_series(1, :assetsAClass::integer) a
       join sites s on s.name = 'Site ' || (1 + a % 10)`,
    { classes, assetsAClass },
  );
  await addRecords(db, classes, assetsAClass);
  await db.raw(`analyze`);
}

/**
 * A life ends in a failure, or by plan where the class has a task and the item gets that old. The checks of
 * each record's date are left out while filling: the dates are right by the way they are made.
 */
async function addRecords(db: Database, classes: number, assetsAClass: number): Promise<void> {
  const triggers = (verb: string) =>
    db.raw(
      `alter table failures ${verb} trigger failures_check_date;
       alter table planned_work ${verb} trigger planned_work_check_date`,
    );
  await triggers('disable');
  await db.raw(
    `create table bench_ends as
     select c, a, k, planned, day from (
       select c, a, k, c % 3 = 0 and life > 1200 as planned,
              '${watchedFrom}'::date + ceil(sum(case when c % 3 = 0 then least(life, 1200) else life end)
                                              over (partition by c, a order by k))::integer as day
         from (select c, a, k,
                      1040 * (-ln(${even('1', '(c * 100 + a) * 100 + k')}))
                        ^ (1 / (array[0.8, 1, 1.6, 2.5, 4])[1 + c % 5]) as life
                 from generate_series(1, ${classes}) c, generate_series(1, ${assetsAClass}) a, generate_series(1, 15) k
              ) lives
       ) ends where day <= '${firstNight}'`,
  );
  await db.raw(
    `insert into failures (id, asset_id, class_id, mode_id, failed_on, effect)
     select md5('failure ' || c || ' ' || a || ' ' || k)::uuid, md5('asset ' || c || ' ' || a)::uuid,
            md5('class ' || c)::uuid,
            md5('mode ' || c || ' ' || case when ${even('2', 'k + 100 * a')} < 0.7 then 1 else 2 end)::uuid, day,
            case when ${even('3', '(c * 100 + a) * 100 + k')} < 0.1 then 'patched' else 'renewed' end
       from bench_ends where not planned`,
  );
  await db.raw(
    `insert into planned_work (id, asset_id, class_id, kind, renewed, done_on)
     select md5('renewal ' || c || ' ' || a || ' ' || k)::uuid, md5('asset ' || c || ' ' || a)::uuid,
            md5('class ' || c)::uuid, 'replace', true, day
       from bench_ends where planned
     union all
     select md5('visit ' || c || ' ' || a || ' ' || v)::uuid, md5('asset ' || c || ' ' || a)::uuid,
            md5('class ' || c)::uuid, 'inspect', false, '${watchedFrom}'::date + v * 1200 + a
       from generate_series(1, ${classes}) c, generate_series(1, ${assetsAClass}) a, generate_series(1, 2) v`,
  );
  await db.raw(`drop table bench_ends`);
  await triggers('enable');
}

/** The day between the nights: a failure in every tenth class. */
export async function addADay(db: Database): Promise<void> {
  await db.raw(
    `insert into failures (id, asset_id, class_id, failed_on, effect)
     select md5('new ' || id)::uuid, id, class_id, '${secondNight}', 'renewed'
       from assets where tag like '%0-1'`,
  );
}

/** Everything a night reads of all classes, as PostgreSQL copies it out. */
export const rowsOfANight = [
  `select a.*, s.name from assets a join sites s on s.id = a.site_id`,
  `select class_id, asset_id, failed_on, failed_at, effect, mode_id, outside_cause, item_fitted_on, item_age,
          voided_at, logged_at, id from failures order by class_id, asset_id, failed_on, logged_at, id`,
  `select class_id, asset_id, done_on, done_at, renewed, item_fitted_on, items, voided_at, logged_at, id
     from planned_work order by class_id, asset_id, done_on, logged_at, id`,
  `select * from asset_classes`,
  `select * from failure_modes`,
  `select * from maintenance_tasks`,
];
