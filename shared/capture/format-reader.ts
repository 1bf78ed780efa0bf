import type { Capture } from './capture';

/** A reader of one file format: takes the file in chunks of any length. Throws nothing but `CaptureError`. */
export interface FormatReader {
  /** The chunk is not kept: its buffer may be used again. */
  push(chunk: Uint8Array): void;
  finish(): Capture;
}

/** Whether a channel must be kept however busy it is. */
export type KeepRule = (channelName: string) => boolean;
