import { gzipSync } from 'node:zlib';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Defect } from '#shared/capture/capture';
import { CaptureError } from '#shared/capture/capture-error';
import { unpack } from './unpack';

async function* pieces(bytes: Buffer, size: number): AsyncGenerator<Buffer> {
  for (let i = 0; i < bytes.length; i += size) yield bytes.subarray(i, i + size);
}

async function unpackAll(
  bytes: Buffer,
  size = 700,
  most?: number,
): Promise<{ text: string; defects: Defect[] }> {
  const defects: Defect[] = [];
  const got: Buffer[] = [];
  for await (const chunk of unpack(pieces(bytes, size), (defect) => defects.push(defect), most))
    got.push(chunk);
  return { text: Buffer.concat(got).toString('latin1'), defects };
}

const TEXT = Array.from({ length: 4000 }, (_, i) => `${i},${(i * 7919) % 1000}`).join('\n');

describe('unpack', () => {
  it('hands a plain file on as it is', async () => {
    expect(await unpackAll(Buffer.from(TEXT))).toEqual({ text: TEXT, defects: [] });
  });

  it('unpacks gzip, one member or several joined (RFC 1952, section 2.2)', async () => {
    const half = TEXT.length >> 1;
    const joined = Buffer.concat([gzipSync(TEXT.slice(0, half)), gzipSync(TEXT.slice(half))]);
    expect(await unpackAll(gzipSync(TEXT))).toEqual({ text: TEXT, defects: [] });
    expect(await unpackAll(joined)).toEqual({ text: TEXT, defects: [] });
  });

  it('keeps what came before the place where a packed file breaks off, and tells', async () => {
    const packed = gzipSync(TEXT, { level: 1 });
    const { text, defects } = await unpackAll(packed.subarray(0, packed.length - 600), 100);
    expect(defects.map(({ code }) => code)).toEqual(['cut-short']);
    expect(TEXT.startsWith(text)).toBe(true);
  });

  it('refuses what grows too large', async () => {
    await expect(unpackAll(gzipSync(Buffer.alloc(3_000_000)), 700, 1_000_000)).rejects.toThrow(
      'more than 1000000',
    );
  });

  it('throws nothing but a CaptureError for anything that begins like gzip', async () => {
    await fc.assert(
      fc.asyncProperty(fc.uint8Array({ maxLength: 300 }), async (rest) => {
        try {
          await unpackAll(Buffer.from([0x1f, 0x8b, ...rest]));
        } catch (error) {
          expect(error).toBeInstanceOf(CaptureError);
        }
      }),
      { numRuns: 200 },
    );
  });
});
