import { href } from 'react-router';
import { z } from 'zod';
import type { CorrectableFilter } from '~/models/correctable-records.server';
import { correctableSorts } from '~/models/correctable-sorts';
import { effects } from '~/models/failure';

const day = z.iso.date().optional().catch(undefined);
const stateSchema = z.object({
  site: z.uuid().optional().catch(undefined),
  mode: z
    .union([z.uuid(), z.literal('none')])
    .optional()
    .catch(undefined),
  effect: z.enum(effects).optional().catch(undefined),
  outside: z.enum(['yes', 'no']).optional().catch(undefined),
  voided: z.enum(['yes', 'all']).optional().catch(undefined),
  from: day,
  to: day,
  tag: z
    .string()
    .trim()
    .max(60)
    .transform((text) => text || undefined)
    .optional()
    .catch(undefined),
  sort: z.enum(correctableSorts).catch('day'),
  direction: z.enum(['asc', 'desc']).catch('desc'),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
  /** A failure that is ticked from the start, for a link that leads to it. */
  record: z.uuid().optional().catch(undefined),
});

/** Which failures the list shows, in what order, and which page of them. */
export type CleanState = z.infer<typeof stateSchema>;

export function listStateOf(request: Request): CleanState {
  return stateSchema.parse(Object.fromEntries(new URL(request.url).searchParams));
}

/** The part of it that says which failures. */
export function filterOf(state: CleanState): CorrectableFilter {
  const { site: siteId, mode, effect, outside, voided, from, to, tag } = state;
  return { siteId, mode, effect, outside, voided, from, to, tag };
}

/** The list's address; what is as usual is left out of it, and so is what was ticked. */
export function addressOf(classId: string, state: CleanState): string {
  const { sort, direction, page, site, mode, effect, outside, voided, from, to, tag } = state;
  const search = new URLSearchParams();
  const filter = { site, mode, effect, outside, voided, from, to, tag };
  for (const [name, value] of Object.entries(filter)) if (value !== undefined) search.set(name, value);
  if (sort !== 'day') search.set('sort', sort);
  if (direction !== 'desc') search.set('direction', direction);
  if (page > 1) search.set('page', String(page));
  const query = search.toString();
  return href('/classes/:classId/clean', { classId }) + (query && `?${query}`);
}
