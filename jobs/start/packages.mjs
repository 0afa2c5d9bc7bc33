import { existsSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { withLock } from '../../db/local/lock.mjs';
import { localFolder } from '../../db/local/place.mjs';
import { PlainError } from '../../db/local/plain-error.mjs';
import { run } from './processes.mjs';

/**
 * @typedef {{ version?: string, integrity?: string, optional?: boolean, peer?: boolean }} LockedPackage
 * @typedef {{ packages?: Record<string, LockedPackage> }} Lockfile as npm writes it
 */

/** How npm is called: the one that runs us, else the one on the search path. @returns {[string, string[]]} */
export function npmCommand() {
  const cli = process.env.npm_execpath;
  return cli && /npm-cli\.c?js$/.test(cli) && existsSync(cli) ? [process.execPath, [cli]] : ['npm', []];
}

/**
 * Whether what npm noted as installed is what the lock file asks for. Optional packages may be missing: they
 * are for other systems.
 *
 * @param {Lockfile} wanted `package-lock.json`
 * @param {Lockfile} installed `node_modules/.package-lock.json`
 */
export function isInstalled(wanted, installed) {
  const want = wanted.packages ?? {};
  const have = installed.packages ?? {};
  for (const [path, entry] of Object.entries(want)) {
    if (path === '') continue;
    const there = have[path];
    if (!there) {
      if (entry.optional) continue;
      return false;
    }
    if (there.version !== entry.version || there.integrity !== entry.integrity) return false;
  }
  return Object.keys(have).every((path) => path in want);
}

/** @param {string} file @returns {Lockfile | undefined} */
function readLockfile(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'));
  } catch {
    return undefined;
  }
}

/**
 * Installs the npm packages when they are missing or not those of `package-lock.json`.
 *
 * @param {string} root
 * @param {AbortSignal} signal
 */
export async function ensurePackages(root, signal) {
  const note = join(root, 'node_modules', '.package-lock.json');
  const upToDate = () => {
    const wanted = readLockfile(join(root, 'package-lock.json'));
    const installed = readLockfile(note);
    return wanted !== undefined && installed !== undefined && isInstalled(wanted, installed);
  };
  if (upToDate()) return;
  const install = async () => {
    if (upToDate()) return;
    console.log('Installing npm packages …');
    // Without npm's own note, an install broken off half-way is seen as such the next time.
    rmSync(note, { force: true });
    const [npm, args] = npmCommand();
    // Development packages too, whatever NODE_ENV says: the build is made here.
    const options = ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'];
    if ((await run(npm, [...args, ...options], { cwd: root, signal })) !== 0) {
      throw new PlainError('The npm packages could not be installed (see above).');
    }
  };
  await withLock(join(localFolder(root), 'packages.lock'), install, { signal });
}
