import { isDataRole } from '../line/digital-trace';
import type { LineRole, Polarity } from '../line/line-map';
import type { ComposedCapture } from './compose';

export interface VcdLayout {
  /** Nanoseconds in one time unit: 1, 1000 … Default 1000 (1 us). */
  readonly unitNs?: 1 | 10 | 100 | 1000 | 10000 | 100000;
  readonly scope?: string;
  /** Names of the variables; default the names of the lines. */
  readonly names?: Partial<Record<LineRole, string>>;
}

const UNITS: Record<number, string> = {
  1: '1 ns',
  10: '10 ns',
  100: '100 ns',
  1000: '1 us',
  10000: '10 us',
  100000: '100 us',
};

/** What a channel shows for a level of a line: 0 low, 1 high, 2 unknown. */
export function channelLevel(role: LineRole, polarity: Polarity, level: number): number {
  if (level === 2) return 2;
  const isInverted = isDataRole(role) ? polarity === 'line' : polarity === 'logic';
  return isInverted ? 1 - level : level;
}

/** Changes of all lines on one clock: [unit, line index, channel level], in order of time. */
function mergeChanges(capture: ComposedCapture, unitNs: number): [number, number, number][] {
  return capture.lines
    .flatMap((line, index) =>
      line.changes.map(([at, level]): [number, number, number] => [
        Math.round(at / unitNs),
        index,
        channelLevel(line.role, line.polarity, level),
      ]),
    )
    .sort((a, b) => a[0] - b[0]);
}

/** A composed capture as a value change dump. Source: IEEE 1364-2005 §18.2. Yields pieces of text. */
export function* writeVcd(capture: ComposedCapture, layout: VcdLayout = {}): Generator<string> {
  const unitNs = layout.unitNs ?? 1000;
  const code = (index: number): string => String.fromCharCode(33 + index);
  yield [
    `$comment composed: ${capture.name.replace(/\$/g, '')}, seed ${capture.seed} $end`,
    `$timescale ${UNITS[unitNs]} $end`,
    `$scope module ${layout.scope ?? 'port'} $end`,
    ...capture.lines.map(
      (line, i) => `$var wire 1 ${code(i)} ${layout.names?.[line.role] ?? line.role} $end`,
    ),
    '$upscope $end',
    '$enddefinitions $end',
    '',
  ].join('\n');
  let piece = '';
  let at = -1;
  for (const [unit, index, level] of mergeChanges(capture, unitNs)) {
    if (unit !== at) piece += `#${unit}\n`;
    at = unit;
    piece += `${'01x'[level]}${code(index)}\n`;
    if (piece.length > 1 << 16) {
      yield piece;
      piece = '';
    }
  }
  yield `${piece}#${Math.max(at + 1, Math.round(capture.durationNs / unitNs))}\n`;
}
