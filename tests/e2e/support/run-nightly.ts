import { execFile } from 'node:child_process';
import { promisify } from 'node:util';
import { database } from '../../../db/connection';

/** Runs the nightly job as the scheduler would, in a process of its own; gives what it said, its complaints first. */
export async function runNightly(): Promise<string> {
  const args = ['node_modules/tsx/dist/cli.mjs', 'jobs/run-job.ts', 'nightly'];
  const { stdout, stderr } = await promisify(execFile)(process.execPath, args, { env: process.env });
  return stderr + stdout;
}

/** Runs the nightly job unless a class has been assessed already. */
export async function ensureNight(): Promise<void> {
  const assessed: unknown = await database()('asset_classes')
    .whereNotNull('current_assessment_id')
    .first('id');
  if (assessed === undefined) await runNightly();
}
