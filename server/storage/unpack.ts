import { Readable } from 'node:stream';
import { createGunzip } from 'node:zlib';
import type { Defect } from '#shared/capture/capture';
import { CaptureError } from '#shared/capture/capture-error';

/** One packed file can grow a thousandfold: more than this is not taken, bytes. */
export const MOST_UNPACKED_BYTES = 8 * 1024 ** 3;
const CHUNK = 1 << 20;

/** Whether a file is packed by gzip. Source: RFC 1952, section 2.3.1 (ID1, ID2). */
export function isGzip(head: Uint8Array): boolean {
  return head[0] === 0x1f && head[1] === 0x8b;
}

/**
 * Hands a file on as it is, or unpacked where it is packed by gzip (several members joined as well, RFC 1952, section 2.2). What was
 * unpacked before a packed file breaks off counts; the damage is told to `onDefect`.
 * @throws CaptureError where nothing could be unpacked, or too much
 */
export async function* unpack(
  chunks: AsyncIterable<Buffer>,
  onDefect: (defect: Defect) => void,
  mostBytes = MOST_UNPACKED_BYTES,
): AsyncGenerator<Buffer> {
  const source = chunks[Symbol.asyncIterator]();
  const first = await source.next();
  if (first.done === true) return;
  if (!isGzip(first.value)) {
    yield first.value;
    for (let next = await source.next(); next.done !== true; next = await source.next()) yield next.value;
    return;
  }
  const packed = Readable.from(joined(first.value, source));
  const gunzip = createGunzip({ chunkSize: CHUNK });
  packed.once('error', (error) => gunzip.destroy(error));
  packed.pipe(gunzip);
  let bytes = 0;
  try {
    for await (const chunk of gunzip as AsyncIterable<Buffer>) {
      bytes += chunk.length;
      if (bytes > mostBytes)
        throw new CaptureError('too-large', `unpacked, the file has more than ${mostBytes} bytes`);
      yield chunk;
    }
  } catch (error) {
    const reason = damageOf(error);
    if (reason === undefined) throw error;
    if (bytes === 0)
      throw new CaptureError('not-a-capture', `the file is packed by gzip, but ${reason}`, { byte: 0 });
    onDefect({
      code: 'cut-short',
      line: null,
      column: null,
      byte: bytes,
      message: `the packing is damaged: ${reason}; what came before was read`,
    });
  } finally {
    packed.destroy();
    gunzip.destroy();
  }
}

async function* joined(first: Buffer, rest: AsyncIterator<Buffer>): AsyncGenerator<Buffer> {
  yield first;
  for (let next = await rest.next(); next.done !== true; next = await rest.next()) yield next.value;
}

/** Words for what zlib found; undefined for anything that is no damage of the packed file. */
function damageOf(error: unknown): string | undefined {
  if (!(error instanceof Error) || !('code' in error)) return undefined;
  switch (error.code) {
    case 'Z_BUF_ERROR':
      return 'it ends in the middle';
    case 'Z_DATA_ERROR':
      return 'its content does not fit its checks';
    default:
      return undefined;
  }
}
