import { describe, expect, it } from 'vitest';
import { matchHeadings } from '~/models/import-columns';

describe('matchHeadings', () => {
  it('takes any order, capitals and spacing', () => {
    const { columns, corrected } = matchHeadings(['In_Service', ' TAG ', 'Class', 'site'], 'register');
    expect(columns).toEqual(['in service', 'tag', 'class', 'site']);
    expect(corrected).toBe(false);
  });

  it('passes over nameless columns, and over the remarks of a file of rejected rows', () => {
    const headings = ['tag', 'date', 'event', 'result', '', 'line', 'why', ''];
    expect(matchHeadings(headings, 'history')).toEqual({
      columns: ['tag', 'date', 'event', 'result', null, null, null, null],
      corrected: true,
    });
  });

  it.each([
    [['site', 'class', 'tag', 'in service', 'retierd'], '“retierd”; did you mean “retired”?'],
    [['site', 'class', 'tag', 'in service', 'colour'], 'There is no column “colour”.'],
    [['site', 'class', 'tag'], 'The column “in service” is missing.'],
    [['site', 'class', 'tag', 'in service', 'Site'], 'The column “site” is there twice.'],
    [
      ['tag', 'date', 'event', 'result'],
      'These are the headings of a history file, and register was chosen.',
    ],
  ])('refuses %j by name', (headings, sentence) => {
    expect(() => matchHeadings(headings, 'register')).toThrow(sentence);
  });
});
