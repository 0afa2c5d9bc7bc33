import { createHash } from 'node:crypto';
import { createWriteStream } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Readable, Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { recogniseForeign } from './import-sniff';
import { ImportFileError } from './import-types';

/** Largest file taken: 64 MiB. */
export const importMaxBytes = 64 * 1024 * 1024;

const headBytes = 4096;

/** A file laid down on this machine for as long as it is being read. */
export interface SpooledFile {
  readonly path: string;
  readonly bytes: number;
  readonly sha256: Buffer;
  /** `latin-1` when the bytes are not UTF-8. */
  readonly encoding: 'utf-8' | 'latin-1';
  /** Takes the file away; safe to call again. */
  readonly remove: () => Promise<void>;
}

/**
 * Lays a stream down as a temporary file, and looks on the way at what it is. Memory does not grow with the
 * file. UTF-8 can only be told from Latin-1 at the end of a file, so it has to be there whole before it is read.
 *
 * @throws ImportFileError for a file that is empty, too large, or plainly no text; nothing is left behind then.
 */
export async function spoolFile(stream: Readable | AsyncIterable<Uint8Array>): Promise<SpooledFile> {
  const directory = await mkdtemp(join(tmpdir(), 'intervale-import-'));
  const path = join(directory, 'file.csv');
  const remove = () => rm(directory, { recursive: true, force: true });
  const look = new Inspection();
  try {
    await pipeline(Readable.from(stream, { objectMode: false }), look, createWriteStream(path));
    const { bytes, encoding, sha256 } = look.finished();
    return { path, bytes, encoding, sha256, remove };
  } catch (error) {
    await remove();
    throw error;
  }
}

/** Passes bytes on and keeps their count, their hash, and whether they are text. */
class Inspection extends Transform {
  private head: Buffer = Buffer.alloc(0);
  private bytes = 0;
  private isUtf8 = true;
  private readonly hash = createHash('sha256');
  private readonly decoder = new TextDecoder('utf-8', { fatal: true });

  override _transform(
    chunk: Buffer,
    _encoding: string,
    done: (error: Error | null, chunk?: Buffer) => void,
  ): void {
    try {
      this.inspect(chunk);
      done(null, chunk);
    } catch (error) {
      done(error as Error);
    }
  }

  private inspect(chunk: Buffer): void {
    this.bytes += chunk.length;
    if (this.bytes > importMaxBytes) {
      throw new ImportFileError(
        `The file is larger than ${importMaxBytes / 1024 / 1024} MiB. Split it into several and import them one after the other.`,
      );
    }
    if (this.head.length < headBytes) {
      this.head = Buffer.concat([this.head, chunk.subarray(0, headBytes - this.head.length)]);
      this.refuseForeign();
    }
    if (chunk.includes(0)) throw notCsv('holds NUL bytes, which no text does, so it is');
    this.hash.update(chunk);
    this.isUtf8 &&= this.decodes(chunk, true);
  }

  private refuseForeign(): void {
    const foreign = recogniseForeign(this.head);
    if (foreign !== null) throw notCsv(`is ${foreign},`);
  }

  private decodes(chunk: Buffer | undefined, stream: boolean): boolean {
    try {
      this.decoder.decode(chunk, { stream });
      return true;
    } catch {
      return false;
    }
  }

  finished(): Pick<SpooledFile, 'bytes' | 'encoding' | 'sha256'> {
    if (this.bytes === 0) throw new ImportFileError('The file is empty.');
    const isUtf8 = this.isUtf8 && this.decodes(undefined, false);
    return { bytes: this.bytes, encoding: isUtf8 ? 'utf-8' : 'latin-1', sha256: this.hash.digest() };
  }
}

function notCsv(what: string): ImportFileError {
  return new ImportFileError(
    `This ${what} not a CSV file. In the program it comes from, save it as CSV (UTF-8).`,
  );
}
