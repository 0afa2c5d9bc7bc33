import { DateTime } from 'luxon';
import { parseArgs } from 'node:util';
import { z } from 'zod';
import { readOrganisation, type Organisation } from '~/models/organisation.server';
import { openDatabase } from '../db/connection';
import { nightlyJob, runNightly } from './nightly';
import { lastCompleteDay } from './nights-due';

const usage = `Usage: npm run job -- nightly [--as-of YYYY-MM-DD]

  nightly   assess every class on the records up to the end of a day (the last complete one unless given)`;

const asOfSchema = z.iso.date().optional();

/** Runs one job from the command line. Exit codes: 0 done, 1 failed, 2 wrong call, 3 already running elsewhere. */
async function main(): Promise<number> {
  const { values, positionals } = parseArgs({
    args: process.argv.slice(2),
    options: { 'as-of': { type: 'string' } },
    allowPositionals: true,
  });
  const asOf = asOfSchema.safeParse(values['as-of']);
  if (positionals.length !== 1 || positionals[0] !== nightlyJob || !asOf.success) {
    console.error(asOf.success ? usage : `--as-of takes a day like 2026-03-14, not "${values['as-of']}".`);
    return 2;
  }
  const db = openDatabase();
  try {
    const organisation = await readOrganisation(db);
    const { timeZone } = organisation;
    const lastDay = lastCompleteDay(DateTime.now().setZone(timeZone));
    if (asOf.data !== undefined && asOf.data > lastDay) {
      console.error(`${asOf.data} is not over yet: the last complete day is ${lastDay}.`);
      return 2;
    }
    return await nightly(db, { asOf: asOf.data ?? lastDay, organisation });
  } finally {
    await db.destroy();
  }
}

async function nightly(
  db: ReturnType<typeof openDatabase>,
  night: { asOf: string; organisation: Organisation },
) {
  const outcome = await runNightly(db, {
    ...night,
    onProblem: (classId, reason) => console.error(`Class ${classId} could not be computed: ${reason}`),
  });
  if (outcome.state === 'busy') {
    console.error('The nightly job is already running elsewhere; this one leaves it to that.');
    return 3;
  }
  console.log(
    `Assessed ${outcome.classes} classes as of ${night.asOf}; ${outcome.problems} could not be computed.`,
  );
  return 0;
}

try {
  process.exitCode = await main();
} catch (error) {
  console.error('The job failed; what was in force stays in force.', error);
  process.exitCode = 1;
}
