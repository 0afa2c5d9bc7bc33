import type { Database } from '../../db/connection';

/** The sites a person may see: all of them, or those with these ids. */
export type SiteScope = readonly string[] | 'all';

export interface Site {
  readonly id: string;
  readonly name: string;
}

/** Sites within the scope, by name. */
export async function listSites(db: Database, scope: SiteScope): Promise<Site[]> {
  const query = db('sites').select<Site[]>('id', 'name').orderByRaw('lower(name)');
  if (scope !== 'all') query.whereIn('id', [...scope]);
  return query;
}
