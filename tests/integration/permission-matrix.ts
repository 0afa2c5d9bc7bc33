/** `nobody` is not signed in; `outsider` is a technician of another site. */
export type Who = 'nobody' | 'technician' | 'outsider' | 'lead' | 'manager' | 'admin';

interface Permission {
  /** Who is shown the page, or the file. */
  see?: readonly Who[];
  /** Who may act, by the form's intent; `any` where a route has one form. */
  act?: Readonly<Record<string, readonly Who[]>>;
  /** What the address needs to be answered at all. */
  query?: string;
  /** Why a route is open to everybody and is not called here. */
  open?: string;
}

const all: readonly Who[] = ['nobody', 'technician', 'outsider', 'lead', 'manager', 'admin'];
const signedIn: readonly Who[] = ['technician', 'outsider', 'lead', 'manager', 'admin'];
/** Those who may see what is at the one site. */
const ofTheSite: readonly Who[] = ['technician', 'lead', 'manager', 'admin'];
const loggers: readonly Who[] = ['technician', 'lead'];
/** Those who follow what is decided; an admin reads along. */
const deciders: readonly Who[] = ['lead', 'manager', 'admin'];
const keepers: readonly Who[] = ['lead', 'admin'];

/** Who may see and do what, by route module: the whole product on one page. */
export const permissions: Readonly<Record<string, Permission>> = {
  'routes/home.tsx': { see: signedIn },
  'routes/sign-in.tsx': { see: all, act: { any: all } },
  'routes/sign-out.tsx': { open: 'ends the session of whoever asks; tried with the sessions' },
  'routes/theme.tsx': { see: all, act: { any: all } },
  'routes/not-found.tsx': {},
  'routes/signed-in.tsx': { see: signedIn },
  'routes/since.tsx': { see: ['lead', 'manager'], act: { any: ['lead', 'manager'] } },
  'routes/classes.tsx': { see: signedIn },
  'routes/classes-csv.ts': { see: signedIn },
  'routes/class.tsx': { see: ofTheSite },
  'routes/class-settings.tsx': { see: keepers, act: { any: keepers } },
  'routes/class-records.tsx': { see: ofTheSite },
  'routes/class-positions.tsx': { see: ofTheSite },
  'routes/asset.tsx': { see: ofTheSite },
  'routes/search.tsx': { see: signedIn },
  'routes/class-tasks.tsx': { see: ofTheSite, act: { add: keepers, describe: keepers, end: keepers } },
  'routes/class-clean.tsx': {
    see: ['lead'],
    act: {
      preview: ['lead'],
      'preview-merge': ['lead'],
      save: ['lead'],
      'preview-again': ['lead'],
      'leave-out': ['lead'],
      'choose-again': ['lead'],
      'take-back': ['lead'],
    },
  },
  'routes/class-change.tsx': { see: ['lead'], act: { any: ['lead'] } },
  'routes/year-ahead.tsx': { see: deciders },
  'routes/year-ahead-csv.ts': { see: deciders },
  'routes/changes.tsx': { see: deciders },
  'routes/changes-csv.ts': { see: deciders },
  'routes/change-terms.tsx': { see: ['lead'], act: { any: ['lead'] } },
  'routes/change.tsx': {
    see: deciders,
    act: {
      approve: ['manager'],
      decline: ['manager'],
      'ask-back': ['manager'],
      answer: ['lead'],
      withdraw: ['lead'],
      reopen: ['lead'],
      'take-back': ['manager'],
    },
  },
  'routes/class-records-csv.ts': { see: ofTheSite },
  'routes/alarm-clear.tsx': { see: ['lead'], act: { any: ['lead'] } },
  'routes/log-find-asset.tsx': { see: ['technician', 'outsider', 'lead'] },
  'routes/log-failure.tsx': { see: loggers, act: { any: loggers } },
  'routes/log-reading.tsx': { see: loggers, act: { any: loggers } },
  'routes/asset-fitted.tsx': { see: keepers, act: { any: keepers } },
  'routes/failure.tsx': { see: ofTheSite, act: { void: loggers, restore: loggers } },
  'routes/imports.tsx': { see: keepers },
  'routes/import-upload.tsx': { see: keepers, act: { any: keepers } },
  'routes/import-preview.tsx': { see: keepers, act: { any: keepers } },
  'routes/import-rejected-csv.ts': { see: keepers },
  'routes/methods.tsx': { see: signedIn },
  'routes/nights.tsx': { see: keepers },
};
