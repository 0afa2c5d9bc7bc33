import { Transform } from 'node:stream';

/** Large enough that a page is a handful of pieces, small enough that the first is on its way at once. */
const pieceBytes = 64 * 1024;

/**
 * Passes bytes on in pieces of some size instead of the hundreds of small ones that rendering makes: each costs a trip
 * through the streams between here and the socket. What is left goes out at the end.
 */
export function gatherChunks(): Transform {
  let held: Buffer[] = [];
  let bytes = 0;
  const release = (stream: Transform) => {
    if (bytes === 0) return;
    stream.push(Buffer.concat(held, bytes));
    held = [];
    bytes = 0;
  };
  return new Transform({
    transform(chunk: Buffer, _encoding, done) {
      held.push(chunk);
      bytes += chunk.length;
      if (bytes >= pieceBytes) release(this);
      done();
    },
    flush(done) {
      release(this);
      done();
    },
  });
}
