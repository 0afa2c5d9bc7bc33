import { daysAMonth } from '~/advice/practicable-interval';
import type { PricedSchedule } from '~/advice/schedule-findings';
import { CostByIntervalChart } from '~/charts/cost-by-interval-chart';

interface CostCurveProps {
  schedule: PricedSchedule;
  clock: 'calendar-days' | 'operating-hours';
  /** ISO 4217. */
  currency: string;
  title?: string;
  /** An interval somebody tries, clock units, and what it costs. */
  tried?: { interval: number; cost: number };
}

/** Cost a year by interval, in months on the calendar and in hours on the meter. */
export function CostCurve({ schedule, clock, currency, title, tried }: CostCurveProps) {
  const { curve, changes, today, current, best, supportedAge } = schedule;
  const unit = clock === 'operating-hours' ? 1 : daysAMonth;
  const bestPoint =
    changes.best !== null && best.interval !== null
      ? { interval: best.interval / unit, cost: changes.best.costPerYear.value }
      : undefined;
  const { value, low, high } = changes.stop.costPerYear;
  return (
    <CostByIntervalChart
      title={title}
      curve={curve.map((point) => ({ ...point, interval: point.interval / unit }))}
      runToFailure={{ cost: value, low, high }}
      today={current.interval === null ? undefined : { interval: current.interval / unit, cost: today.value }}
      best={bestPoint}
      tried={tried && { interval: tried.interval / unit, cost: tried.cost }}
      supportedUntil={supportedAge === null ? undefined : supportedAge / unit}
      currency={currency}
      intervalUnit={clock === 'operating-hours' ? 'hour' : 'month'}
    />
  );
}
