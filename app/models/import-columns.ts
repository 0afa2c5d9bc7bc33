import { ImportFileError, type ImportKind } from './import-types';

export interface ImportColumn {
  readonly name: string;
  readonly required?: true;
  /** One sentence for the person who makes the file. */
  readonly meaning: string;
}

export const registerColumns = [
  { name: 'site', required: true, meaning: 'Name of the site. A site not known yet is added.' },
  { name: 'area', meaning: 'Name of an area within the site, if you use areas.' },
  { name: 'class', required: true, meaning: 'Name of the asset class. A class not known yet is added.' },
  {
    name: 'clock',
    meaning: 'days or hours: what ages an item of the class. Needed for a class not known yet.',
  },
  { name: 'item', meaning: 'What one item of a new class is called: seal.' },
  { name: 'items', meaning: 'What several are called: seals.' },
  {
    name: 'tag',
    required: true,
    meaning: 'The name of the asset, at most 60 characters; no two assets share one.',
  },
  { name: 'quantity', meaning: 'How many like items the asset holds. 1 when left out.' },
  { name: 'in service', required: true, meaning: 'The day the asset went into service.' },
  {
    name: 'watched from',
    meaning: 'Since when its failures are recorded. The day in service when left out.',
  },
  { name: 'watched until', meaning: 'Until when its failures were recorded, if that has ended.' },
  { name: 'retired', meaning: 'The day the asset was taken out of service.' },
  { name: 'hours a day', meaning: 'How long it runs on an average day: above 0, at most 24.' },
  {
    name: 'item fitted',
    meaning: 'When the item in place at the start of the watch had been fitted, if known.',
  },
] as const satisfies readonly ImportColumn[];

export const historyColumns = [
  { name: 'tag', required: true, meaning: 'The asset it happened to.' },
  { name: 'date', required: true, meaning: 'The day it happened.' },
  { name: 'time', meaning: 'The time of day, as 09:05, if known.' },
  { name: 'event', required: true, meaning: 'failure or planned work.' },
  {
    name: 'result',
    required: true,
    meaning: 'Of a failure: renewed or patched. Of planned work: renewed or not renewed.',
  },
  { name: 'failure mode', meaning: 'How it failed. A mode not known for the class yet is added.' },
  {
    name: 'outside cause',
    meaning: 'struck, flooded, power, vandalism, weather or other, when it was not the item.',
  },
  {
    name: 'kind',
    meaning:
      'Of planned work: replace, restore, inspect, service or test. replace when left out and renewed, inspect otherwise.',
  },
  { name: 'item fitted', meaning: 'When the item that failed or came out had been fitted, if known.' },
  { name: 'note', meaning: 'Anything else, at most 4,000 characters.' },
  {
    name: 'record',
    meaning: 'The number of the record where it comes from. With it, a later file can correct the record.',
  },
  {
    name: 'occurrence',
    meaning: 'Which of several otherwise equal rows this is: 1, 2, … Counted in the file when left out.',
  },
] as const satisfies readonly ImportColumn[];

/** Columns of a file of rejected rows that are there for the reader: skipped when it comes back. */
export const remarkColumns = ['line', 'why'] as const;

export type RegisterColumn = (typeof registerColumns)[number]['name'];
export type HistoryColumn = (typeof historyColumns)[number]['name'];

/** The columns of a format, in the order they are explained. */
export function columnsOf(kind: ImportKind): readonly ImportColumn[] {
  return kind === 'register' ? registerColumns : historyColumns;
}

export interface MatchedHeadings {
  /** For each column of the file the column of the format it is; null for one that is skipped. */
  readonly columns: readonly (string | null)[];
  /** Whether the file is one of rejected rows coming back, with its remark columns. */
  readonly corrected: boolean;
}

/**
 * Finds out which column of a file is which: any order, capitals and spacing do not matter.
 *
 * @throws ImportFileError naming every heading that is unknown or there twice, and every required one that is missing.
 */
export function matchHeadings(headings: readonly string[], kind: ImportKind): MatchedHeadings {
  const known = columnsOf(kind).map(({ name }) => name);
  const names = headings.map(normalise);
  const problems: string[] = [];
  const isRemark = (name: string) => remarkColumns.some((remark) => remark === name);
  const unknown = names.filter((name) => name !== '' && !known.includes(name) && !isRemark(name));
  const other: ImportKind = kind === 'register' ? 'history' : 'register';
  if (missingFrom(names, kind).length > 0 && missingFrom(names, other).length === 0) {
    throw new ImportFileError(`These are the headings of a ${other} file, and ${kind} was chosen.`);
  }
  for (const name of unknown) {
    const near = nearest(name, known);
    problems.push(`There is no column “${name}”${near ? `; did you mean “${near}”?` : '.'}`);
  }
  for (const name of new Set(names.filter((each, index) => each !== '' && names.indexOf(each) !== index))) {
    problems.push(`The column “${name}” is there twice.`);
  }
  for (const name of missingFrom(names, kind)) problems.push(`The column “${name}” is missing.`);
  if (unknown.length > 0) problems.push(`A ${kind} file may have these columns: ${known.join(', ')}.`);
  if (problems.length > 0) throw new ImportFileError(problems.join(' '));
  return {
    columns: names.map((name) => (known.includes(name) ? name : null)),
    corrected: names.some(isRemark),
  };
}

function missingFrom(names: readonly string[], kind: ImportKind): string[] {
  return columnsOf(kind)
    .filter(({ name, required }) => required && !names.includes(name))
    .map(({ name }) => name);
}

function normalise(heading: string): string {
  return heading
    .trim()
    .toLowerCase()
    .replace(/[\s_]+/g, ' ');
}

function nearest(name: string, candidates: readonly string[]): string | undefined {
  const [best] = candidates
    .map((candidate) => ({ candidate, distance: editDistance(name, candidate) }))
    .sort((a, b) => a.distance - b.distance);
  if (best && best.distance <= Math.max(1, Math.floor(best.candidate.length / 3))) return best.candidate;
  return candidates.find((candidate) => name.includes(candidate) || candidate.includes(name));
}

/** Fewest single-letter insertions, deletions and replacements between two words (Levenshtein 1966). */
function editDistance(from: string, to: string): number {
  let row = Array.from({ length: to.length + 1 }, (_, index) => index);
  for (let i = 1; i <= from.length; i += 1) {
    const next = [i];
    for (let j = 1; j <= to.length; j += 1) {
      const replaced = row[j - 1]! + (from[i - 1] === to[j - 1] ? 0 : 1);
      next.push(Math.min(row[j]! + 1, next[j - 1]! + 1, replaced));
    }
    row = next;
  }
  return row[to.length]!;
}
