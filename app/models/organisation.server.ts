import { z } from 'zod';
import type { Database } from '../../db/connection';

/** What every page needs to know of the organisation: its name, the zone its days are in, its money. */
export interface Organisation {
  name: string;
  /** IANA name, such as `Europe/London`. */
  timeZone: string;
  /** ISO 4217 code, such as `GBP`. */
  currency: string;
}

/** What stands in before anybody has entered the organisation. */
const unnamed: Organisation = { name: 'Intervale', timeZone: 'UTC', currency: 'GBP' };

const rowSchema = z.object({ name: z.string(), time_zone: z.string(), currency: z.string() });

/** The one organisation of this database; a neutral stand-in while none has been entered. */
export async function readOrganisation(db: Database): Promise<Organisation> {
  const row: unknown = await db('organisations').first('name', 'time_zone', 'currency');
  if (!row) return unnamed;
  const { name, time_zone, currency } = rowSchema.parse(row);
  return { name, timeZone: time_zone, currency };
}
