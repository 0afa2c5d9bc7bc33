import type { ClassSettings, ConfirmedChange } from '~/models/asset-classes.server';

import { formatMoney } from '~/format/money';
import { formatNoun } from '~/format/number';
import { availabilityFieldText } from './availability';

export const clockWords: Record<ClassSettings['clock'], string> = {
  'calendar-days': 'Days on the calendar',
  'operating-hours': 'Hours it runs',
};

export const settingLabels: Record<keyof ClassSettings, string> = {
  name: 'name',
  itemSingular: 'one of them',
  itemPlural: 'several of them',
  clock: 'clock',
  criticality: 'how much it matters',
  statutory: 'required by law or code',
  endangersPeople: 'can endanger people',
  hiddenFailures: 'failures stay hidden',
  plannedCostMinor: 'cost of a planned replacement',
  failureCostMinor: 'cost of a failure',
  groupPlannedCostMinor: 'cost of a planned replacement when all are done in one visit',
  sparesLeadTimeDays: 'lead time of spares',
  requiredAvailability: 'availability the hidden function must have',
};

/** One setting's value in words. */
export function settingWords(settings: ClassSettings, name: keyof ClassSettings, currency: string): string {
  switch (name) {
    case 'clock':
      return clockWords[settings.clock].toLowerCase();
    case 'plannedCostMinor':
    case 'failureCostMinor':
    case 'groupPlannedCostMinor': {
      const amount = settings[name];
      return amount === null ? 'not known' : formatMoney(amount, currency);
    }
    case 'sparesLeadTimeDays': {
      const days = settings[name];
      return days === null ? 'not known' : formatNoun(days, 'day');
    }
    case 'requiredAvailability': {
      const share = settings[name];
      return share === null ? 'not said' : `${availabilityFieldText(share)} %`;
    }
    case 'statutory':
    case 'endangersPeople':
    case 'hiddenFailures':
      return settings[name] ? 'yes' : 'no';
    default:
      return String(settings[name]);
  }
}

/** What a person says yes to when a change takes something away. */
export const confirmWords: Record<ConfirmedChange, string> = {
  'statutory-off':
    'Yes, no law or code asks for the work on this class: advice may then say to stop, lengthen or try a longer interval.',
  'endangers-people-off':
    'Yes, a failure of this class endangers nobody: advice may then say to stop, lengthen or try a longer interval.',
  clock:
    'Yes, count its age anew: the verdict is set aside until the next night has computed it on the new clock.',
};

/** The change that waits for that yes. */
export const unconfirmedWords: Record<ConfirmedChange, string> = {
  'statutory-off': 'Confirm that no law or code asks for the work.',
  'endangers-people-off': 'Confirm that a failure endangers nobody.',
  clock: 'Confirm the change of the clock.',
};
