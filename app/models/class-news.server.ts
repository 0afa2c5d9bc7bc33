import { z } from 'zod';
import {
  newsKinds,
  type ClassComparison,
  type ClassNews,
  type NewsKind,
  type RecordChanges,
} from '~/advice/class-news';
import { cautionCodes } from '~/advice/conclusion';
import { actions } from '~/advice/proposal';
import { trends } from '~/advice/trend';
import { verdicts, type Verdict } from '~/advice/verdict';
import type { Database } from '../../db/connection';

/** Classes whose assessment of a run differs in what people decide by from the one in force. */
export interface ChangedClass extends ClassComparison {
  classId: string;
}

const changedSchema = z.object({
  classId: z.string(),
  itemPlural: z.string(),
  previousAsOf: z.string(),
  verdictBefore: z.enum(verdicts),
  verdict: z.enum(verdicts),
  trendBefore: z.enum(trends),
  trend: z.enum(trends),
  actionBefore: z.enum(actions),
  action: z.enum(actions),
  proposalTitle: z.string(),
  savingPerYearMinor: z.number().nullable(),
  newCautions: z.array(
    z.object({ code: z.enum(cautionCodes), severity: z.enum(['note', 'caution', 'stop']) }),
  ),
});

/**
 * Compares a run's assessments with those in force, of earlier days; one query however many classes there are, and only
 * those that differ come back. Call it before the run is put in force. A class without an earlier assessment is
 * not compared: that it is assessed at all is no news.
 */
export async function readChangedClasses(
  db: Database,
  run: { runId: string; asOf: string },
  timeZone: string,
): Promise<ChangedClass[]> {
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select c.id as "classId", c.item_plural as "itemPlural", old.as_of as "previousAsOf",
            old.verdict as "verdictBefore", new.verdict, old.trend as "trendBefore", new.trend,
            old.summary ->> 'action' as "actionBefore", new.summary ->> 'action' as action,
            new.detail #>> '{conclusion,proposal,words,title}' as "proposalTitle",
            (new.summary ->> 'savingPerYearMinor')::bigint as "savingPerYearMinor",
            (select coalesce(jsonb_agg(x), '[]') from jsonb_array_elements(new.detail #> '{conclusion,cautions}') x
              where not (x ->> 'code') = any(old.caution_codes)) as "newCautions"
       from assessments new
       join asset_classes c on c.id = new.class_id
       join lateral (select * from assessments a
                      where a.class_id = c.id and a.as_of < new.as_of order by a.as_of desc limit 1) old on true
      where new.run_id = :runId
        and (old.verdict <> new.verdict or old.trend <> new.trend
             or old.summary ->> 'action' <> new.summary ->> 'action'
             or not new.caution_codes <@ old.caution_codes)`,
    { runId: run.runId },
  );
  const changed = rows.map((row) => changedSchema.parse(row));
  const changes = await readRecordChanges(db, changed, { until: run.asOf, timeZone });
  return changed.map((row) => ({
    classId: row.classId,
    itemPlural: row.itemPlural,
    before: { verdict: row.verdictBefore, trend: row.trendBefore, action: row.actionBefore },
    now: {
      verdict: row.verdict,
      trend: row.trend,
      action: row.action,
      proposalTitle: row.proposalTitle,
      savingPerYearMinor: row.savingPerYearMinor,
    },
    newCautions: row.newCautions,
    changes: changes.get(row.classId) ?? nothing,
  }));
}

const nothing: RecordChanges = {
  failuresLogged: 0,
  plannedWorkLogged: 0,
  imports: [],
  voided: 0,
  restored: 0,
  corrected: 0,
  settingsChanged: false,
  scheduleChanged: false,
};

const recordChangesSchema = z.object({
  classId: z.string(),
  failuresLogged: z.number(),
  plannedWorkLogged: z.number(),
  imports: z.array(z.string()),
  voided: z.number(),
  restored: z.number(),
  corrected: z.number(),
  settingsChanged: z.boolean(),
  scheduleChanged: z.boolean(),
});

/**
 * What was entered, by the day it was entered, after the day of the assessment before: a night run again tells the
 * same. What somebody entered before dawn may so be named on two mornings, which is better than on none.
 */
async function readRecordChanges(
  db: Database,
  classes: readonly { classId: string; previousAsOf: string }[],
  { until, timeZone }: { until: string; timeZone: string },
): Promise<Map<string, RecordChanges>> {
  if (classes.length === 0) return new Map();
  const entered = (column: string) =>
    `${column} >= (k.since + 1)::timestamp at time zone :timeZone
     and ${column} < (:until::date + 2)::timestamp at time zone :timeZone`;
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select k.class_id as "classId",
            (select count(*) from failures f where f.class_id = k.class_id and f.import_id is null
                and ${entered('f.logged_at')}) as "failuresLogged",
            (select count(*) from planned_work w where w.class_id = k.class_id and w.import_id is null
                and ${entered('w.logged_at')}) as "plannedWorkLogged",
            array(select distinct i.file_name from imports i
                   where i.state = 'applied' and ${entered('i.applied_at')}
                     and (exists (select from failures f where f.import_id = i.id and f.class_id = k.class_id)
                       or exists (select from planned_work w where w.import_id = i.id and w.class_id = k.class_id))
                   order by 1) as imports,
            (select count(*) from failures f where f.class_id = k.class_id and ${entered('f.voided_at')}) as voided,
            (select count(distinct a.subject_id) from audit_entries a
              where a.subject = 'failure' and a.action = 'restore' and ${entered('a.at')}
                and exists (select from failures f where f.id = a.subject_id::uuid and f.class_id = k.class_id)) as restored,
            (select count(distinct a.subject_id) from audit_entries a
              where a.subject = 'failure' and a.action = 'correct' and ${entered('a.at')}
                and exists (select from failures f where f.id = a.subject_id::uuid and f.class_id = k.class_id)) as corrected,
            exists (select from audit_entries a where a.subject = 'asset-class' and a.subject_id = k.class_id::text
                     and ${entered('a.at')}) as "settingsChanged",
            exists (select from maintenance_tasks t where t.class_id = k.class_id
                     and (t.starts_on > k.since and t.starts_on <= :until::date
                       or t.ends_on > k.since and t.ends_on <= :until::date)) as "scheduleChanged"
       from unnest(:classIds::uuid[], :sinceDays::date[]) as k(class_id, since)`,
    {
      timeZone,
      until,
      classIds: classes.map(({ classId }) => classId),
      sinceDays: classes.map(({ previousAsOf }) => previousAsOf),
    },
  );
  return new Map(
    rows
      .map((row) => recordChangesSchema.parse(row))
      .map(({ classId, ...changes }) => [classId, changes] as const),
  );
}

