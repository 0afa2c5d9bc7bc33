/*
 * Runs the second opinion anew: writes the data sets from their seeds, fits them in R, and stores R's
 * answers beside them. Needs Rscript with the package survival (Debian: r-base-core, r-cran-survival).
 *
 *     node tests/reference/second-opinion/rerun.mjs
 */
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';

const folder = fileURLToPath(new URL('.', import.meta.url));

/** @param {string} command @param {string[]} args */
function run(command, args) {
  const { status, error } = spawnSync(command, args, { cwd: folder, stdio: 'inherit' });
  if (error) console.error(`${command} could not be started: ${error.message}`);
  if (status !== 0) process.exit(1);
}

run(process.execPath, ['--import', 'tsx', 'write-data-sets.ts']);
run('Rscript', ['--vanilla', 'fit.R']);
