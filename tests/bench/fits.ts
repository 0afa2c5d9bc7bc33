/**
 * Fits per second: our power-law fit beside R's survreg on the same right-censored data, in one run.
 *
 *     node --import tsx tests/bench/fits.ts [--sets 1000]
 *
 * Needs Rscript with the survival package (Debian: r-base-core, r-cran-survival). Both are timed inside their
 * process, without starting up and reading; survreg gives no profile interval, so ours is timed with and without.
 */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import type { History } from '~/reliability/history';
import { findRoot } from '~/reliability/find-root';
import { fitPowerLaw } from '~/reliability/power-law';
import { PowerLawProfile } from '~/reliability/power-law-profile';
import { seededRandom, weibullLife } from '../support/seeded-random';

const { values } = parseArgs({ options: { sets: { type: 'string', default: '1000' } } });
const sets = Number(values.sets);
const itemsASet = 150;

const random = seededRandom(1);
const data: History[][] = Array.from({ length: sets }, () => {
  const shape = 0.7 + 2.5 * random();
  return Array.from({ length: itemsASet }, (): History => {
    const life = weibullLife(random, shape, 900);
    const end = 400 + 1400 * random();
    return life <= end ? { entry: 0, exit: life, failures: [life] } : { entry: 0, exit: end, failures: [] };
  });
});

function timed(fit: (histories: History[]) => void): number {
  for (const histories of data.slice(0, 50)) fit(histories);
  const start = performance.now();
  for (const histories of data) fit(histories);
  return (performance.now() - start) / 1000;
}

const withInterval = timed((histories) => fitPowerLaw(histories));
const alone = timed((histories) => {
  const profile = new PowerLawProfile(histories);
  findRoot((lnShape) => profile.at(lnShape).score, Math.log(1e-3), Math.log(1e3));
});

const folder = mkdtempSync(join(tmpdir(), 'fits-'));
try {
  const file = join(folder, 'data.csv');
  const rows = data.flatMap((histories, set) =>
    histories.map(({ exit, failures }) => `${set},${exit},${failures.length}`),
  );
  writeFileSync(file, `set,time,failed\n${rows.join('\n')}\n`);
  const script = fileURLToPath(new URL('fits.R', import.meta.url));
  const { status, stdout, stderr } = spawnSync('Rscript', [script, file], { encoding: 'utf8' });
  if (status !== 0) throw new Error(`Rscript failed: ${stderr}`);
  const survreg = Number(stdout.trim());
  const line = (name: string, seconds: number) =>
    console.log(
      `${name.padEnd(34)} ${(sets / seconds).toFixed(0).padStart(7)} fits/s  ${(survreg / seconds).toFixed(1)} × survreg`,
    );
  console.log(`${sets} sets of ${itemsASet} lives, right-censored`);
  line('R survreg, Weibull', survreg);
  line('power law', alone);
  line('power law with profile interval', withInterval);
} finally {
  rmSync(folder, { recursive: true });
}
