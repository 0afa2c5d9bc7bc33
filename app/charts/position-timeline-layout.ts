import { formatCalendarDate } from '~/format/date';
import { timelineKinds, type Timeline, type TimelineKind } from '~/advice/timeline';
import { tenth } from './plot-frame';

export const timelineNames: Record<TimelineKind, string> = {
  'failure-renewed': 'failed, renewed',
  'failure-patched': 'failed, patched',
  outside: 'outside cause',
  renewal: 'renewed by plan',
  visit: 'visited by plan',
};

const height = 34;
const margin = 7;

/**
 * Where each event stands on a line from the first day to the last, in drawing units; events outside it are left out.
 * Null where the line has no length.
 */
export function layoutTimeline({ from, to, events }: Timeline, width: number) {
  const [start, end] = [Date.parse(from), Date.parse(to)];
  if (!(end > start)) return null;
  const at = (day: string) =>
    tenth(margin + ((Date.parse(day) - start) / (end - start)) * (width - 2 * margin));
  const marks = events
    .filter(({ day }) => day >= from && day <= to)
    .map(({ day, kind }) => ({ x: at(day), kind }))
    // Visits first, so that no tick covers a failure.
    .sort((a, b) => timelineKinds.indexOf(b.kind) - timelineKinds.indexOf(a.kind));
  const years: { x: number; year: string }[] = [];
  for (let year = Number(from.slice(0, 4)) + 1; `${year}-01-01` < to; year += 1) {
    years.push({ x: at(`${year}-01-01`), year: String(year) });
  }
  return { width, height, y: height / 2, from: at(from), to: at(to), marks, years };
}

/** What a timeline shows, in a sentence. */
export function timelineSentence({ from, to, events }: Timeline): string {
  const counted = timelineKinds
    .map((kind) => ({ kind, count: events.filter((event) => event.kind === kind).length }))
    .filter(({ count }) => count > 0)
    .map(({ kind, count }) => `${count} × ${timelineNames[kind]}`);
  const what = counted.length === 0 ? 'nothing recorded' : counted.join(', ');
  return `${formatCalendarDate(from)} to ${formatCalendarDate(to)}: ${what}.`;
}
