import { z } from 'zod';
import type { Database } from '../../db/connection';
import type { SiteScope } from './sites.server';

const foundSchema = z.object({
  kind: z.enum(['class', 'asset']),
  id: z.string(),
  name: z.string(),
  /** Of an asset its class and site, of a class how many assets it has. */
  detail: z.string(),
});
/** A class or an asset that a search found. */
export type Found = z.output<typeof foundSchema>;

/** From so many letters on any part of a tag is found, below only how it begins. */
const trigram = 3;

/**
 * Classes by any part of their name, then assets by their tag: what is called exactly so first, then what begins so, then what holds
 * it, each in order of name. Within the scope; upper and lower case are the same.
 *
 * @param limit the most of each kind.
 */
export async function searchFor(
  db: Database,
  scope: SiteScope,
  words: string,
  limit: number,
): Promise<Found[]> {
  const query = words.trim().toLowerCase();
  if (query === '') return [];
  const escaped = query.replace(/[\\%_]/g, '\\$&');
  const inScope = scope === 'all' ? '' : 'and a.site_id = any(:siteIds)';
  const bindings = {
    query,
    begins: `${escaped}%`,
    holds: query.length >= trigram ? `%${escaped}%` : `${escaped}%`,
    anywhere: `%${escaped}%`,
    limit,
    ...(scope === 'all' ? {} : { siteIds: [...scope] }),
  };
  const rank = (column: string) =>
    `case when ${column} = :query then 0 when ${column} like :begins then 1 else 2 end`;
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `(select 'class' as kind, c.id, c.name, count(a.id) || case when count(a.id) = 1 then ' asset' else ' assets' end as detail,
             ${rank('lower(c.name)')} as rank
        from asset_classes c left join assets a on a.class_id = c.id ${inScope}
       where lower(c.name) like :anywhere
       group by c.id ${scope === 'all' ? '' : 'having count(a.id) > 0'}
       order by rank, lower(c.name) limit :limit)
     union all
     (select 'asset', a.id, a.tag, c.name || ', ' || s.name, ${rank('lower(a.tag)')} as rank
        from assets a join asset_classes c on c.id = a.class_id join sites s on s.id = a.site_id
       where lower(a.tag) like :holds ${inScope}
       order by rank, lower(a.tag) limit :limit)`,
    bindings,
  );
  return rows.map((row) => foundSchema.parse(row));
}
