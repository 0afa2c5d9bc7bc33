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
};
