import { ByteLogReader } from './byte-log-reader';
import type { Capture } from './capture';
import { CaptureError } from './capture-error';
import { CsvReader } from './csv-reader';
import type { FormatReader } from './format-reader';
import { KeepRule } from './format-reader';
import { RawBytesReader } from './raw-bytes-reader';
import { findCharacterSet, findKind, SNIFFED_BYTES } from './sniff';
import { intervalOfRate } from './stated-rate';
import { Utf16Transcoder } from './utf16';
import { VcdReader } from './vcd-reader';

export interface CaptureReaderOptions {
  /** Samples per second, where the file has no times of its own; wins over what the file states. */
  readonly sampleRateHz?: number;
  /** Channels that are kept however busy they are: names or endings of names. */
  readonly keep?: readonly string[];
}

export interface ReadCaptureOptions extends CaptureReaderOptions {
  /** Called after each chunk with the bytes read so far. */
  readonly onProgress?: (bytes: number) => void;
  /** Asked before each chunk. True: `readCapture` rejects with a `CaptureError` of code `cancelled`. */
  readonly isCancelled?: () => boolean;
}

/**
 * Reads a capture file that is handed over in chunks of any length; tells by the content what it is. Throws nothing but
 * `CaptureError`, and that only where nothing in the file can be used: other damage is listed in `Capture.defects`.
 */
export class CaptureReader {
  private readonly keep: KeepRule;
  private head = new Uint8Array(0);
  private byteLength = 0;
  private transcoder: Utf16Transcoder | null = null;
  private reader: FormatReader | null = null;

  constructor(private readonly options: CaptureReaderOptions = {}) {
    this.keep = new KeepRule(options.keep ?? []);
  }

  /** Takes the next bytes. The chunk is not kept: its buffer may be used again. */
  push(chunk: Uint8Array): void {
    this.withRightPlace(() => this.take(chunk));
  }

  /** The whole file was pushed. Call once. */
  finish(): Capture {
    return this.withRightPlace(() => this.end());
  }

  /** Offsets in a converted text mean nothing to the reader of a message. */
  private withRightPlace<T>(work: () => T): T {
    try {
      return work();
    } catch (error) {
      if (this.transcoder === null || !(error instanceof CaptureError)) throw error;
      throw new CaptureError(error.code, error.message, {
        line: error.place.line,
        column: error.place.column,
      });
    }
  }

  private take(chunk: Uint8Array): void {
    this.byteLength += chunk.length;
    if (this.reader !== null) {
      this.hand(this.reader, chunk);
      return;
    }
    const joined = new Uint8Array(this.head.length + chunk.length);
    joined.set(this.head);
    joined.set(chunk, this.head.length);
    this.head = joined;
    if (joined.length >= SNIFFED_BYTES) this.start();
  }

  private end(): Capture {
    if (this.byteLength === 0) throw new CaptureError('empty-file', 'the file is empty', { byte: 0 });
    const capture = (this.reader ?? this.start()).finish();
    if (this.transcoder === null) return capture;
    const defects = capture.defects.map((defect) => ({ ...defect, byte: null }));
    return { ...capture, byteLength: this.byteLength, defects };
  }

  private start(): FormatReader {
    const set = findCharacterSet(this.head);
    let sniffed = this.head.subarray(0, SNIFFED_BYTES);
    if (set !== 'bytes') {
      this.transcoder = new Utf16Transcoder(set === 'utf-16le');
      sniffed = new Utf16Transcoder(set === 'utf-16le').convert(sniffed).slice();
    }
    const reader = this.makeReader(findKind(sniffed));
    this.reader = reader;
    const head = this.head;
    this.head = new Uint8Array(0);
    this.hand(reader, head);
    return reader;
  }

  private makeReader(kind: ReturnType<typeof findKind>): FormatReader {
    if (kind === 'vcd') return new VcdReader(this.keep);
    if (kind === 'log') return new ByteLogReader();
    if (kind === 'raw') return new RawBytesReader();
    const { sampleRateHz } = this.options;
    return new CsvReader(this.keep, sampleRateHz === undefined ? null : intervalOfRate(sampleRateHz));
  }

  private hand(reader: FormatReader, chunk: Uint8Array): void {
    reader.push(this.transcoder === null ? chunk : this.transcoder.convert(chunk));
  }
}

/** Reads a whole capture from a source of chunks, such as a file stream. Errors of the source itself pass through. */
export async function readCapture(
  source: AsyncIterable<Uint8Array> | Iterable<Uint8Array>,
  options: ReadCaptureOptions = {},
): Promise<Capture> {
  const reader = new CaptureReader(options);
  let bytes = 0;
  for await (const chunk of source) {
    if (options.isCancelled?.() === true)
      throw new CaptureError('cancelled', 'reading was cancelled', { byte: bytes });
    reader.push(chunk);
    bytes += chunk.length;
    options.onProgress?.(bytes);
  }
  return reader.finish();
}
