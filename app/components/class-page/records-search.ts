import { z } from 'zod';
import { classRecordSorts } from '~/models/class-record-sorts';

const day = z.iso.date().optional().catch(undefined);

/** What the address may say of a class's records; anything else is as if it said nothing. */
export const recordsSearch = z.object({
  kind: z.enum(['failure', 'planned-work']).optional().catch(undefined),
  site: z.uuid().optional().catch(undefined),
  from: day,
  to: day,
  voided: z.enum(['yes', 'no']).optional().catch(undefined),
  sort: z.enum(classRecordSorts).catch('day'),
  direction: z.enum(['asc', 'desc']).catch('desc'),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
});
export type RecordsState = z.infer<typeof recordsSearch>;

/** The query of the list in a state; what is as usual is not written out. */
export function recordsQuery({ sort, direction, page, ...filter }: RecordsState): string {
  const search = new URLSearchParams();
  for (const [name, value] of Object.entries(filter)) if (value !== undefined) search.set(name, value);
  if (sort !== 'day') search.set('sort', sort);
  if (direction !== 'desc') search.set('direction', direction);
  if (page > 1) search.set('page', String(page));
  const query = search.toString();
  return query && `?${query}`;
}
