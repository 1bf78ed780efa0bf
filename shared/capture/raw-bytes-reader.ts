import { ByteLogRecorder } from './byte-log';
import type { Capture } from './capture';
import { DefectList } from './defect-list';
import type { FormatReader } from './format-reader';
import type { TimeBase } from '../time/time-base';

/** Where there are no times a tick is a character of nine elements at 1200 bit/s, so that order and length look right. */
export const CHARACTER_TIME_BASE: TimeBase = {
  unitNumerator: 9n,
  unitDenominator: 1200n,
  originUnits: 0n,
  unitsPerTick: 1n,
};

/** Tells that the times of the capture are none. */
export function noTimes(defects: DefectList): void {
  const message = 'the file has no times: its bytes are shown one after the other, as if sent at 1200 bit/s';
  defects.add('no-times', message, { line: null, column: null, byte: null });
}

/** Reads what a port received, byte by byte as it came. */
export class RawBytesReader implements FormatReader {
  private readonly recorder = new ByteLogRecorder();

  push(chunk: Uint8Array): void {
    for (const value of chunk) this.recorder.add(this.recorder.count, value, false);
  }

  finish(): Capture {
    const defects = new DefectList();
    noTimes(defects);
    const log = this.recorder.finish(false);
    return {
      format: 'bytes',
      byteLength: log.count,
      timeBase: CHARACTER_TIME_BASE,
      endTicks: log.count,
      layout: 'transitions',
      sampleIntervalTicks: null,
      unitTicks: 1,
      channels: [],
      gaps: [],
      defects: defects.toArray(),
      notes: [],
      log,
    };
  }
}
