import type { ClockKind } from './class-evidence';
import { changeWords, everyWords } from './practicable-interval';
import type { Action } from './proposal';

interface ChangeInWords {
  readonly action: Extract<Action, 'start' | 'shorten' | 'lengthen' | 'stop' | 'trial'>;
  /** Clock units; null for run to failure. */
  readonly from: number | null;
  readonly to: number | null;
}

/** What a change does to a schedule, in a line: "Shorten from 12 months to 5". */
export function changeInWords({ action, from, to }: ChangeInWords, clock: ClockKind): string {
  const span =
    from !== null && to !== null ? changeWords(from, to, clock) : to !== null ? everyWords(to, clock) : '';
  switch (action) {
    case 'start':
      return `Start replacing ${span}`;
    case 'shorten':
      return `Shorten ${span}`;
    case 'lengthen':
      return `Lengthen ${span}`;
    case 'stop':
      return from === null ? 'Run to failure' : `Stop replacing ${everyWords(from, clock)}; run to failure`;
    case 'trial':
      return from === null ? `Try replacing ${span} on a part` : `Try ${span} on a part`;
  }
}
