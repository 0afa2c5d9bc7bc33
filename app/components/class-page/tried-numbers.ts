import { daysAMonth } from '~/advice/practicable-interval';
import { tryInterval } from '~/advice/price-schedule';
import type { Change, PricedSchedule, ScheduleFindings } from '~/advice/schedule-findings';
import { moneyFieldText, parseMoney } from '~/models/money';

/** What stands in the three fields, as text. */
export interface TriedFields {
  readonly interval: string;
  readonly planned: string;
  readonly failure: string;
}

export type TriedErrors = Partial<Record<keyof TriedFields, string>>;

interface TryContext {
  readonly schedule: ScheduleFindings;
  readonly clock: 'calendar-days' | 'operating-hours';
  readonly currency: string;
}

/** Clock units in the unit an interval is tried in: months on the calendar, hours on the meter. */
export const triedUnit = (clock: TryContext['clock']) => (clock === 'operating-hours' ? 1 : daysAMonth);

/** The night's own numbers, which give the night's own answer. */
export function fieldsOfTheNight({ schedule, clock, currency }: TryContext): TriedFields {
  const costs = schedule.kind === 'priced' ? schedule.costs : null;
  const interval =
    (schedule.kind === 'priced' ? schedule.best.interval : null) ?? schedule.current.interval ?? null;
  const money = (amount: number | undefined) =>
    amount === undefined ? '' : moneyFieldText(amount, currency);
  return {
    interval: interval === null ? '' : String(Number((interval / triedUnit(clock)).toFixed(1))),
    planned: money(costs?.plannedMinor),
    failure: money(costs?.failureMinor),
  };
}

export type Tried =
  | {
      readonly kind: 'priced';
      readonly schedule: PricedSchedule;
      readonly change: Change;
      readonly interval: number | null;
    }
  | { readonly kind: 'errors'; readonly errors: TriedErrors }
  /** Extreme numbers have no price that can be told. */
  | { readonly kind: 'no-price' };

/** Prices what stands in the fields; an empty interval is run to failure. */
export function tryNumbers(fields: TriedFields, { schedule, clock, currency }: TryContext): Tried {
  const interval = fields.interval.trim() === '' ? null : Number(fields.interval.replace(',', '.'));
  const planned = parseMoney(fields.planned, currency);
  const failure = parseMoney(fields.failure, currency);
  const errors: TriedErrors = {
    ...(interval === null || interval > 0
      ? {}
      : { interval: 'Give a number above 0, or leave it empty for run to failure.' }),
    ...(planned !== undefined && planned > 0
      ? {}
      : { planned: 'Give an amount above 0, such as 180 or 180.50.' }),
    ...(failure !== undefined && failure > 0 ? {} : { failure: 'Give an amount above 0, such as 1450.' }),
  };
  if (Object.keys(errors).length > 0 || !planned || !failure) return { kind: 'errors', errors };
  const inClock = interval === null ? null : interval * triedUnit(clock);
  const tried = tryInterval(
    schedule,
    { interval: inClock, plannedMinor: planned, failureMinor: failure },
    clock,
  );
  return tried === null ? { kind: 'no-price' } : { kind: 'priced', ...tried, interval: inClock };
}
