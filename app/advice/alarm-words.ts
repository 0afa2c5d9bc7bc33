import { formatCount, formatNoun } from '~/format/number';
import type { AlarmKind } from './alarm-findings';
import { capitalised } from './capitalised';

/** What an alarm claims, as a title: without a full stop. */
export function alarmTitle(kind: AlarmKind, itemPlural: string): string {
  const items = capitalised(itemPlural);
  switch (kind) {
    case 'rate-rising':
      return `${items} fail more often than they used to`;
    case 'rate-falling':
      return `${items} fail less often than they used to`;
    case 'old-first':
      return `The old ${itemPlural} fail first`;
    case 'young-first':
      return `The young ${itemPlural} fail first`;
  }
}

/** The largest odds worth telling apart. */
const mostOdds = 1_000_000;

/**
 * How strong the evidence of an alarm is: by Ville's inequality a class without any change ever gets so far
 * with chance at most 1/E, however often one looks.
 *
 * @param logE ln E that raised it.
 */
export function alarmEvidence({ logE, failures }: { logE: number; failures: number }): string {
  const behind = `${formatNoun(failures, 'failure')} ${failures === 1 ? 'is' : 'are'} behind it.`;
  const odds = Math.floor(Math.exp(Math.min(logE, Math.log(mostOdds))) + 1e-9);
  const chance =
    odds >= mostOdds ? `under 1 in ${formatCount(mostOdds)}` : `at most 1 in ${formatCount(odds)}`;
  return `${behind} Looked at every night for ever, a class where nothing of the kind goes on gets this far with a chance of ${chance}; an alarm needs 1 in 20 or less.`;
}

/**
 * What to do about it.
 *
 * @param isMarked whether law or the safety of people decides on the class: then nothing here does.
 */
export function alarmAction(kind: AlarmKind, isMarked: boolean): string {
  if (isMarked) {
    return 'Take it to the responsible licensed person. The local code decides on intervals and methods; make a failed item safe first.';
  }
  switch (kind) {
    case 'rate-rising':
      return 'Find out what has changed: what the items sit in, their use, water, voltage, a supplier, or how failures are logged.';
    case 'rate-falling':
      return 'Make sure that failures are still being logged, then find out what improved before changing anything.';
    case 'old-first':
      return 'Look at question 3: a schedule may pay.';
    case 'young-first':
      return 'Look at parts, fitting and start-up: every replacement starts the risky time anew.';
  }
}
