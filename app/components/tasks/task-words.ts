import type { ScheduleKeeping } from '~/advice/schedule-keeping';
import { everyWords } from '~/advice/practicable-interval';
import { formatNoun, formatPercent } from '~/format/number';
import type { MaintenanceTask } from '~/models/maintenance-tasks.server';
import type { TaskKind } from '~/models/task-kinds';

export const kindWords: Record<TaskKind, string> = {
  replace: 'replace',
  restore: 'restore to as good as new',
  inspect: 'inspect',
  service: 'service',
  test: 'test',
};

/** "every 6 months", "every 2 000 h". */
export function taskEvery({ intervalDays, intervalHours }: MaintenanceTask): string {
  return intervalDays !== null
    ? everyWords(intervalDays, 'calendar-days')
    : everyWords(intervalHours ?? 0, 'operating-hours');
}

/** How well it is kept, with the count behind it. */
export function keepingWords(keeping: ScheduleKeeping | null): string {
  if (keeping === null) return 'goes by the meter; when it was due cannot be told from dates';
  const { due, kept, early, late, overdue } = keeping;
  const now = overdue === 0 ? '' : `; ${formatNoun(overdue, 'asset')} overdue now`;
  if (due === 0) return `no second visit on record yet${now}`;
  const off = [early > 0 && `${early} early`, late > 0 && `${late} late`].filter(Boolean).join(', ');
  return `${formatPercent(kept / due)} of ${formatNoun(due, 'visit')} within a tenth of the interval${off && ` (${off})`}${now}`;
}
