import type { LevelTrace } from '../line/level-trace';
import type { CharacterTable } from './character-table';

/**
 * Calls `visit` for each transition inside undamaged characters, in order of time, with the element border n it belongs to
 * (1 … elements before the stop) and the time since the start transition, in ticks. The start transition is the reference and is
 * not visited. Source: protocol-facts 2.2 (terms of ITU-T R.140, from memory).
 * @param bitTicks one element at the measured rate
 * @param bitsAfterStart data and parity elements
 */
export function visitTransitions(
  line: LevelTrace,
  characters: CharacterTable,
  bitTicks: number,
  bitsAfterStart: number,
  visit: (character: number, n: number, elapsedTicks: number, level: number, edge: number) => void,
): void {
  const { ticks, levels } = line;
  for (let c = 0; c < characters.count; c++) {
    const startEdge = characters.startEdge[c];
    if (startEdge < 0 || characters.errors[c] !== 0) continue;
    const start = ticks[startEdge];
    for (let i = startEdge + 1; i < ticks.length; i++) {
      const elapsed = ticks[i] - start;
      const n = Math.round(elapsed / bitTicks);
      if (n > bitsAfterStart + 1) break;
      // A pair of edges around a short pulse belongs to no border: that is a glitch, told by FRM-4.
      const isGlitch =
        (i + 1 < ticks.length && ticks[i + 1] - ticks[i] < bitTicks / 8) ||
        ticks[i] - ticks[i - 1] < bitTicks / 8;
      if (n >= 1 && !isGlitch) visit(c, n, elapsed, levels[i], i);
    }
  }
}

/** Sums of one stretch of characters for the least-squares estimate of the element. */
export interface RateWindow {
  firstCharacter: number;
  lastCharacter: number;
  characters: number;
  /** Mean element, ticks. */
  bitTicks: number;
  /** Σ (S₂ + S₁²) and Σ S₂ over the characters; S₁ = Σ n, S₂ = Σ n² per character. */
  sumS2S1: number;
  sumS2: number;
}

/**
 * The measured element over successive windows of at least `least` characters; the rest joins the last window. Empty where there
 * are fewer. Source: rules.md 4, FRM-1.
 */
export function measureRateWindows(
  line: LevelTrace,
  characters: CharacterTable,
  bitTicks: number,
  bitsAfterStart: number,
  least: number,
): RateWindow[] {
  const windows: RateWindow[] = [];
  let open = newWindow();
  let numerator = 0;
  let current = -1;
  let s1 = 0;
  const closeCharacter = (): void => {
    open.sumS2S1 += s1 * s1;
    s1 = 0;
  };
  visitTransitions(line, characters, bitTicks, bitsAfterStart, (character, n, elapsed) => {
    if (character !== current) {
      closeCharacter();
      if (open.characters >= least) {
        open.bitTicks = numerator / open.sumS2;
        windows.push(open);
        open = newWindow();
        numerator = 0;
      }
      if (open.characters === 0) open.firstCharacter = character;
      open.characters += 1;
      current = character;
    }
    open.lastCharacter = character;
    numerator += n * elapsed;
    open.sumS2 += n * n;
    open.sumS2S1 += n * n;
    s1 += n;
  });
  closeCharacter();
  if (open.characters >= least) {
    open.bitTicks = numerator / open.sumS2;
    windows.push(open);
  } else if (windows.length > 0 && open.characters > 0) {
    const last = windows[windows.length - 1];
    const joined = last.sumS2 + open.sumS2;
    last.bitTicks = (last.bitTicks * last.sumS2 + numerator) / joined;
    last.sumS2 = joined;
    last.sumS2S1 += open.sumS2S1;
    last.characters += open.characters;
    last.lastCharacter = open.lastCharacter;
  }
  return windows;
}

function newWindow(): RateWindow {
  return { firstCharacter: 0, lastCharacter: 0, characters: 0, bitTicks: 0, sumS2S1: 0, sumS2: 0 };
}

/** Distortion of the transitions of all undamaged characters, in percent of an element. */
export interface DistortionSummary {
  readonly transitions: number;
  readonly characters: number;
  /** Largest late (+) and early (−) displacement; 0 where none. */
  readonly worstLate: number;
  readonly worstEarly: number;
  readonly worstCharacter: number;
  readonly worstEdge: number;
  /** Nearest-rank 99th percentile of the absolute displacement, to a tenth of a percent; undefined below 100 transitions. */
  readonly p99: number | undefined;
  /** Mean displacement of the transitions to mark less that of the transitions to space. */
  readonly bias: number | undefined;
}

/** Bins of 0.1 % up to 100 %: exact enough for a percentile and free of a list of all transitions. */
const BINS = 1001;

/** Summarises δ = 100·((t − t₀)/T − n) with T = `unitTicks` (nominal: gross; measured: synchronous). */
export function summariseDistortion(
  line: LevelTrace,
  characters: CharacterTable,
  measuredBitTicks: number,
  unitTicks: number,
  bitsAfterStart: number,
): DistortionSummary {
  const bins = new Float64Array(BINS);
  let transitions = 0;
  let lastCharacter = -1;
  let counted = 0;
  let worstLate = 0;
  let worstEarly = 0;
  let worst = -1;
  let worstCharacter = -1;
  let worstEdge = -1;
  let toMark = 0;
  let toMarkCount = 0;
  let toSpace = 0;
  let toSpaceCount = 0;
  visitTransitions(
    line,
    characters,
    measuredBitTicks,
    bitsAfterStart,
    (character, n, elapsed, level, edge) => {
      const delta = 100 * (elapsed / unitTicks - n);
      const size = Math.abs(delta);
      transitions += 1;
      if (character !== lastCharacter) {
        lastCharacter = character;
        counted += 1;
      }
      bins[Math.min(BINS - 1, Math.ceil(size * 10))] += 1;
      if (delta > worstLate) worstLate = delta;
      if (delta < worstEarly) worstEarly = delta;
      if (size > worst) {
        worst = size;
        worstCharacter = character;
        worstEdge = edge;
      }
      if (level === 1) {
        toMark += delta;
        toMarkCount += 1;
      } else {
        toSpace += delta;
        toSpaceCount += 1;
      }
    },
  );
  return {
    transitions,
    characters: counted,
    worstLate,
    worstEarly,
    worstCharacter,
    worstEdge,
    p99: transitions < 100 ? undefined : percentileOfBins(bins, transitions, 0.99),
    bias: toMarkCount === 0 || toSpaceCount === 0 ? undefined : toMark / toMarkCount - toSpace / toSpaceCount,
  };
}

function percentileOfBins(bins: Float64Array, total: number, p: number): number {
  const rank = Math.ceil(p * total);
  let seen = 0;
  for (let i = 0; i < bins.length; i++) {
    seen += bins[i];
    if (seen >= rank) return i / 10;
  }
  return (bins.length - 1) / 10;
}
