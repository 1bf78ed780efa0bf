import { Transform } from 'node:stream';
import { findCharacterSet, findKind, SNIFFED_BYTES } from '#shared/capture/sniff';
import { Utf16Transcoder } from '#shared/capture/utf16';
import { isGzip } from './unpack';

/** Passes a stream on, and breaks it off with a `CaptureError` where its first bytes are those of something that is no capture. */
export function checkHead(): Transform {
  const seen: Buffer[] = [];
  let length = 0;
  let isJudged = false;
  const judge = (): void => {
    isJudged = true;
    const head = Buffer.concat(seen).subarray(0, SNIFFED_BYTES);
    // What is packed shows when it is read.
    if (isGzip(head)) return;
    const set = findCharacterSet(head);
    findKind(set === 'bytes' ? head : new Utf16Transcoder(set === 'utf-16le').convert(head));
  };
  const tried = (done: (error?: Error | null) => void, work: () => void): void => {
    try {
      work();
    } catch (error) {
      done(error as Error);
      return;
    }
    done();
  };
  return new Transform({
    transform(chunk: Buffer, _encoding, done) {
      tried(done, () => {
        if (!isJudged) {
          seen.push(chunk);
          length += chunk.length;
          if (length >= SNIFFED_BYTES) judge();
        }
        this.push(chunk);
      });
    },
    flush(done) {
      tried(done, () => {
        if (!isJudged) judge();
      });
    },
  });
}
