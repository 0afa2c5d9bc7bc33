import { z } from 'zod';
import { verdicts } from '~/advice/verdict';
import { classSortKeys } from '~/models/class-sort';

/** What the address may say of the list of classes; anything else is as if it said nothing. */
export const classesSearch = z.object({
  site: z.uuid().optional().catch(undefined),
  verdict: z
    .enum([...verdicts, 'not-assessed'])
    .optional()
    .catch(undefined),
  statutory: z.enum(['yes', 'no']).optional().catch(undefined),
  sort: z.enum(classSortKeys).catch('attention'),
  direction: z.enum(['asc', 'desc']).catch('desc'),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
});
export type ClassesState = z.infer<typeof classesSearch>;

/** The filter and order of a state, as the list of classes takes them. */
export function classesFilter({ site, verdict, statutory, sort, direction }: ClassesState) {
  return {
    siteId: site,
    verdict,
    statutory: statutory && statutory === 'yes',
    sort,
    direction,
  };
}

/** The query of the list in a state; what is as usual is not written out. */
export function classesQuery({ site, verdict, statutory, sort, direction, page }: ClassesState): string {
  const search = new URLSearchParams();
  if (site) search.set('site', site);
  if (verdict) search.set('verdict', verdict);
  if (statutory) search.set('statutory', statutory);
  if (sort !== 'attention') search.set('sort', sort);
  if (direction !== 'desc') search.set('direction', direction);
  if (page > 1) search.set('page', String(page));
  const query = search.toString();
  return query && `?${query}`;
}
