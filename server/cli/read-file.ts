import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { CaptureError } from '#shared/capture/capture-error';
import type { Capture, Defect } from '#shared/capture/capture';
import { CaptureReader } from '#shared/capture/read-capture';
import type { CaptureReaderOptions } from '#shared/capture/read-capture';
import { unpack } from '../storage/unpack';
import { watchedChunks } from '../storage/watched-chunks';
import { UsageError } from './usage-error';

const CHUNK = 1 << 20;

export interface ReadFile {
  readonly capture: Capture;
  readonly sha256: string;
  readonly bytes: number;
}

/**
 * Streams a capture file through a reader, hashing it on the way; one packed by gzip is unpacked. Hash and length are the file's.
 * @throws UsageError in one line, with file, place and reason
 */
export async function readCaptureFile(path: string, options: CaptureReaderOptions): Promise<ReadFile> {
  const reader = new CaptureReader(options);
  const hash = createHash('sha256');
  let bytes = 0;
  try {
    const defects: Defect[] = [];
    const stream = createReadStream(path, { highWaterMark: CHUNK }) as AsyncIterable<Buffer>;
    const counted = watchedChunks(stream, (chunk) => {
      hash.update(chunk);
      bytes += chunk.length;
    });
    for await (const chunk of unpack(counted, (defect) => defects.push(defect))) reader.push(chunk);
    const capture = reader.finish();
    return {
      capture: { ...capture, defects: [...capture.defects, ...defects] },
      sha256: hash.digest('hex'),
      bytes,
    };
  } catch (error) {
    if (error instanceof CaptureError) {
      const where = error.where === '' ? '' : `${error.where}: `;
      throw new UsageError(`${path}: ${where}${error.message}`);
    }
    const reason = systemReason(error);
    if (reason !== undefined) throw new UsageError(`${path}: ${reason}`);
    throw error;
  }
}

/** Words for the usual failures of a file system; undefined for anything else. */
export function systemReason(error: unknown): string | undefined {
  if (!(error instanceof Error) || !('code' in error)) return undefined;
  const words: Record<string, string> = {
    ENOENT: 'there is no such file',
    EISDIR: 'this is a folder, not a file',
    EACCES: 'the file may not be read',
    EPERM: 'the file may not be read',
  };
  return words[String(error.code)] ?? `the file cannot be read (${String(error.code)})`;
}
