import { indexesTouching } from './column-search';
import type { IndexRange } from './column-search';
import type { TapeModel } from './tape-model';
import type { TimeScale } from './time-scale';

/** The characters of a window. */
export function charactersIn(model: TapeModel, startTicks: number, endTicks: number): IndexRange {
  const { characters } = model.tape;
  const ends = characters.count === 0 ? new Float64Array(0) : characters.endTicks;
  return indexesTouching(characters.startTicks, ends, startTicks, endTicks);
}

/** Left and right edge of a character's cell: its elements at the nominal rate, cut where the next character begins. */
export function cellOf(
  model: TapeModel,
  scale: TimeScale,
  character: number,
): { readonly x: number; readonly width: number } {
  const { characters } = model.tape;
  const start = characters.startTicks[character];
  let end = start + model.elements * model.nominalBitTicks;
  if (character + 1 < characters.count) end = Math.min(end, characters.startTicks[character + 1]);
  const x = scale.xOf(start);
  return { x, width: scale.xOf(end) - x };
}
