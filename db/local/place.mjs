import { spawnSync } from 'node:child_process';
import { createHash, randomBytes } from 'node:crypto';
import { chmodSync, chownSync, lstatSync, mkdirSync, readFileSync, rmdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { PlainError } from './plain-error.mjs';

/**
 * @typedef {{ uid: number, gid: number }} ServerUser whom PostgreSQL runs as when we are root
 * @typedef {{ folder: string, user: ServerUser | undefined, outside: boolean }} Place
 *   `outside`: the folder lies outside the clone because the server's user may not enter the clone
 */

/** PostgreSQL refuses to run as root: Debian's packages make a user for it. @returns {ServerUser} */
function postgresUser() {
  /** @param {string} flag */
  const id = (flag) => spawnSync('id', [flag, 'postgres'], { encoding: 'utf8' });
  const [uid, gid] = [id('-u'), id('-g')];
  if (uid.status !== 0 || gid.status !== 0) {
    throw new PlainError(
      'PostgreSQL does not run as root, and there is no user named postgres to run it as.\n' +
        'Make one (useradd --system postgres), start as an ordinary user, or set DATABASE_URL.',
    );
  }
  return { uid: Number(uid.stdout), gid: Number(gid.stdout) };
}

/** Tried for real, by the user it is for: folder modes alone do not tell. @param {string} folder @param {ServerUser} user */
function canWork(folder, user) {
  const probe = spawnSync('/bin/sh', ['-c', 'cd "$1" && : > .probe && rm .probe', 'sh', folder], {
    ...user,
    cwd: '/',
    stdio: 'ignore',
  });
  return probe.status === 0;
}

/**
 * A secret kept in a file only its owner can read, made on first use.
 *
 * @param {string} file
 * @param {number} bytes
 */
export function keptSecret(file, bytes) {
  try {
    writeFileSync(file, randomBytes(bytes).toString('hex'), { mode: 0o600, flag: 'wx' });
  } catch (error) {
    if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'EEXIST') throw error;
  }
  return readFileSync(file, 'utf8').trim();
}

/**
 * Makes the git-ignored folder for what this machine keeps, and returns its path.
 *
 * @param {string} root the clone
 * @throws {PlainError} when it belongs to somebody else
 */
export function localFolder(root) {
  const folder = join(root, '.local');
  try {
    mkdirSync(folder, { recursive: true, mode: 0o700 });
    // The server's own user has to pass through, but has nothing to read here.
    if (process.getuid?.() === 0) chmodSync(folder, 0o711);
    writeFileSync(join(folder, '.writable'), '');
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error);
    throw new PlainError(
      `${folder} cannot be used (${reason}).\nStart as the user it belongs to, or remove it to start afresh.`,
    );
  }
  return folder;
}

/**
 * A folder under a world-writable parent is ours only if it is a real folder of the server's user that
 * nobody else may write to.
 *
 * @param {string} folder
 * @param {ServerUser} user
 */
export function assertOwnFolder(folder, user) {
  const stat = lstatSync(folder);
  if (!stat.isDirectory() || stat.uid !== user.uid || (stat.mode & 0o077) !== 0) {
    throw new PlainError(
      `${folder} is there already and is not a private folder of the database's user.\n` +
        'It is left alone: look at who made it, and remove it or set DATABASE_URL.',
    );
  }
}

/** @param {string} root @param {string} local @param {string} name @param {ServerUser} user @returns {Place} */
function outsidePlace(root, local, name, user) {
  const clone = createHash('sha256').update(root).digest('hex').slice(0, 10);
  const tag = keptSecret(join(local, 'place-tag'), 4);
  const folder = join('/var/tmp', `intervale-${clone}-${tag}-${name}`);
  if (lstatSync(folder, { throwIfNoEntry: false }) === undefined) {
    mkdirSync(folder, { mode: 0o700 });
    chownSync(folder, user.uid, user.gid);
  }
  assertOwnFolder(folder, user);
  return { folder, user, outside: true };
}

/**
 * Where a private server keeps its data, and as whom it runs. An ordinary user: in `.local`, as that user.
 * Root: in `.local` as whoever owns the folder (`postgres` when it is new), or, where that user may not
 * enter the clone, in a folder of its own under /var/tmp.
 *
 * @param {string} root the clone, as a real path
 * @param {string} name what the server is for
 * @returns {Place}
 */
export function findPlace(root, name) {
  const local = localFolder(root);
  const inside = join(local, name);
  if (process.getuid?.() !== 0) {
    mkdirSync(inside, { recursive: true, mode: 0o700 });
    return { folder: inside, user: undefined, outside: false };
  }
  const there = lstatSync(inside, { throwIfNoEntry: false });
  if (there && !there.isDirectory()) throw new PlainError(`${inside} is not a folder: remove it.`);
  const user = there && there.uid !== 0 ? { uid: there.uid, gid: there.gid } : postgresUser();
  if (!there) mkdirSync(inside, { mode: 0o700 });
  if (!there || there.uid === 0) chownSync(inside, user.uid, user.gid);
  if (canWork(inside, user)) return { folder: inside, user, outside: false };
  if (!there) rmdirSync(inside);
  return outsidePlace(root, local, name, user);
}
