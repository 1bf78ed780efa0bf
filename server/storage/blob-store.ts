import { createHash, randomUUID } from 'node:crypto';
import { createWriteStream } from 'node:fs';
import { mkdir, readdir, rename, rm, stat, statfs } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import type { Readable } from 'node:stream';
import { PassThrough, Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { flush } from './flush';

/** A file that was received whole but is not yet known to the database. */
export interface ReceivedFile {
  readonly sha256: string;
  readonly size: number;
  readonly temporary: string;
}

/** Room that stays free on the disk, bytes. */
const RESERVE = 256 * 1024 ** 2;

/**
 * Files by their SHA-256 below one folder. A file is hashed while it streams to a temporary name, flushed, and only then renamed
 * to its place, so that a name in the store always means a whole file.
 */
export class BlobStore {
  constructor(
    private readonly folder: string,
    private readonly reserve = RESERVE,
  ) {}

  async prepare(): Promise<void> {
    await mkdir(join(this.folder, 'blobs'), { recursive: true, mode: 0o700 });
    // What a crash left behind was never acknowledged.
    await rm(this.incoming, { recursive: true, force: true });
    await mkdir(this.incoming, { mode: 0o700 });
  }

  /** Bytes that may still be received. */
  async room(): Promise<number> {
    const { bavail, bsize } = await statfs(this.folder);
    return Math.max(0, bavail * bsize - this.reserve);
  }

  pathOf(sha256: string): string {
    return join(this.folder, 'blobs', sha256.slice(0, 2), sha256);
  }

  /** Takes a stream to its end, through `check`, which may break it off. Nothing is left behind then. */
  async receive(source: Readable, check: Transform = new PassThrough()): Promise<ReceivedFile> {
    const temporary = join(this.incoming, randomUUID());
    const hash = createHash('sha256');
    let size = 0;
    const meter = new Transform({
      transform(chunk: Buffer, _encoding, done) {
        hash.update(chunk);
        size += chunk.length;
        done(null, chunk);
      },
    });
    try {
      await pipeline(source, check, meter, createWriteStream(temporary, { flags: 'wx', mode: 0o600 }));
      await flush(temporary);
      return { sha256: hash.digest('hex'), size, temporary };
    } catch (error) {
      await rm(temporary, { force: true });
      throw error;
    }
  }

  /** Moves a received file to its place. A file of the same content is kept as it is. */
  async keep(file: ReceivedFile): Promise<void> {
    const target = this.pathOf(file.sha256);
    const folder = dirname(target);
    await mkdir(folder, { recursive: true, mode: 0o700 });
    if (await exists(target)) await rm(file.temporary, { force: true });
    else await rename(file.temporary, target);
    await flush(folder);
    await flush(dirname(folder));
  }

  async discard(file: ReceivedFile): Promise<void> {
    await rm(file.temporary, { force: true });
  }

  async remove(sha256: string): Promise<void> {
    await rm(this.pathOf(sha256), { force: true });
  }

  /** SHA-256 of every file there is. */
  async list(): Promise<string[]> {
    const entries = await readdir(join(this.folder, 'blobs'), { recursive: true, withFileTypes: true });
    return entries.filter((entry) => entry.isFile()).map((entry) => entry.name);
  }

  private get incoming(): string {
    return join(this.folder, 'incoming');
  }
}

async function exists(path: string): Promise<boolean> {
  try {
    await stat(path);
    return true;
  } catch {
    // stat fails where nothing usable is there, and says no more than that.
    return false;
  }
}
