import { HIGH, LOW, UNKNOWN } from './capture';
import type { ColumnSink, CsvChannels } from './csv-channels';
import { levelOfText } from './csv-columns';
import type { CsvRow } from './csv-row';
import { DecimalNumber } from './decimal-number';
import { decodeText } from './text-bytes';

const ZERO = 0x30;
const LONGEST_CELL = 32;

/** Told of a cell that states nothing its column can hold. */
export type CellReport = (code: string, from: number, to: number, channelName: string) => void;

/** Takes the cells of a row as levels and voltages. An empty cell: the channel is as in the row before. */
export class CsvCells {
  /** The last row held a cell that states nothing. */
  hasBadCell = false;
  private readonly number = new DecimalNumber();

  constructor(
    private readonly channels: CsvChannels,
    private readonly hasComma: boolean,
    private readonly report: CellReport,
  ) {}

  /** True: no channel changed with this row. */
  take(bytes: Uint8Array, row: CsvRow, ticks: number): boolean {
    this.hasBadCell = false;
    let isUnchanged = true;
    for (const sink of this.channels.sinks) {
      const from = row.starts[sink.column.index];
      const to = row.ends[sink.column.index];
      if (to <= from) continue;
      const isSame =
        sink.digital === null
          ? this.takeVolts(sink, bytes, from, to)
          : this.takeLevel(sink, bytes, from, to, ticks);
      if (!isSame) isUnchanged = false;
    }
    this.channels.pushAnalog(ticks);
    return isUnchanged;
  }

  private takeLevel(sink: ColumnSink, bytes: Uint8Array, from: number, to: number, ticks: number): boolean {
    const recorder = sink.digital;
    if (recorder === null) return true;
    const before = recorder.level;
    recorder.change(ticks, this.levelOf(sink, bytes, from, to));
    return recorder.level === before;
  }

  private levelOf(sink: ColumnSink, bytes: Uint8Array, from: number, to: number): number {
    if (to - from === 1) {
      if (bytes[from] === ZERO) return LOW;
      if (bytes[from] === ZERO + 1) return HIGH;
    }
    const level = to - from > LONGEST_CELL ? undefined : levelOfText(decodeText(bytes.subarray(from, to)));
    if (level !== undefined) return level;
    this.hasBadCell = true;
    this.report('bad-level', from, to, oneLine(sink.column.name));
    return UNKNOWN;
  }

  private takeVolts(sink: ColumnSink, bytes: Uint8Array, from: number, to: number): boolean {
    const { number } = this;
    const before = sink.value;
    if (number.parse(bytes, from, to, this.hasComma)) {
      sink.value = number.toDouble() * sink.column.voltsPerUnit;
    } else {
      const text = decodeText(bytes.subarray(from, Math.min(to, from + LONGEST_CELL)));
      // What instruments write for a value out of range or not taken.
      if (!/^[+-]?(nan|inf(inity)?|-+|\*+)$/i.test(text)) {
        this.hasBadCell = true;
        this.report('bad-value', from, to, oneLine(sink.column.name));
      }
      sink.value = NaN;
    }
    return sink.value === before;
  }
}

/** A name may hold line breaks, a message may not. */
function oneLine(name: string): string {
  return name.replace(/\s+/g, ' ');
}
