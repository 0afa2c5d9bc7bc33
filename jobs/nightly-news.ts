import { alarmNews, followUpNews, newsOf } from '~/advice/class-news';
import type { RaisedAlarm } from '~/advice/raise-alarms';
import type { FollowUpNews } from '~/models/change-follow-ups.server';
import { itemNames, saveNews, type ChangedClass } from '~/models/class-news.server';
import type { Database } from '../db/connection';

interface NightNews {
  changed: readonly ChangedClass[];
  raised: readonly RaisedAlarm[];
  followUps: readonly FollowUpNews[];
}

/**
 * Writes down what a night made different, in the transaction that puts it in force: what changed against the night
 * before, the alarms it raised, and the follow-ups whose word is another.
 */
export async function settleNews(
  transaction: Database,
  asOf: string,
  { changed, raised, followUps }: NightNews,
): Promise<void> {
  const alarms = new Map<string, RaisedAlarm[]>();
  for (const alarm of raised) alarms.set(alarm.classId, [...(alarms.get(alarm.classId) ?? []), alarm]);
  const names = await itemNames(transaction, [...alarms.keys()]);
  await saveNews(transaction, asOf, [
    ...changed.flatMap(({ classId, ...comparison }) =>
      newsOf(comparison).map((news) => ({ classId, ...news })),
    ),
    ...[...alarms].flatMap(([classId, ofClass]) => {
      const news = alarmNews(names.get(classId) ?? 'items', ofClass);
      return news === null ? [] : [{ classId, ...news }];
    }),
    ...latestOf(followUps).map(({ classId, word, sentence }) => ({
      classId,
      ...followUpNews(word, sentence),
    })),
  ]);
}

/** One a class: of several changes in effect, the latest speaks. */
function latestOf(followUps: readonly FollowUpNews[]): FollowUpNews[] {
  return [...new Map(followUps.map((news) => [news.classId, news])).values()];
}
