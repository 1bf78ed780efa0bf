import type { AnalogChannel, Capture, DigitalChannel } from './capture';
import type { CaptureError } from './capture-error';
import type { CaptureReaderOptions } from './read-capture';
import { CaptureReader } from './read-capture';

/** For specs: files written as text, and captures shown as text. */

export function bytesOf(text: string): Uint8Array {
  return Uint8Array.from(unescape(encodeURIComponent(text)), (c) => c.charCodeAt(0));
}

export function readBytes(bytes: Uint8Array, options: CaptureReaderOptions = {}, chunk = 65_536): Capture {
  const reader = new CaptureReader(options);
  for (let i = 0; i < bytes.length; i += chunk) reader.push(bytes.subarray(i, i + chunk));
  return reader.finish();
}

export function readText(text: string, options: CaptureReaderOptions = {}): Capture {
  return readBytes(bytesOf(text), options);
}

/** The error that reading ends with. */
export function refusalOf(file: string | Uint8Array, options: CaptureReaderOptions = {}): CaptureError {
  try {
    readBytes(typeof file === 'string' ? bytesOf(file) : file, options);
  } catch (error) {
    return error as CaptureError;
  }
  throw new Error('the file was read');
}

export function digitalOf(capture: Capture, name: string): DigitalChannel {
  const channel = capture.channels.find((one) => one.name === name);
  if (channel?.kind !== 'digital') throw new Error(`${name} is no digital channel`);
  return channel;
}

export function analogOf(capture: Capture, name: string): AnalogChannel {
  const channel = capture.channels.find((one) => one.name === name);
  if (channel?.kind !== 'analog') throw new Error(`${name} is no analog channel`);
  return channel;
}

/** Levels of a channel as text: `0 1@100 x@250`, the first from tick 0 on. */
export function edgesOf(capture: Capture, name: string): string {
  const { initialLevel, ticks, levels } = digitalOf(capture, name);
  const letters = '01x';
  const changes = Array.from(ticks, (tick, i) => `${letters[levels[i]]}@${tick}`);
  return [letters[initialLevel], ...changes].join(' ');
}

/** Defects as text: `bad-time 3:1`. */
export function defectsOf(capture: Capture): string[] {
  return capture.defects.map(({ code, line, column }) => `${code} ${line}:${column}`);
}
