import type { TapeLine } from '#shared/contract/tape-payload';
import { UNKNOWN } from '#shared/line/level-trace';
import { countUpTo } from '#shared/time/sorted-search';

/** A stretch of one level of a line, cut to the window. */
export interface LevelPiece {
  readonly startTicks: number;
  readonly endTicks: number;
  readonly level: number;
}

/** The pieces of a line between two ticks, at most `most` of them. */
export function piecesOf(line: TapeLine, startTicks: number, endTicks: number, most = 4000): LevelPiece[] {
  const { ticks, levels } = line;
  const pieces: LevelPiece[] = [];
  let index = countUpTo(ticks, startTicks);
  let from = startTicks;
  let level = index === 0 ? line.initialLevel : levels[index - 1];
  for (; index < ticks.length && ticks[index] < endTicks && pieces.length < most; index++) {
    pieces.push({ startTicks: from, endTicks: ticks[index], level });
    from = ticks[index];
    level = levels[index];
  }
  pieces.push({ startTicks: from, endTicks, level });
  return pieces;
}

/** Whether a piece is drawn as a filled ribbon. `isData`: space is the ribbon, else ON is. */
export function isRibbon(level: number, isData: boolean): boolean {
  return level !== UNKNOWN && (level === 1) !== isData;
}
