import { float64List, uint8List } from './number-list';

/** The bytes of an adapter's log in columns, in the order of the file. A byte is whole; its time is the stamp, which comes after it. */
export interface ByteLog {
  readonly count: number;
  /** Never decreases. Bytes under one stamp share it. */
  readonly ticks: Float64Array;
  readonly values: Uint8Array;
  /** 1: sent by the host; 0: by the device. */
  readonly isFromHost: Uint8Array;
  /** False: the file has no times, a tick is one character and tells the order only. */
  readonly hasTimes: boolean;
}

/** Collects the bytes of a log without an object per byte. */
export class ByteLogRecorder {
  private readonly ticks = float64List();
  private readonly values = uint8List();
  private readonly hosts = uint8List();

  get count(): number {
    return this.values.length;
  }

  add(ticks: number, value: number, isFromHost: boolean): void {
    this.ticks.push(ticks);
    this.values.push(value);
    this.hosts.push(Number(isFromHost));
  }

  scaleTimes(scale: (time: number) => number): void {
    this.ticks.forEachChunk((chunk, count) => {
      for (let i = 0; i < count; i++) chunk[i] = scale(chunk[i]);
    });
  }

  finish(hasTimes: boolean): ByteLog {
    return {
      count: this.count,
      ticks: this.ticks.toArray(),
      values: this.values.toArray(),
      isFromHost: this.hosts.toArray(),
      hasTimes,
    };
  }
}
