import { z } from 'zod';
import { monthsAhead, yearAheadSorts } from '~/models/year-ahead-sorts';

/** What the address may say of the failures to come; anything else is as if it said nothing. */
export const yearAheadSearch = z.object({
  site: z.uuid().optional().catch(undefined),
  months: z.enum(monthsAhead).catch('12'),
  by: z.enum(['class', 'site']).catch('class'),
  sort: z.enum(yearAheadSorts).catch('expected'),
  direction: z.enum(['asc', 'desc']).catch('desc'),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
});
export type YearAheadState = z.infer<typeof yearAheadSearch>;

/** The query of the list in a state; what is as usual is not written out. */
export function yearAheadQuery({ site, months, by, sort, direction, page }: YearAheadState): string {
  const search = new URLSearchParams();
  if (site) search.set('site', site);
  if (months !== '12') search.set('months', months);
  if (by !== 'class') search.set('by', by);
  if (sort !== 'expected') search.set('sort', sort);
  if (direction !== 'desc') search.set('direction', direction);
  if (page > 1) search.set('page', String(page));
  const query = search.toString();
  return query && `?${query}`;
}
