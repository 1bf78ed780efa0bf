import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { CaptureError } from '#shared/capture/capture-error';
import { CaptureReader } from '#shared/capture/read-capture';
import { decode } from '#shared/decode/decode';
import { BASELINE } from '#shared/rules/baseline';
import { check } from '#shared/rules/check';
import { toSeconds } from '#shared/time/time-base';

// Source: the truth files beside the damaged captures, written by simulators independent of this library.

interface Damage {
  readonly file: string;
  readonly verdict: 'reject' | 'report' | 'accept';
  readonly line: number | null;
  readonly salvage_characters: readonly (readonly [number, number])[] | null;
}

const FOLDER = fileURLToPath(new URL('./damaged/', import.meta.url));
const damages = readdirSync(FOLDER)
  .filter((name) => name.endsWith('.truth.json'))
  .map((name) => JSON.parse(readFileSync(FOLDER + name, 'utf8')) as Damage);

function read(file: string): ReturnType<CaptureReader['finish']> {
  const reader = new CaptureReader();
  reader.push(readFileSync(FOLDER + file));
  return reader.finish();
}

describe.each(damages)('$file', ({ file, verdict, line, salvage_characters }) => {
  if (verdict === 'reject') {
    it('is refused with a reason', () => {
      expect(() => read(file)).toThrow(CaptureError);
    });
    return;
  }

  it('is read as far as it holds, the defect told with its line', () => {
    const decoded = decode(read(file));
    const { defects } = decoded.capture;
    if (verdict === 'report') expect(defects.map((defect) => defect.line)).toContain(line);
    else expect(defects).toEqual([]);
    expect(check(decoded, BASELINE).verdict).not.toBe('pass');
    const found = Array.from({ length: decoded.characters.count }, (_, i) => ({
      t: toSeconds(decoded.capture.timeBase, decoded.characters.startTicks[i]),
      value: decoded.characters.values[i],
    }));
    for (const [t, value] of salvage_characters ?? []) {
      expect(found).toContainEqual({ t: expect.closeTo(t, 3) as number, value });
    }
  });
});
