import { formatCalendarDate } from '~/format/date';
import { formatClock } from '~/format/number';
import { outsideCauseWords } from '~/components/log/words';
import type { RecordChange } from '~/models/last-change.server';
import { correctableFieldsSchema, type CorrectableFields, type Correction } from '~/models/record-correction';

/** Names of a class's modes by id. */
export type ModeNames = Readonly<Record<string, string>>;

const effectNames = { renewed: 'renewed', patched: 'patched' } as const;
const modeName = (modeId: string | null, modes: ModeNames) =>
  modeId === null ? 'no mode' : (modes[modeId] ?? 'a mode that is gone');

/** What a correction does, as a title: "Void: logged twice". */
export function correctionWords(correction: Correction, modes: ModeNames): string {
  switch (correction.kind) {
    case 'void':
      return `Void: ${correction.reason}`;
    case 'restore':
      return 'Put back, so that they count again';
    case 'mode':
      return correction.modeId === null
        ? 'Take the mode off'
        : `Set the mode to ${modeName(correction.modeId, modes)}`;
    case 'merge-mode':
      return `Merge ${modeName(correction.from, modes)} into ${modeName(correction.modeId, modes)}`;
    case 'outside-cause':
      return correction.cause === null
        ? 'Take the outside cause off'
        : `Mark as an outside cause: ${outsideCauseWords[correction.cause].toLowerCase()}`;
    case 'effect':
      return `Set what was done to ${effectNames[correction.effect]}`;
    case 'date':
      return `Set the day to ${formatCalendarDate(correction.failedOn)}`;
    case 'fitted':
      return correction.fittedOn === null
        ? 'Take the fitting day off'
        : `Set the fitting day to ${formatCalendarDate(correction.fittedOn)}`;
  }
}

/** One part of a failure that was changed, from what to what. */
export interface FieldChange {
  readonly name: string;
  readonly from: string;
  readonly to: string;
}

/** What is different between two states of a failure, part by part; either may hold only some of the parts. */
export function fieldChanges(
  before: Partial<CorrectableFields>,
  after: Partial<CorrectableFields>,
  { modes, clock }: { modes: ModeNames; clock: 'calendar-days' | 'operating-hours' },
): FieldChange[] {
  const changes: FieldChange[] = [];
  const add = <Key extends keyof CorrectableFields>(
    key: Key,
    name: string,
    words: (value: CorrectableFields[Key]) => string,
  ) => {
    const [from, to] = [before[key], after[key]];
    if (from === undefined || to === undefined || from === to) return;
    const change = {
      name,
      from: words(from as CorrectableFields[Key]),
      to: words(to as CorrectableFields[Key]),
    };
    if (change.from !== change.to) changes.push(change);
  };
  add('voidReason', 'Counts', (reason) => (reason === null ? 'yes' : `no, voided: ${reason}`));
  add('failedOn', 'Day', (day) => formatCalendarDate(day, 'short'));
  add('failedAt', 'Time of day', (at) => (at === null ? 'not known' : 'known'));
  add('modeId', 'Mode', (mode) => modeName(mode, modes));
  add('effect', 'What was done', (effect) => effectNames[effect]);
  add('outsideCause', 'Outside cause', (cause) =>
    cause === null ? 'none' : outsideCauseWords[cause].toLowerCase(),
  );
  add('itemFittedOn', 'Item fitted', (day) =>
    day === null ? 'not known' : formatCalendarDate(day, 'short'),
  );
  add('itemAge', 'Age given', (age) =>
    age === null ? 'none' : formatClock(age, clock === 'operating-hours' ? 'hours' : 'days'),
  );
  return changes;
}

const deeds: Record<string, string> = {
  log: 'logged it',
  void: 'voided it',
  restore: 'put it back',
  correct: 'corrected it',
  import: 'changed it by an import',
  'take-back': 'took a correction back',
};

/** What somebody did to a failure, as a verb with its object. */
export const deedWords = (action: string): string => deeds[action] ?? 'changed it';

const columnOf: Record<keyof CorrectableFields, string> = {
  failedOn: 'failed_on',
  failedAt: 'failed_at',
  modeId: 'mode_id',
  effect: 'effect',
  outsideCause: 'outside_cause',
  itemFittedOn: 'item_fitted_on',
  itemAge: 'item_age',
  voidReason: 'void_reason',
};

/**
 * The parts of a failure in one side of an entry of the audit trail. A correction keeps them by name, the undoing of a single
 * entry keeps whether it counts, and an import keeps the whole row.
 */
export function heldParts(held: RecordChange['before']): Partial<CorrectableFields> {
  if (held === null) return {};
  if ('voided' in held) {
    return { voidReason: held.voided === true ? String(held.reason ?? 'no reason given') : null };
  }
  const byName = Object.entries(columnOf).map(([name, column]) => [
    name,
    name in held ? held[name] : held[column],
  ]);
  const read = correctableFieldsSchema.partial().safeParse(Object.fromEntries(byName));
  return read.data ?? {};
}

/** What an entry of the audit trail changed about a failure, part by part. */
export function auditedChanges(
  { action, before, after }: RecordChange,
  names: { modes: ModeNames; clock: 'calendar-days' | 'operating-hours' },
): FieldChange[] {
  return action === 'log' ? [] : fieldChanges(heldParts(before), heldParts(after), names);
}
