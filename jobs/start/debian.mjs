import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { run } from './processes.mjs';
import { PlainError } from '../../db/local/plain-error.mjs';

/** Whether packages can be installed here: by root, on a system with apt. */
export function canInstall() {
  return process.getuid?.() === 0 && existsSync('/usr/bin/apt-get');
}

const env = () => ({ ...process.env, DEBIAN_FRONTEND: 'noninteractive' });

/** @param {string[]} args @param {AbortSignal} signal */
async function apt(args, signal) {
  const options = ['-q', '-o', 'DPkg::Lock::Timeout=120', '-o', 'Dpkg::Options::=--force-confold'];
  return (await run('apt-get', [...options, ...args], { signal, env: env(), quiet: true })) === 0;
}

/** @param {string} name @param {AbortSignal} signal */
async function installPackage(name, signal) {
  if (!(await apt(['install', '-y', '--no-install-recommends', name], signal))) {
    throw new PlainError(`Debian’s package "${name}" could not be installed (see above).`);
  }
}

/**
 * Installs one of Debian's packages.
 *
 * @param {string} name
 * @param {AbortSignal} signal
 */
export async function installDebianPackage(name, signal) {
  console.log(`Installing Debian’s package ${name} …`);
  if (!(await apt(['update'], signal))) throw new PlainError('apt-get update failed (see above).');
  await installPackage(name, signal);
}

/**
 * Installs the PostgreSQL server without the system-wide database that the package would otherwise make and
 * start: the private one is all that is needed.
 *
 * @param {AbortSignal} signal
 */
export async function installPostgresql(signal) {
  await installDebianPackage('postgresql-common', signal);
  const file = '/etc/postgresql-common/createcluster.conf';
  const before = existsSync(file) ? readFileSync(file, 'utf8') : undefined;
  if (before !== undefined) writeFileSync(file, `${before}\ncreate_main_cluster = false\n`);
  try {
    console.log('Installing Debian’s package postgresql …');
    await installPackage('postgresql', signal);
  } finally {
    if (before !== undefined) writeFileSync(file, before);
  }
}