/** What the items of some classes are called. */
export async function itemNames(db: Database, classIds: readonly string[]): Promise<Map<string, string>> {
  const { rows } = await db.raw<{ rows: { id: string; itemPlural: string }[] }>(
    `select id, item_plural as "itemPlural" from asset_classes where id = any(?)`,
    [[...classIds]],
  );
  return new Map(rows.map(({ id, itemPlural }) => [id, itemPlural]));
}

/**
 * Stores what a night made different. The same night run again says it anew in place: what was seen stays seen, and
 * what no longer holds goes.
 */
export async function saveNews(
  db: Database,
  asOf: string,
  news: readonly (ClassNews & { classId: string })[],
): Promise<void> {
  await db.raw(
    `delete from class_news n where n.as_of = :asOf
        and not (n.class_id, n.kind) in (
          select * from unnest(:classIds::uuid[], :kinds::text[]))
        -- These are told once: the night that is run again finds the alarm raised and the word said.
        and n.kind not in ('alarm-raised', 'follow-up')`,
    { asOf, classIds: news.map(({ classId }) => classId), kinds: news.map(({ kind }) => kind) },
  );
  if (news.length === 0) return;
  await db.raw(
    `insert into class_news (class_id, as_of, kind, sentence, why, money_per_year_minor)
     select x.class_id, :asOf::date, x.kind, x.sentence, x.why, x.money
       from jsonb_to_recordset(:news) as x(class_id uuid, kind text, sentence text, why text, money bigint)
     on conflict (class_id, as_of, kind) do update
       set sentence = excluded.sentence, why = excluded.why, money_per_year_minor = excluded.money_per_year_minor`,
    {
      asOf,
      news: JSON.stringify(
        news.map(({ classId, kind, sentence, why, moneyPerYearMinor }) => ({
          class_id: classId,
          kind,
          sentence,
          why,
          money: moneyPerYearMinor,
        })),
      ),
    },
  );
}

