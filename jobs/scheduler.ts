import { DateTime } from 'luxon';
import cron from 'node-cron';
import { lastFinishedDay } from '~/models/job-runs.server';
import { readOrganisation } from '~/models/organisation.server';
import { openDatabase } from '../db/connection';
import { nightlyJob, runNightly } from './nightly';
import { lastCompleteDay, nightIsDue, nightsToCatchUp } from './nights-due';

/** After midnight, when the day before is over, and away from the hour that clock changes repeat or skip. */
const everyNight = '30 3 * * *';

const db = openDatabase();
const { timeZone } = await readOrganisation(db);

async function nightly(asOf = lastCompleteDay(DateTime.now().setZone(timeZone))): Promise<void> {
  try {
    const outcome = await runNightly(db, {
      asOf,
      organisation: await readOrganisation(db),
      onProblem: (classId, reason) => console.error(`Class ${classId} could not be computed: ${reason}`),
    });
    if (outcome.state === 'busy') console.log('The nightly job is already running elsewhere.');
    else
      console.log(
        `Assessed ${outcome.classes} classes as of ${asOf}; ${outcome.problems} could not be computed.`,
      );
  } catch (error) {
    console.error('The nightly job failed; the previous night stays in force.', error);
  }
}

const task = cron.schedule(everyNight, () => nightly(), { timezone: timeZone, noOverlap: true });
console.log(`Nightly assessment at 03:30, ${timeZone}.`);

async function catchUp(lastFinished: string | null): Promise<void> {
  const lastDay = lastCompleteDay(DateTime.now().setZone(timeZone));
  const demo = process.env.INTERVALE_DEMO === '1';
  for (const asOf of nightsToCatchUp(lastDay, { demo, hasNights: lastFinished !== null }))
    await nightly(asOf);
}

let working: Promise<void> = Promise.resolve();
const lastFinished = await lastFinishedDay(db, nightlyJob);
if (nightIsDue(lastFinished, DateTime.now().setZone(timeZone))) {
  console.log('A night is missing; catching up now.');
  working = catchUp(lastFinished);
}

async function stop(): Promise<void> {
  await task.stop();
  // A night cut off here is as if it had never begun; the next one completes it.
  await Promise.race([working, new Promise((resolve) => setTimeout(resolve, 1_000))]);
  process.exit(0);
}
process.on('SIGTERM', stop);
process.on('SIGINT', stop);
