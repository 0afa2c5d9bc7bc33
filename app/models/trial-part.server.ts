import type { Database } from '../../db/connection';

/** A site with the assets of a class that are in service there. */
export interface SiteOfClass {
  id: string;
  name: string;
  assets: number;
}

/** Where a class's assets are today. */
export async function listSitesOfClass(db: Database, classId: string): Promise<SiteOfClass[]> {
  const { rows } = await db.raw<{ rows: SiteOfClass[] }>(
    `select s.id, s.name, count(*) as assets
       from assets a join sites s on s.id = a.site_id
      where a.class_id = ? and a.retired_on is null
      group by s.id order by lower(s.name)`,
    [classId],
  );
  return rows;
}

/**
 * The assets of a class that a trial names, by site or by tag.
 *
 * @returns `unknownTags` are tags that no asset in service of the class has.
 */
export async function findPart(
  db: Database,
  classId: string,
  { sites, tags }: { sites: readonly string[]; tags: readonly string[] },
): Promise<{ assetIds: string[]; unknownTags: string[]; ofAssets: number }> {
  const { rows } = await db.raw<{ rows: { id: string; tag: string; chosen: boolean }[] }>(
    `select id, lower(tag) as tag, site_id = any(:sites::uuid[]) or lower(tag) = any(:tags::text[]) as chosen
       from assets where class_id = :classId and retired_on is null`,
    { classId, sites: [...sites], tags: tags.map((tag) => tag.toLowerCase()) },
  );
  const known = new Set(rows.map(({ tag }) => tag));
  return {
    assetIds: rows.filter(({ chosen }) => chosen).map(({ id }) => id),
    unknownTags: tags.filter((tag) => !known.has(tag.toLowerCase())),
    ofAssets: rows.length,
  };
}