export interface NewsItem {
  id: string;
  kind: NewsKind;
  asOf: string;
  sentence: string;
  why: string;
  moneyPerYearMinor: number | null;
  seen: boolean;
}

/** What is new about one class, worst first. */
export interface NewsOfClass {
  classId: string;
  className: string;
  /** What it is called today. */
  verdict: Verdict;
  isMarked: boolean;
  news: NewsItem[];
}

const newsRowSchema = z.object({
  id: z.string(),
  kind: z.enum(newsKinds),
  asOf: z.string(),
  sentence: z.string(),
  why: z.string(),
  moneyPerYearMinor: z.number().nullable(),
  seen: z.boolean(),
  classId: z.string(),
  className: z.string(),
  verdict: z.enum(verdicts),
  isMarked: z.boolean(),
});

const rank = `array_position(array['${newsKinds.join("','")}'], n.kind)`;

/**
 * One page of classes with news for a person, the worst first: by the weightiest kind, then by money, then by night.
 *
 * @param seen whether to give what the person has marked as seen, or what they have not.
 */
export async function listNews(
  db: Database,
  personId: string,
  { seen, page, pageSize }: { seen: boolean; page: number; pageSize: number },
): Promise<{ classes: NewsOfClass[]; total: number; items: number }> {
  const is = seen ? 'exists' : 'not exists';
  const wanted = `class_news n where ${is} (
    select from class_news_seen s where s.news_id = n.id and s.person_id = :personId)`;
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `with ranked as (
       select n.class_id, min(${rank}) as best, max(n.money_per_year_minor) as money, max(n.as_of) as latest
         from ${wanted} group by n.class_id
        order by best, money desc nulls last, latest desc, n.class_id
        limit :limit offset :offset)
     select n.id, n.kind, n.as_of as "asOf", n.sentence, n.why, n.money_per_year_minor as "moneyPerYearMinor",
            :seen::boolean as seen, c.id as "classId", c.name as "className", a.verdict,
            c.statutory or c.endangers_people as "isMarked"
       from ranked r
       join class_news n on n.class_id = r.class_id
       join asset_classes c on c.id = r.class_id
       join assessments a on a.id = c.current_assessment_id
      where ${is} (select from class_news_seen s where s.news_id = n.id and s.person_id = :personId)
      order by r.best, r.money desc nulls last, r.latest desc, r.class_id, ${rank}, n.as_of desc`,
    { personId, seen, limit: pageSize, offset: (page - 1) * pageSize },
  );
  const counted = await db.raw<{ rows: { total: number; items: number }[] }>(
    `select count(distinct n.class_id) as total, count(*) as items from ${wanted}`,
    { personId },
  );
  const classes = new Map<string, NewsOfClass>();
  for (const row of rows) {
    const { classId, className, verdict, isMarked, ...item } = newsRowSchema.parse(row);
    const held = classes.get(classId) ?? { classId, className, verdict, isMarked, news: [] };
    held.news.push(item);
    classes.set(classId, held);
  }
  return {
    classes: [...classes.values()],
    total: counted.rows[0]?.total ?? 0,
    items: counted.rows[0]?.items ?? 0,
  };
}

/** Marks news as seen by a person; what is seen already stays so. Ids that are none are passed over. */
export async function markSeen(
  db: Database,
  personId: string,
  newsIds: readonly string[],
  now: Date,
): Promise<void> {
  await db.raw(
    `insert into class_news_seen (person_id, news_id, seen_at)
     select :personId, id, :now from class_news where id = any(:newsIds)
     on conflict do nothing`,
    { personId, newsIds: [...newsIds], now },
  );
}

/** Takes that back. */
export async function markUnseen(db: Database, personId: string, newsIds: readonly string[]): Promise<void> {
  await db('class_news_seen')
    .where('person_id', personId)
    .whereIn('news_id', [...newsIds])
    .delete();
}
