// npm run job -- NAME …: runs one job now, on DATABASE_URL or on this clone's private database.
import { fileURLToPath } from 'node:url';
import { migrate, obtainDatabase } from './database.mjs';
import { serviceEnvironment } from './environment.mjs';
import { live } from './life.mjs';
import { assertNodeVersion } from './node-version.mjs';
import { ensurePackages } from './packages.mjs';
import { run } from './processes.mjs';

const root = fileURLToPath(new URL('../..', import.meta.url));

await live(async (life) => {
  assertNodeVersion();
  await ensurePackages(root, life.signal);
  const { url, server } = await obtainDatabase(root, life);
  const demo = server !== undefined;
  // A database that is not ours is migrated by its start alone, never by a job that may be of another version.
  if (demo) await migrate(root, url, { signal: life.signal, demo });
  const args = ['--import', 'tsx', 'jobs/run-job.ts', ...process.argv.slice(2)];
  return run(process.execPath, args, {
    cwd: root,
    env: serviceEnvironment(root, { url, demo }),
    signal: life.signal,
  });
});
