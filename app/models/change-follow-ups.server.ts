import { z } from 'zod';
import { followUpWords, type FollowUp, type FollowUpWord } from '~/advice/follow-up';
import type { Database } from '../../db/connection';
import { changeActions } from './schedule-change';

const followedSchema = z.object({
  id: z.string(),
  classId: z.string(),
  action: z.enum(changeActions),
  takesEffectOn: z.string(),
  /** Since when the schedule before it had been in force by an earlier change; null where none is known. */
  previousEffectOn: z.string().nullable(),
  /** Of a trial; empty for the whole class. */
  assetIds: z.array(z.string()),
});
/** A change in effect, as much of it as following it up needs. */
export type FollowedChange = z.infer<typeof followedSchema>;

/** The changes that are in effect by the end of a day, by class. */
export async function readFollowedChanges(
  db: Database,
  asOf: string,
): Promise<Map<string, FollowedChange[]>> {
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select x.id, x.class_id as "classId", x.action, x.takes_effect_on as "takesEffectOn",
            (select max(greatest(e.takes_effect_on, coalesce(e.taken_back_on, e.takes_effect_on)))::date
               from schedule_changes e
              where e.class_id = x.class_id and e.id <> x.id and e.state in ('approved', 'taken-back')
                and e.takes_effect_on < x.takes_effect_on) as "previousEffectOn",
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
