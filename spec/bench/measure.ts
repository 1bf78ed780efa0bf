import { closeSync, openSync, readSync } from 'node:fs';
import type { Capture } from '#shared/capture/capture';
import { readCapture } from '#shared/capture/read-capture';
import { decode } from '#shared/decode/decode';
import { BASELINE } from '#shared/rules/baseline';
import { check } from '#shared/rules/check';
import type { CheckResult } from '#shared/rules/finding';

const CHUNK_BYTES = 1_048_576;

/** The chunks of a file in one buffer that is used again and again: as little as possible beside the counting and the reading. */
export function* fileChunks(path: string): Generator<Uint8Array> {
  const file = openSync(path, 'r');
  try {
    const buffer = new Uint8Array(CHUNK_BYTES);
    for (;;) {
      const length = readSync(file, buffer, 0, CHUNK_BYTES, null);
      if (length === 0) return;
      yield buffer.subarray(0, length);
    }
  } finally {
    closeSync(file);
  }
}

/** The yardstick: every byte of the file is looked at once by plain JavaScript. */
export function countNewlines(path: string): number {
  let count = 0;
  for (const chunk of fileChunks(path)) count += newlinesIn(chunk);
  return count;
}

function newlinesIn(bytes: Uint8Array): number {
  let count = 0;
  const { length } = bytes;
  for (let i = 0; i < length; i++) if (bytes[i] === 10) count += 1;
  return count;
}

export function readFile(path: string): Promise<Capture> {
  return readCapture(fileChunks(path));
}

/** From the file to the findings. */
export async function findingsOf(path: string): Promise<CheckResult> {
  return judge(await readFile(path));
}

/** From the capture to the findings. */
export function judge(capture: Capture): CheckResult {
  return check(decode(capture), BASELINE);
}

/** Milliseconds that `work` takes. */
export async function timed(work: () => unknown): Promise<number> {
  const start = performance.now();
  await work();
  return performance.now() - start;
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[sorted.length >> 1];
}
