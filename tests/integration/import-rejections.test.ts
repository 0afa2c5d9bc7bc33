import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ImportKind } from '~/models/import-types';
import { addPerson } from '../support/people';
import { importFile, rowsOf, sampleFile, stageFile } from '../support/stage-file';
import { createTestDatabase, type TestDatabase } from '../support/test-database';

let test: TestDatabase;
let personId: string;

beforeAll(async () => {
  test = await createTestDatabase();
  await test.database('organisations').insert({ name: 'Larkmoor', time_zone: 'Europe/London' });
  personId = await addPerson(test.database, { email: 'admin@larkmoor.example', roles: ['admin'] });
  await importFile(test.database, 'register', await sampleFile('register.csv'), { personId });
  await importFile(test.database, 'history', await sampleFile('history.csv'), { personId });
});
afterAll(() => test.drop());

/** Why the rows of a file are rejected: `line column value: reason`. */
async function reasonsOf(kind: ImportKind, content: string | Buffer): Promise<string[]> {
  const { id } = await stageFile(test.database, kind, content, { personId });
  const rows = await rowsOf(test.database, id, 'rejected');
  return rows.flatMap(({ line, remarks }) =>
    remarks.map(({ column, value, reason }) => `${line} ${column} ${value}: ${reason}`),
  );
}

describe('every bad cell is told by line, column, value and reason', () => {
  it('in a register', async () => {
    expect(await reasonsOf('register', await sampleFile('register-broken.csv'))).toEqual([
      '2 clock hours: The class “Strainer basket” is kept in days.',
      '3 quantity 0: This is not a whole number from 1 to 100000.',
      '4 quantity 1.5: This is not a whole number from 1 to 100000.',
      '4 hours a day 0: Hours a day are above 0 and at most 24.',
      '5 hours a day 7,5: Write decimals with a point: 7.5.',
      '6 hours a day 25: Hours a day are above 0 and at most 24.',
      '6 watched until 2022-04-30: The watch ends before, or on the day, it starts: 2022-05-01.',
      '7 watched from 2021-12-31: The watch starts before the asset went into service on 2022-01-01.',
      '7 retired 2022-01-01: Retired before, or on the day, it went into service: 2022-01-01.',
      '8 in service 2999-01-01: This lies in the future: today is 2026-06-30.',
      '9 clock : The class “Pump gasket” is new: say whether its clock is days or hours.',
      '10 item fitted 2021-01-01: The item in place when the watch starts was fitted from 2022-01-01 to 2022-01-01, or that is not known.',
      '12 tag fb-str-19: This stands on line 11 of the file already.',
    ]);
  });

  it('in a history', async () => {
    expect(await reasonsOf('history', await sampleFile('history-broken.csv'))).toEqual([
      '2 date 2026-02-30: There is no such day.',
      '3 date 14/03/2024: This is not a date. Write year, month and day as 2026-03-14.',
      '3 time 25:10: This is not a time of day. Write hours and minutes as 09:05.',
      '4 date 2021-02-28: This lies before the asset went into service on 2021-03-01.',
      '5 date 2025-03-01: This lies after the asset was retired on 2025-02-28.',
      '6 tag NO-SUCH-1: No asset has this tag. Import the register first, or correct the tag.',
      '7 item fitted 2024-03-15: The item was fitted after the event on 2024-03-14.',
      '8 failure mode Torn mesh: Only a failure has a failure mode.',
      '9 kind inspect: Only replace and restore renew the item.',
      '10 outside cause rain: This is not one of: struck, flooded, power, vandalism, weather, other.',
      '10 result not renewed: A failure was either renewed or patched.',
    ]);
  });

  it.each<[string, ImportKind, string, string]>([
    [
      'a day in the future',
      'history',
      'tag,date,event,result\nFB-STR-01,2026-07-01,failure,renewed\n',
      '2 date 2026-07-01: This lies in the future: today is 2026-06-30.',
    ],
    [
      'an empty cell that is needed',
      'history',
      'tag,date,event,result\nFB-STR-01,2024-01-01,failure,\n',
      '2 result : This cell is empty and may not be.',
    ],
    [
      'a note that is too long',
      'history',
      `tag,date,event,result,note\nFB-STR-01,2024-01-01,failure,renewed,${'x'.repeat(4001)}\n`,
      `2 note ${'x'.repeat(4001)}: This has 4001 characters; at most 4000 are taken.`,
    ],
    [
      'a tag that is too long',
      'register',
      `site,class,tag,in service\nFenwick Baths,Strainer basket,${'x'.repeat(61)},2024-01-01\n`,
      `2 tag ${'x'.repeat(61)}: This has 61 characters; at most 60 are taken.`,
    ],
    [
      'a record number twice',
      'history',
      'tag,date,event,result,record\nFB-STR-01,2024-01-01,failure,renewed,7\nFB-STR-01,2024-01-02,failure,renewed,7\n',
      '3 record 7: This stands on line 2 of the file already.',
    ],
    [
      'a failure that is held as planned work',
      'history',
      'tag,date,event,result,record\nFB-STR-01,2023-04-03,failure,renewed,1002\n',
      '2 event failure: Record 1002 is held as planned work. Void that one first.',
    ],
    [
      'planned work that was patched',
      'history',
      'tag,date,event,result\nFB-STR-01,2023-04-03,planned work,patched\n',
      '2 result patched: Planned work ends in renewed or not renewed.',
    ],
    [
      'an hour the clocks skipped',
      'history',
      'tag,date,time,event,result\nFB-STR-01,2026-03-29,01:30,failure,renewed\n',
      '2 time 01:30: There was no such time on that day in Europe/London: the clocks went forward.',
    ],
    [
      'a day in service that would leave a record outside',
      'register',
      'site,class,tag,in service,watched from,item fitted\nFenwick Baths,Strainer basket,FB-STR-01,2022-06-01,,\n',
      '2 in service 2022-06-01: The asset has a record on 2022-04-02, which would lie before.',
    ],
    [
      'a day of retirement that would leave a record outside',
      'register',
      'site,class,tag,in service,retired\nFenwick Baths,Strainer basket,FB-STR-01,2021-03-01,2023-01-01\n',
      '2 retired 2023-01-01: The asset has a record on 2023-04-03, which would lie after.',
    ],
    [
      'another class for an asset with records',
      'register',
      'site,class,tag,in service\nFenwick Baths,Extract fan bearing,FB-STR-01,2021-03-01\n',
      '2 class Extract fan bearing: The asset has records as “Strainer basket” and stays in that class.',
    ],
    [
      'a new class with two clocks',
      'register',
      'site,class,clock,tag,in service\nS,Door closer,days,D1,2024-01-01\nS,Door closer,hours,D2,2024-01-01\n',
      '3 clock hours: An earlier row makes the class “Door closer” with the clock days.',
    ],
  ])('%s', async (_what, kind, content, reason) => {
    expect(await reasonsOf(kind, content)).toEqual([reason]);
  });
});
