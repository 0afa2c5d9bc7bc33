import type { CautionCode } from './conclusion';

/** What a caution is called where there is no room for its sentence. */
export const cautionNames: Record<CautionCode, string> = {
  'endangers-people': 'endangers people',
  statutory: 'statutory',
  'few-failures': 'few failures',
  'masked-by-schedule': 'masked by schedule',
  'ages-unknown': 'ages unknown',
  'clock-assumed': 'clock assumed',
  'logging-gap': 'logging gap',
  'mixed-ages': 'mixed ages',
  'same-cause': 'same cause',
  'few-bad-positions': 'few bad positions',
  'mixed-modes': 'mixed modes',
  'poor-fit': 'poor fit',
  'beyond-data': 'beyond the data',
  'after-visit': 'after a visit',
  'zero-lives': 'same-day failures',
  'rounded-dates': 'rounded dates',
  'costs-missing': 'costs missing',
};
