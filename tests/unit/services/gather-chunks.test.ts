import { describe, expect, it } from 'vitest';
import { gatherChunks } from '~/services/gather-chunks.server';

async function piecesOf(chunks: readonly Buffer[]): Promise<Buffer[]> {
  const stream = gatherChunks();
  const pieces: Buffer[] = [];
  stream.on('data', (piece: Buffer) => pieces.push(piece));
  for (const chunk of chunks) stream.write(chunk);
  stream.end();
  await new Promise((resolve) => stream.on('end', resolve));
  return pieces;
}

describe('a page on its way', () => {
  it('goes out in few pieces, whole and in order', async () => {
    const chunks = Array.from({ length: 300 }, (_, index) => Buffer.from(`${index},`.repeat(100)));
    const pieces = await piecesOf(chunks);
    expect(Buffer.concat(pieces).equals(Buffer.concat(chunks))).toBe(true);
    expect(pieces.length).toBeLessThanOrEqual(3);
  });

  it('sends the first piece before the page is over', async () => {
    const stream = gatherChunks();
    const first = new Promise((resolve) => stream.once('data', resolve));
    stream.write(Buffer.alloc(70_000));
    expect(await first).toHaveLength(70_000);
  });

  it('is nothing where there is nothing', async () => {
    expect(await piecesOf([])).toEqual([]);
  });
});
