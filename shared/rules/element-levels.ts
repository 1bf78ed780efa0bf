import type { Decoded } from '../decode/decoded';
import { bitsAfterStart } from '../characters/framing';
import { MARK, SPACE } from '../line/level-trace';
import { levelAt } from '../line/level-at';
import { VoltageReader } from '../line/voltage-reader';
import type { AnalogLine } from './analog-line';

/** Levels of the elements of undamaged characters, in order of time. */
export interface ElementLevels {
  readonly count: number;
  /** Median of the middle half, volts. Source: rules.md 9. */
  readonly volts: Float32Array;
  readonly startTicks: Float64Array;
  /** MARK or SPACE. */
  readonly levels: Uint8Array;
  /** Elements with too few samples in their middle half. */
  readonly unseen: number;
}

/** Samples the middle half of an element must hold (house). */
export const LEAST_ELEMENT_SAMPLES = 3;

/** Several rules ask for the same levels. */
const KEPT = new WeakMap<Decoded, ElementLevels>();

/** Start, data, parity and stop elements of all undamaged characters of the data line. */
export function elementLevels(decoded: Decoded, line: AnalogLine, bitTicks: number): ElementLevels {
  const kept = KEPT.get(decoded);
  if (kept !== undefined) return kept;
  const levels = measure(decoded, line, bitTicks);
  KEPT.set(decoded, levels);
  return levels;
}

function measure(decoded: Decoded, { line, channel }: AnalogLine, bitTicks: number): ElementLevels {
  const { characters, framing } = decoded;
  const voltage = new VoltageReader(channel);
  const elements = framing === null ? 0 : bitsAfterStart(framing) + 2;
  const most = characters.count * elements;
  const volts = new Float32Array(most);
  const startTicks = new Float64Array(most);
  const kinds = new Uint8Array(most);
  let count = 0;
  let unseen = 0;
  for (let c = 0; c < characters.count; c++) {
    if (characters.errors[c] !== 0) continue;
    for (let n = 0; n < elements; n++) {
      const start = characters.startTicks[c] + n * bitTicks;
      const kind = levelAt(line.trace, start + bitTicks / 2);
      if (kind !== MARK && kind !== SPACE) continue;
      const level = voltage.median(start + bitTicks / 4, start + 0.75 * bitTicks, LEAST_ELEMENT_SAMPLES);
      if (level === undefined) {
        unseen += 1;
        continue;
      }
      volts[count] = level;
      startTicks[count] = start;
      kinds[count] = kind;
      count += 1;
    }
  }
  return {
    count,
    volts: volts.subarray(0, count),
    startTicks: startTicks.subarray(0, count),
    levels: kinds.subarray(0, count),
    unseen,
  };
}
