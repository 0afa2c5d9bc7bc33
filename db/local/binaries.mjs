import { spawnSync } from 'node:child_process';
import { accessSync, constants, readdirSync, realpathSync } from 'node:fs';
import { delimiter, dirname, join } from 'node:path';

/** @typedef {{ folder: string, major: number }} ServerBinaries a folder with `initdb` and `postgres` of one version */

/** @param {string} file */
function isExecutable(file) {
  try {
    accessSync(file, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}

/** @param {string} root a folder with one subfolder a major version, as Debian lays them out */
function versionedFolders(root) {
  try {
    return readdirSync(root)
      .filter((name) => /^\d+$/.test(name))
      .sort((a, b) => Number(b) - Number(a))
      .map((name) => join(root, name, 'bin'));
  } catch {
    return [];
  }
}

/**
 * Major version from what `postgres --version` prints.
 *
 * @param {string} text `postgres (PostgreSQL) 15.18 (Debian …)`
 * @returns {number | undefined}
 */
export function parseMajorVersion(text) {
  const match = /PostgreSQL\)\s+(\d+)/.exec(text);
  return match ? Number(match[1]) : undefined;
}

/** @param {string} folder @returns {ServerBinaries | undefined} */
function inspect(folder) {
  const server = join(folder, 'postgres');
  if (!isExecutable(server)) return undefined;
  // A link into a search path stands alone there: initdb lies beside the file it points at.
  const real = dirname(realpathSync(server));
  if (!isExecutable(join(real, 'initdb'))) return undefined;
  const major = parseMajorVersion(spawnSync(server, ['--version'], { encoding: 'utf8' }).stdout ?? '');
  return major === undefined ? undefined : { folder: real, major };
}

/**
 * Every PostgreSQL server found on this machine, best first: the search path, Debian's folders from the
 * newest down, and the folder that `pg_config` names.
 *
 * @returns {ServerBinaries[]}
 */
export function findServerBinaries() {
  const fromConfig = spawnSync('pg_config', ['--bindir'], { encoding: 'utf8' }).stdout?.trim();
  const folders = [
    ...(process.env.PATH ?? '').split(delimiter).filter(Boolean),
    ...versionedFolders('/usr/lib/postgresql'),
    ...(fromConfig ? [fromConfig] : []),
  ];
  /** @type {Map<string, ServerBinaries>} */
  const found = new Map();
  for (const folder of folders) {
    const binaries = inspect(folder);
    if (binaries && !found.has(binaries.folder)) found.set(binaries.folder, binaries);
  }
  return [...found.values()];
}
