import { z } from 'zod';
import type { Database } from '../../db/connection';

/** What every page needs to know of the organisation: its name, the zone its days are in, its money. */
export interface Organisation {
  name: string;
  /** IANA name, such as `Europe/London`. */
  timeZone: string;
  /** ISO 4217 code, such as `GBP`. */
  currency: string;
  /** Share of lead times in which the spares held are to be enough. */
  serviceLevel: number;
}

/** What stands in before anybody has entered the organisation. */
const unnamed: Organisation = { name: 'Intervale', timeZone: 'UTC', currency: 'GBP', serviceLevel: 0.95 };

const rowSchema = z.object({
  name: z.string(),
  time_zone: z.string(),
  currency: z.string(),
  service_level: z.number(),
});

/** The one organisation of this database; a neutral stand-in while none has been entered. */
export async function readOrganisation(db: Database): Promise<Organisation> {
  const row: unknown = await db('organisations').first('name', 'time_zone', 'currency', 'service_level');
  if (!row) return unnamed;
  const { name, time_zone, currency, service_level } = rowSchema.parse(row);
  return { name, timeZone: time_zone, currency, serviceLevel: service_level };
}
