import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { setTimeout as sleep } from 'node:timers/promises';
import { expect, it } from 'vitest';
import { peerAddress } from '~/services/peer-address.server';

it('is that of the request at hand, also after waiting, and none outside of one', async () => {
  const server = createServer((_, response) => {
    void sleep(5).then(() => response.end(String(peerAddress())));
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  try {
    const { port } = server.address() as AddressInfo;
    const answers = await Promise.all(
      [1, 2, 3].map(async () => (await fetch(`http://127.0.0.1:${port}`)).text()),
    );
    expect(answers).toEqual(['127.0.0.1', '127.0.0.1', '127.0.0.1']);
    expect(peerAddress()).toBeNull();
  } finally {
    server.close();
  }
});
