import { chmodSync, mkdtempSync, readFileSync, rmSync, statSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { parseMajorVersion } from '../../../db/local/binaries.mjs';
import { userRegister, withLock } from '../../../db/local/lock.mjs';
import { assertOwnFolder, keptSecret } from '../../../db/local/place.mjs';
import { parsePostmaster, runningPostmaster } from '../../../db/local/postmaster.mjs';
import { identityRuns, processIdentity } from '../../../db/local/process-identity.mjs';

/** Above the highest process id that Linux gives out. */
const NOBODY = 4_194_305;

let folder = '';
beforeAll(() => (folder = mkdtempSync(join(tmpdir(), 'intervale-server-'))));
afterAll(() => rmSync(folder, { recursive: true }));

describe('parseMajorVersion', () => {
  it.each([
    ['postgres (PostgreSQL) 15.18 (Debian 15.18-0+deb12u1)', 15],
    ['postgres (PostgreSQL) 17beta2', 17],
    ['no such thing', undefined],
  ])('%s', (text, major) => expect(parseMajorVersion(text)).toBe(major));
});

describe('parsePostmaster', () => {
  it('reads process, port and status', () => {
    const text = '4711\n/data\n1767225600\n40123\n\n127.0.0.1\n  1234  5\nready   \n';
    expect(parsePostmaster(text)).toEqual({ pid: 4711, port: 40123, status: 'ready' });
  });

  it.each([['', '4711\n/data\n', 'x\n/d\n1\n5432\n']])('finds nothing in a half-written file', (text) => {
    expect(parsePostmaster(text)).toBeUndefined();
  });
});

describe('runningPostmaster', () => {
  it('removes a file whose process is another program now', () => {
    const file = join(folder, 'postmaster.pid');
    writeFileSync(file, `${process.pid}\n${folder}\n1\n5432\n\n127.0.0.1\n\nready\n`);
    expect(runningPostmaster(folder)).toBeUndefined();
    expect(() => statSync(file)).toThrow('ENOENT');
  });

  it('leaves the file of a process that has gone to PostgreSQL, which looks for its orphans', () => {
    const file = join(folder, 'postmaster.pid');
    writeFileSync(file, `${NOBODY}\n${folder}\n1\n5432\n\n127.0.0.1\n\nready\n`);
    expect(runningPostmaster(folder)).toBeUndefined();
    expect(statSync(file).isFile()).toBe(true);
  });
});

describe('identityRuns', () => {
  it('knows this very process, not one that had its id before, nor none', () => {
    expect(identityRuns(processIdentity())).toBe(true);
    expect(identityRuns(`${process.pid} 1`)).toBe(false);
    expect(identityRuns(`${NOBODY} 1`)).toBe(false);
    expect(identityRuns('')).toBe(false);
    expect(identityRuns('-1 1')).toBe(false);
  });
});

describe('withLock', () => {
  it('takes over the lock of a process that died, and leaves none behind', async () => {
    const file = join(folder, 'a.lock');
    writeFileSync(file, `${NOBODY} 1`);
    await expect(withLock(file, async () => identityRuns(readFileSync(file, 'utf8')))).resolves.toBe(true);
    expect(() => statSync(file)).toThrow('ENOENT');
  });

  it('lets one in at a time, also after a failure', async () => {
    const file = join(folder, 'b.lock');
    const order: string[] = [];
    const task = (name: string) => async () => {
      order.push(`${name} in`);
      await new Promise((resolve) => setTimeout(resolve, 20));
      order.push(`${name} out`);
      if (name === 'a') throw new Error('a fails');
    };
    const results = await Promise.allSettled([withLock(file, task('a')), withLock(file, task('b'))]);
    expect(results.map(({ status }) => status)).toEqual(['rejected', 'fulfilled']);
    expect(order).toEqual(['a in', 'a out', 'b in', 'b out']);
  });

  it('gives up on a holder that does not finish', async () => {
    const file = join(folder, 'c.lock');
    writeFileSync(file, processIdentity());
    await expect(withLock(file, async () => {}, { waitMs: 100 })).rejects.toThrow('does not finish');
  });
});

describe('userRegister', () => {
  it('counts others that live, and strikes out the dead', () => {
    const users = userRegister(join(folder, 'users'));
    users.add();
    expect(users.hasOthers()).toBe(false);
    writeFileSync(join(folder, 'users', String(NOBODY)), `${NOBODY} 1`);
    expect(users.hasOthers()).toBe(false);
    expect(() => statSync(join(folder, 'users', String(NOBODY)))).toThrow('ENOENT');
    writeFileSync(join(folder, 'users', String(process.ppid)), processIdentity(process.ppid));
    expect(users.hasOthers()).toBe(true);
  });
});

describe('keptSecret', () => {
  it('is made once and readable by its owner alone', () => {
    const file = join(folder, 'secret');
    const secret = keptSecret(file, 24);
    expect(secret).toMatch(/^[0-9a-f]{48}$/);
    expect(keptSecret(file, 24)).toBe(secret);
    expect(statSync(file).mode & 0o777).toBe(0o600);
  });
});

describe('assertOwnFolder', () => {
  const me = { uid: process.getuid?.() ?? -1, gid: process.getgid?.() ?? -1 };

  it('accepts a private folder of the user', () => {
    const mine = mkdtempSync(join(folder, 'mine-'));
    expect(() => assertOwnFolder(mine, me)).not.toThrow();
  });

  it('refuses a link, a folder others may enter, and one of somebody else', () => {
    const mine = mkdtempSync(join(folder, 'mine-'));
    const link = join(folder, 'link');
    symlinkSync(mine, link);
    expect(() => assertOwnFolder(link, me)).toThrow('left alone');
    expect(() => assertOwnFolder(mine, { uid: me.uid + 1, gid: me.gid })).toThrow('left alone');
    chmodSync(mine, 0o777);
    expect(() => assertOwnFolder(mine, me)).toThrow('left alone');
  });
});
