import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { Busboy, type BusboyFileStream } from '@fastify/busboy';

export interface UploadedFile {
  readonly fileName: string;
  /** The fields that stood before the file in the form. */
  readonly fields: Readonly<Partial<Record<string, string>>>;
  readonly stream: AsyncIterable<Uint8Array>;
}

export interface Received<Result> {
  readonly fields: Readonly<Partial<Record<string, string>>>;
  /** What became of the file; undefined when none was chosen. */
  readonly result: Result | undefined;
}

/** A request that is not a whole form with a file: cut off, or not made by the page. */
export class BrokenUploadError extends Error {
  override name = 'BrokenUploadError';
}

/**
 * Receives a form with one file, and hands the file on while it arrives, so that it is never in memory as a
 * whole. What follows a file that was refused is read and thrown away: browsers show no answer before they
 * have sent everything.
 *
 * @param take what to do with the file; it is called at most once.
 * @throws BrokenUploadError, and whatever `take` throws.
 */
export async function receiveUpload<Result>(
  request: Request,
  take: (file: UploadedFile) => Promise<Result>,
): Promise<Received<Result>> {
  const type = request.headers.get('Content-Type') ?? '';
  if (!type.startsWith('multipart/form-data') || request.body === null) {
    throw new BrokenUploadError('This is not a form with a file.');
  }
  const fields: Partial<Record<string, string>> = {};
  const parser = new Busboy({
    headers: { 'content-type': type },
    limits: { files: 1, fields: 10, fieldSize: 1000, parts: 12 },
  });
  let current: BusboyFileStream | undefined;
  let taken: Promise<Result> | undefined;
  parser.on('field', (name, value) => (fields[name] = value));
  parser.on('file', (_field, stream, fileName) => {
    current = stream;
    // Told through `taken` below; a stream without a listener would end the process.
    stream.on('error', () => undefined);
    if (!fileName) return stream.resume();
    taken = take({ fileName, fields: { ...fields }, stream: passOn(stream) }).finally(() => stream.resume());
    taken.catch(() => undefined);
  });
  try {
    await pipeline(Readable.fromWeb(request.body as Parameters<typeof Readable.fromWeb>[0]), parser);
  } catch (error) {
    current?.destroy(new BrokenUploadError('The upload was cut off.'));
    await taken?.catch(() => undefined);
    throw new BrokenUploadError('The upload did not arrive whole. Try again.', { cause: error });
  }
  return { fields, result: await taken };
}

/** The stream, left open when the reader turns away from it early. */
async function* passOn(stream: Readable): AsyncGenerator<Uint8Array> {
  for await (const chunk of stream.iterator({ destroyOnReturn: false })) yield chunk as Uint8Array;
}
