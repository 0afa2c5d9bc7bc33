import { formatNoun } from '~/format/number';
import type { LeftOutReason } from './class-evidence';

/** How many records took no part for a reason, in words. */
export function leftOutSentence(reason: LeftOutReason, count: number): string {
  const records = formatNoun(count, 'record');
  switch (reason) {
    case 'voided':
      return `${records} voided.`;
    case 'outside-cause':
      return `${formatNoun(count, 'failure')} with an outside cause: not a failure of the item; where it was renewed, its life is cut short there.`;
    case 'before-watch':
      return `${records} from before the watch began: a renewal among them dates the item, the rest says nothing.`;
    case 'after-watch':
      return `${records} from after the watch ended or the day was over.`;
    case 'inspection':
      return `${formatNoun(count, 'inspection, service or test', 'inspections, services and tests')}: they renew nothing and touch no clock.`;
    case 'no-duty':
      return `${records} of assets without a number of hours a day, so that their operating hours are not known.`;
  }
}
