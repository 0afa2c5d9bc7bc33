import { createHash } from 'node:crypto';
import { existsSync, readFileSync, readdirSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { withLock } from '../../db/local/lock.mjs';
import { localFolder } from '../../db/local/place.mjs';
import { PlainError } from '../../db/local/plain-error.mjs';
import { npmCommand } from './packages.mjs';
import { run } from './processes.mjs';

/** What the build is made of; `db` because the server's bundle takes in the connection. */
const INPUTS = ['app', 'db', 'public', 'package.json', 'package-lock.json', 'tsconfig.json'];
const CONFIG = /^(vite|react-router|tailwind|postcss)\.config\.[cm]?[jt]s$/;

/** @param {string} root @param {string} path @returns {string[]} files in or at the path, relative to the root */
function filesUnder(root, path) {
  const full = join(root, path);
  if (!existsSync(full)) return [];
  if (!statSync(full).isDirectory()) return [path];
  return readdirSync(full).flatMap((name) => filesUnder(root, `${path}/${name}`));
}

/**
 * A fingerprint of all that decides what the build will be: the files, their names, and the environment
 * variables that the configuration files name.
 *
 * @param {string} root
 * @param {NodeJS.ProcessEnv} [env]
 */
export function fingerprint(root, env = process.env) {
  const hash = createHash('sha256');
  const configs = readdirSync(root).filter((name) => CONFIG.test(name));
  for (const file of [...INPUTS.flatMap((path) => filesUnder(root, path)), ...configs].sort()) {
    const content = readFileSync(join(root, file));
    hash.update(`${file}\0${content.length}\0`).update(content);
    if (!configs.includes(file)) continue;
    for (const [, name = ''] of content.toString().matchAll(/process\.env\.(\w+)/g)) {
      hash.update(`${name}=${env[name] ?? ''}\0`);
    }
  }
  return hash.digest('hex');
}

/**
 * Builds the application when anything it is made of changed since the last build.
 *
 * @param {string} root
 * @param {AbortSignal} signal
 */
export async function ensureBuild(root, signal) {
  const stamp = join(root, 'build', '.fingerprint');
  const build = async () => {
    const wanted = fingerprint(root);
    if (existsSync(stamp) && readFileSync(stamp, 'utf8') === wanted) return;
    console.log('Building …');
    rmSync(stamp, { force: true });
    const [npm, args] = npmCommand();
    const env = { ...process.env, NODE_ENV: 'production' };
    const code = await run(npm, [...args, 'run', '--silent', 'build'], {
      cwd: root,
      env,
      signal,
      quiet: true,
    });
    if (code !== 0) throw new PlainError('The build failed (see above).');
    writeFileSync(stamp, wanted);
  };
  await withLock(join(localFolder(root), 'build.lock'), build, { signal });
}
