import { z } from 'zod';
import { followUpWords, type FollowUp, type FollowUpWord } from '~/advice/follow-up';
import type { Database } from '../../db/connection';
import { changeActions } from './schedule-change';

const followedSchema = z.object({
  id: z.string(),
  classId: z.string(),
  action: z.enum(changeActions),
  /** Clock units; null for run to failure. */
  from: z.number().nullable(),
  to: z.number().nullable(),
  takesEffectOn: z.string(),
  /** Since when the schedule before it had been in force by an earlier change; null where none is known. */
  previousEffectOn: z.string().nullable(),
  /** When a later change of the whole class took over; null while it is in force. */
  nextEffectOn: z.string().nullable(),
  /** Of a trial; empty for the whole class. */
  assetIds: z.array(z.string()),
});
/** A change in effect, as much of it as following it up needs. */
export type FollowedChange = z.infer<typeof followedSchema>;

/**
 * The changes that are in effect by the end of a day, by class. What a change of the whole class, or taking one back,
 * made of the schedule is where the time before a change starts and the time after it ends; trials on a part leave
 * the class's schedule alone.
 */
export async function readFollowedChanges(
  db: Database,
  asOf: string,
): Promise<Map<string, FollowedChange[]>> {
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `with turns as (
       select e.id, e.class_id, e.decided_at, turn.day
         from schedule_changes e cross join lateral unnest(array[e.takes_effect_on, e.taken_back_on]) as turn (day)
        where e.state in ('approved', 'taken-back') and e.action <> 'trial' and turn.day is not null
          and (e.taken_back_on is null or e.taken_back_on > e.takes_effect_on)
     )
     select x.id, x.class_id as "classId", x.action, x.from_interval::float8 as "from", x.to_interval::float8 as "to",
            x.takes_effect_on as "takesEffectOn",
            (select max(t.day) from turns t
              where t.class_id = x.class_id and t.id <> x.id and t.day < x.takes_effect_on) as "previousEffectOn",
            (select min(t.day) from turns t
              where t.class_id = x.class_id and t.id <> x.id and t.day >= x.takes_effect_on
                and t.decided_at > x.decided_at) as "nextEffectOn",
            array(select asset_id::text from schedule_change_assets a where a.change_id = x.id) as "assetIds"
       from schedule_changes x
      where x.state = 'approved' and x.takes_effect_on <= :asOf
      order by x.class_id, x.takes_effect_on`,
    { asOf },
  );
  const changes = new Map<string, FollowedChange[]>();
  for (const row of rows) {
    const change = followedSchema.parse(row);
    changes.set(change.classId, [...(changes.get(change.classId) ?? []), change]);
  }
  return changes;
}

/** What a follow-up says now, and what it said before. */
export interface FollowUpNews {
  changeId: string;
  classId: string;
  wordBefore: FollowUpWord | null;
  word: FollowUpWord;
  sentence: string;
}

const newsSchema = z.object({
  changeId: z.string(),
  classId: z.string(),
  wordBefore: z.enum(followUpWords).nullable(),
});

/**
 * Stores a night's follow-ups, unless a later night's are there already.
 *
 * @returns those whose word is another than before.
 */
export async function saveFollowUps(
  db: Database,
  asOf: string,
  followUps: readonly { changeId: string; followUp: FollowUp }[],
): Promise<FollowUpNews[]> {
  const news: FollowUpNews[] = [];
  for (const { changeId, followUp } of followUps) {
    const { rows } = await db.raw<{ rows: unknown[] }>(
      `with held as (select id, class_id, follow_up ->> 'word' as word from schedule_changes where id = :changeId for update)
       update schedule_changes x set follow_up = :followUp, follow_up_as_of = :asOf
         from held
        where x.id = held.id and (x.follow_up_as_of is null or x.follow_up_as_of <= :asOf)
       returning x.id as "changeId", x.class_id as "classId", held.word as "wordBefore"`,
      { changeId, asOf, followUp: JSON.stringify(followUp) },
    );
    if (rows[0] === undefined) continue;
    const stored = newsSchema.parse(rows[0]);
    if (stored.wordBefore !== followUp.word) {
      news.push({ ...stored, word: followUp.word, sentence: followUp.sentence });
    }
  }
  return news;
}
