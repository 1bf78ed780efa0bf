import { bitsAfterStart } from '#shared/characters/framing';
import { edgesOfCharacter } from './edge-places';
import type { TapeModel } from './tape-model';

/** Displacements at one border, percent of a bit. */
export interface BorderSpread {
  readonly count: number;
  readonly lowest: number;
  readonly median: number;
  readonly highest: number;
}

/** All characters against the border their edges belong to, due places taken from the nominal rate. */
export interface ElementPlot {
  readonly borders: readonly {
    readonly border: number;
    readonly toSpace: BorderSpread | null;
    readonly toMark: BorderSpread | null;
  }[];
  /** Growth of the displacement per border, percent of a bit: the rate error, late positive. null without edges. */
  readonly slope: number | null;
  /** To mark less to space, percent of a bit; null where one of them is missing. */
  readonly gap: number | null;
  /** Standard deviation about the line of the slope and the gap, percent of a bit. */
  readonly jitter: number | null;
  /** Characters looked at: at most 20 000, spread evenly over the tape. */
  readonly characters: number;
}

const MOST_CHARACTERS = 20_000;

/**
 * Slope, gap and spread tell rate error, bias and jitter apart. Source: protocol-facts 2.2 (terms of ITU-T R.140, from memory);
 * least squares with one slope and an offset for each direction.
 */
export function plotElements(model: TapeModel): ElementPlot {
  const { tape, lines } = model;
  const line = lines.data;
  const last = tape.framing === null ? 0 : bitsAfterStart(tape.framing) + 1;
  const groups = Array.from({ length: 2 * (last + 1) }, (): number[] => []);
  let looked = 0;
  if (line !== undefined) {
    const step = Math.max(1, Math.ceil(tape.characters.count / MOST_CHARACTERS));
    for (let c = 0; c < tape.characters.count; c += step) {
      if (tape.characters.errors[c] !== 0) continue;
      looked++;
      for (const edge of edgesOfCharacter(tape, line, c, model.bitTicks, model.nominalBitTicks)) {
        groups[2 * edge.border + (edge.level === 1 ? 1 : 0)].push(edge.displacement);
      }
    }
  }
  const borders = [];
  for (let border = 1; border <= last; border++) {
    borders.push({
      border,
      toSpace: spreadOf(groups[2 * border]),
      toMark: spreadOf(groups[2 * border + 1]),
    });
  }
  return { borders, ...fit(groups), characters: looked };
}

function spreadOf(values: number[]): BorderSpread | null {
  if (values.length === 0) return null;
  values.sort((a, b) => a - b);
  return {
    count: values.length,
    lowest: values[0],
    median: (values[(values.length - 1) >> 1] + values[values.length >> 1]) / 2,
    highest: values[values.length - 1],
  };
}

/** The common slope within both directions, and what is left. */
function fit(groups: readonly (readonly number[])[]): Pick<ElementPlot, 'slope' | 'gap' | 'jitter'> {
  const sums = [0, 1].map((direction) => {
    let [n, x, y] = [0, 0, 0];
    groups.forEach((values, i) => {
      if (i % 2 !== direction) return;
      const border = i >> 1;
      n += values.length;
      x += border * values.length;
      y += values.reduce((sum, value) => sum + value, 0);
    });
    return { n, meanX: n === 0 ? 0 : x / n, meanY: n === 0 ? 0 : y / n };
  });
  if (sums[0].n + sums[1].n === 0) return { slope: null, gap: null, jitter: null };
  let [xx, xy] = [0, 0];
  groups.forEach((values, i) => {
    const { meanX, meanY } = sums[i % 2];
    const dx = (i >> 1) - meanX;
    xx += values.length * dx * dx;
    xy += values.reduce((sum, value) => sum + dx * (value - meanY), 0);
  });
  const slope = xx === 0 ? 0 : xy / xx;
  const offsets = sums.map(({ meanX, meanY }) => meanY - slope * meanX);
  let rest = 0;
  groups.forEach((values, i) => {
    for (const value of values) rest += (value - offsets[i % 2] - slope * (i >> 1)) ** 2;
  });
  const [toSpace, toMark] = sums;
  return {
    slope,
    gap: toSpace.n === 0 || toMark.n === 0 ? null : offsets[1] - offsets[0],
    jitter: Math.sqrt(rest / (toSpace.n + toMark.n)),
  };
}
