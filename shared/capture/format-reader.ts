import type { Capture } from './capture';

/** A reader of one file format: takes the file in chunks of any length. Throws nothing but `CaptureError`. */
export interface FormatReader {
  /** The chunk is not kept: its buffer may be used again. */
  push(chunk: Uint8Array): void;
  finish(): Capture;
}

/** Tells which channels must be kept however busy they are. */
export class KeepRule {
  /** `endings`: names or endings of names. */
  constructor(private readonly endings: readonly string[]) {}

  isKept(channelName: string): boolean {
    return this.endings.some((ending) => channelName.endsWith(ending));
  }

  /** Whether a bit of the vector of that name is kept, `name[3]`. */
  isBitKept(vectorName: string): boolean {
    return this.endings.some((ending) => {
      const [, base] = /^(.*)\[-?\d+\]$/.exec(ending) ?? [];
      return base !== undefined && vectorName.endsWith(base);
    });
  }
}
