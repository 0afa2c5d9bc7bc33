import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { freePort } from '../../../db/local/cluster.mjs';
import { fingerprint } from '../../../jobs/start/build.mjs';
import { serviceEnvironment } from '../../../jobs/start/environment.mjs';
import { assertNodeVersion } from '../../../jobs/start/node-version.mjs';
import { assertPortFree, parsePort } from '../../../jobs/start/port.mjs';

let root = '';
beforeAll(() => (root = mkdtempSync(join(tmpdir(), 'intervale-start-'))));
afterAll(() => rmSync(root, { recursive: true }));

describe('parsePort', () => {
  it.each([
    [undefined, 3000],
    ['', 3000],
    [' 8080 ', 8080],
    ['65535', 65535],
  ])('%s is %i', (text, port) => expect(parsePort(text)).toBe(port));

  it.each(['0', '65536', 'abc', '80.5', '-1', '0x50'])('refuses %s, naming PORT', (text) => {
    expect(() => parsePort(text)).toThrow(/^PORT is/);
  });
});

describe('assertPortFree', () => {
  it('names a busy port and the variable, whichever loopback address holds it', async () => {
    const port = await freePort();
    const other = createServer();
    await new Promise<void>((resolve) => other.listen(port, '127.0.0.1', resolve));
    try {
      const message = new RegExp(`^Port ${port} is taken.*Set PORT`);
      await expect(assertPortFree(port, '127.0.0.1')).rejects.toThrow(message);
      await expect(assertPortFree(port, '127.0.0.2')).rejects.toThrow(message);
    } finally {
      await new Promise((resolve) => other.close(resolve));
    }
    await expect(assertPortFree(port, '127.0.0.1')).resolves.toBeUndefined();
  });

  it('says when the host is not one of this machine', async () => {
    await expect(assertPortFree(await freePort(), '203.0.113.1')).rejects.toThrow('HOST 203.0.113.1');
  });
});

describe('assertNodeVersion', () => {
  it.each(['20.19.0', '20.20.2', '22.1.0'])('accepts %s', (version) => {
    expect(() => assertNodeVersion(version)).not.toThrow();
  });
  it.each(['20.18.9', '18.20.0'])('refuses %s', (version) => {
    expect(() => assertNodeVersion(version)).toThrow('Node 20.19 or newer');
  });
});

describe('fingerprint', () => {
  it('changes with content, names and the variables that configuration files read, and with nothing else', () => {
    mkdirSync(join(root, 'app'));
    writeFileSync(join(root, 'app', 'a.ts'), 'one');
    writeFileSync(join(root, 'vite.config.ts'), 'export default process.env.BASE_PATH;');
    const first = fingerprint(root, {});
    writeFileSync(join(root, 'README.md'), 'no part of the build');
    expect(fingerprint(root, { OTHER: 'x' })).toBe(first);
    expect(fingerprint(root, { BASE_PATH: '/x' })).not.toBe(first);
    writeFileSync(join(root, 'app', 'a.ts'), 'two');
    const second = fingerprint(root, {});
    expect(second).not.toBe(first);
    rmSync(join(root, 'app', 'a.ts'));
    writeFileSync(join(root, 'app', 'b.ts'), 'two');
    expect(fingerprint(root, {})).not.toBe(second);
  });
});

describe('serviceEnvironment', () => {
  it('serves the demo, whose passwords are public, to this machine alone', () => {
    const env = serviceEnvironment(root, { url: 'postgres://x', demo: true, port: 3100 }, {});
    expect(env).toMatchObject({
      DATABASE_URL: 'postgres://x',
      NODE_ENV: 'production',
      INTERVALE_DEMO: '1',
      HOST: '127.0.0.1',
      APP_ORIGIN: 'http://localhost:3100',
      PORT: '3100',
    });
  });

  it('never marks a database that was given as the demo, and keeps one session secret', () => {
    const given = { INTERVALE_DEMO: '1' };
    const first = serviceEnvironment(root, { url: 'postgres://x', demo: false }, given);
    expect(first).not.toHaveProperty('INTERVALE_DEMO');
    expect(first).not.toHaveProperty('HOST');
    expect(first.SESSION_SECRET).toMatch(/^[0-9a-f]{64}$/);
    expect(serviceEnvironment(root, { url: 'postgres://x', demo: false }, given)).toEqual(first);
  });

  it('lets what is set stand', () => {
    const given = { HOST: '0.0.0.0', APP_ORIGIN: 'https://intervale.example', SESSION_SECRET: 'set' };
    expect(serviceEnvironment(root, { url: 'postgres://x', demo: true }, given)).toMatchObject(given);
  });
});
