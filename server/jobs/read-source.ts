import { createReadStream } from 'node:fs';
import type { Capture, Defect } from '#shared/capture/capture';
import { CaptureReader } from '#shared/capture/read-capture';
import type { LineMap } from '#shared/line/line-map';
import { unpack } from '../storage/unpack';
import { watchedChunks } from '../storage/watched-chunks';
import type { SourceFile } from './worker-task';

const CHUNK = 1 << 20;

/** The file needs more memory than one task may use. The message is for people. */
export class BudgetError extends Error {
  override readonly name = 'BudgetError';
}

export interface ReadingOptions {
  readonly sampleRateHz?: number;
  readonly map: LineMap;
  readonly memoryBudget: number;
  /** Takes the share read, 0 to 1. */
  readonly onShare?: (share: number) => void;
}

/**
 * Reads a stored capture, unpacked where it is packed by gzip.
 * @throws CaptureError where nothing in the file can be used
 * @throws BudgetError where it does not fit into the memory
 */
export async function readSource(file: SourceFile, options: ReadingOptions): Promise<Capture> {
  const { sampleRateHz, map, memoryBudget, onShare } = options;
  const reader = new CaptureReader({ sampleRateHz, keep: channelsOf(map) });
  let read = 0;
  const defects: Defect[] = [];
  const stream = createReadStream(file.path, { highWaterMark: CHUNK }) as AsyncIterable<Buffer>;
  const counted = watchedChunks(stream, (chunk) => (read += chunk.length));
  for await (const chunk of unpack(counted, (defect) => defects.push(defect))) {
    reader.push(chunk);
    refuseOverBudget(memoryBudget);
    onShare?.(read / Math.max(1, file.size));
  }
  const capture = reader.finish();
  return defects.length === 0 ? capture : { ...capture, defects: [...capture.defects, ...defects] };
}

/** Limits of the thread count its heap only; the edges lie in array buffers, which Node counts for each thread by itself. */
export function refuseOverBudget(memoryBudget: number): void {
  if (process.memoryUsage().arrayBuffers <= memoryBudget) return;
  throw new BudgetError(
    'The capture needs more memory than one decode may use: record fewer channels or a shorter time.',
  );
}

/** Channels a map names: they are kept however busy they are. */
export function channelsOf(map: LineMap): string[] {
  return Object.values(map.lines ?? {}).flatMap((line) => (line === null ? [] : [line.channel]));
}
