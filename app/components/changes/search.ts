import { z } from 'zod';
import { changeGroups, changeSorts } from '~/models/schedule-change';
import type { ChangeListFilter } from '~/models/schedule-changes.server';

/** What the address may say of the list of changes; anything else is as if it said nothing. */
export const changesSearch = z.object({
  group: z.enum(changeGroups).optional().catch(undefined),
  site: z.uuid().optional().catch(undefined),
  class: z.uuid().optional().catch(undefined),
  sort: z.enum(changeSorts).catch('state'),
  direction: z.enum(['asc', 'desc']).catch('asc'),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
});
export type ChangesState = z.infer<typeof changesSearch>;

/** The query of the list in a state; what is as usual is not written out. */
export function changesQuery(state: ChangesState): string {
  const search = new URLSearchParams();
  if (state.group) search.set('group', state.group);
  if (state.site) search.set('site', state.site);
  if (state.class) search.set('class', state.class);
  if (state.sort !== 'state') search.set('sort', state.sort);
  if (state.direction !== 'asc') search.set('direction', state.direction);
  if (state.page > 1) search.set('page', String(state.page));
  const query = search.toString();
  return query && `?${query}`;
}

/** What the models filter and sort by. */
export function changesFilter(state: ChangesState): ChangeListFilter {
  return {
    group: state.group,
    classId: state.class,
    siteId: state.site,
    sort: state.sort,
    direction: state.direction,
  };
}
