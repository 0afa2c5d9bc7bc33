import { DateTime } from 'luxon';

/**
 * The present moment. Tests, and only tests (INTERVALE_TEST=1), may set it with INTERVALE_NOW, an ISO instant.
 *
 * @throws Error when INTERVALE_NOW is set in a test and is not an instant.
 */
export function now(): Date {
  const pinned = process.env.INTERVALE_TEST === '1' ? process.env.INTERVALE_NOW : undefined;
  if (!pinned) return new Date();
  const moment = new Date(pinned);
  if (Number.isNaN(moment.getTime())) throw new Error(`INTERVALE_NOW is not an ISO instant: ${pinned}`);
  return moment;
}

/**
 * The day it is in a time zone, as `YYYY-MM-DD`.
 *
 * @param timeZone IANA name, such as `Europe/London`.
 * @throws Error when the zone is not known.
 */
export function today(timeZone: string): string {
  const day = DateTime.fromJSDate(now(), { zone: timeZone }).toISODate();
  if (!day) throw new Error(`Unknown time zone: ${timeZone}`);
  return day;
}
