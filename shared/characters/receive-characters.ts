import type { LevelTrace } from '../line/level-trace';
import { MARK, SPACE, UNKNOWN } from '../line/level-trace';
import type { CharacterTable, Glitch } from './character-table';
import { BREAK_ERROR, FRAMING_ERROR, PARITY_ERROR } from './character-table';
import type { Framing } from './framing';
import { bitsAfterStart, elementsPerCharacter } from './framing';
import { CharacterBuilder } from './character-builder';
import { removeGlitches } from './glitch-filter';

/** Pulses below this share of a bit are no elements: they are taken out and reported (house). */
export const GLITCH_SHARE = 1 / 8;
/** A start element shorter than this share of a bit is a false start: its middle is already back at mark (start-stop theory). */
const FALSE_START_SHARE = 0.45;
/** How many characters a trial alignment is followed. */
const TRIAL_CHARACTERS = 12;
/** How many start edges are tried when the alignment was lost. */
const TRIAL_EDGES = 12;

export interface ReceivedCharacters {
  readonly characters: CharacterTable;
  readonly glitches: readonly Glitch[];
}

/** What one attempt to read a character came to. */
interface Attempt {
  /** `false-start`: no start element; `unknown`: the level is not known somewhere inside. */
  outcome: 'character' | 'false-start' | 'unknown';
  value: number;
  errors: number;
  endTicks: number;
  /** Edge index to go on from: everything before it is used up. */
  nextEdge: number;
}

/**
 * Reads start-stop characters from a line. Each element is decided by the level that prevails in its middle half, counted from
 * the character's own start edge. Nothing is read across unknown levels. Where the alignment is lost (begin of the record inside
 * a character, a gap, a damaged stop element) the start edge is taken that leads to the fewest damaged characters until the line
 * rests. Never throws.
 * @param bitTicks length of one element, in ticks; must be > 0
 */
export function receiveCharacters(
  line: LevelTrace,
  bitTicks: number,
  framing: Pick<Framing, 'dataBits' | 'parity' | 'stopBits'>,
): ReceivedCharacters {
  const filtered = removeGlitches(line, bitTicks * GLITCH_SHARE);
  const receiver = new Receiver(filtered.trace, bitTicks, framing);
  const characters = receiver.run(filtered.originalEdge);
  return { characters, glitches: mergeGlitches(filtered.glitches, receiver.falseStarts) };
}

function mergeGlitches(a: readonly Glitch[], b: readonly Glitch[]): Glitch[] {
  return [...a, ...b].sort((x, y) => x.startTicks - y.startTicks);
}

class Receiver {
  readonly falseStarts: Glitch[] = [];
  private readonly ticks: Float64Array;
  private readonly levels: Uint8Array;
  private readonly bitCount: number;
  private readonly dataMask: number;
  private readonly characterTicks: number;
  private readonly attempt: Attempt = { outcome: 'unknown', value: 0, errors: 0, endTicks: 0, nextEdge: 0 };

  constructor(
    private readonly line: LevelTrace,
    private readonly bit: number,
    private readonly framing: Pick<Framing, 'dataBits' | 'parity' | 'stopBits'>,
  ) {
    this.ticks = line.ticks;
    this.levels = line.levels;
    this.bitCount = bitsAfterStart(framing);
    this.dataMask = (1 << framing.dataBits) - 1;
    // Two stop elements are looked at as one: the second only lengthens the pause.
    this.characterTicks = (elementsPerCharacter(framing) - framing.stopBits + 1) * bit;
  }

  run(originalEdge: Int32Array | null): CharacterTable {
    const builder = new CharacterBuilder(Math.max(16, this.ticks.length >> 2));
    const { attempt } = this;
    let edge = 0;
    // The begin of the record may lie inside a character, as may the end of a gap.
    let isAligned = false;
    while ((edge = this.nextStart(edge)) < this.ticks.length) {
      if (!isAligned) {
        if (!this.restsBefore(edge)) edge = this.bestStart(edge);
        isAligned = true;
      }
      const start = this.ticks[edge];
      this.read(start, edge);
      if (attempt.outcome === 'false-start') {
        this.reportFalseStart(edge);
        edge += 1;
        continue;
      }
      if (attempt.outcome === 'unknown') {
        edge = Math.max(edge + 1, attempt.nextEdge);
        isAligned = false;
        continue;
      }
      builder.add(start, attempt.endTicks, attempt.value, attempt.errors, original(originalEdge, edge));
      if ((attempt.errors & FRAMING_ERROR) === 0) {
        edge = attempt.nextEdge;
        continue;
      }
      edge = this.resume(builder, start);
    }
    return builder.finish();
  }

  /**
   * After a damaged stop element. The next start element may hide in the space (no edge marks it) or begin at a later edge; the
   * reading with fewer damaged characters wins, the hidden one of equals, since characters mostly follow one another.
   * Returns the edge to go on from.
   */
  private resume(builder: CharacterBuilder, damagedStart: number): number {
    const { attempt } = this;
    let next = attempt.nextEdge;
    let start = damagedStart;
    for (;;) {
      const hidden = start + this.characterTicks;
      const byHidden = this.prevails(hidden, next) === SPACE ? this.trialErrors(hidden, next) : Infinity;
      const edge = this.nextStart(next);
      const byEdge = edge < this.ticks.length ? this.trialErrors(this.ticks[edge], edge) : Infinity;
      if (byHidden === Infinity || (byHidden > 0 && byEdge <= byHidden)) {
        return edge < this.ticks.length && byEdge > 0 ? this.bestStart(edge) : edge;
      }
      this.read(hidden, next);
      if (attempt.outcome !== 'character') return next;
      // Nothing but space: the line is simply held there, no character hides in it.
      if (attempt.value === 0 && (attempt.errors & FRAMING_ERROR) !== 0) return this.nextStart(next);
      builder.add(hidden, attempt.endTicks, attempt.value, attempt.errors, -1);
      next = Math.max(next, attempt.nextEdge);
      if ((attempt.errors & FRAMING_ERROR) === 0) return next;
      start = hidden;
    }
  }

  /** First edge from mark to space at or after `edge`. */
  private nextStart(edge: number): number {
    let i = edge;
    while (i < this.ticks.length && !(this.levels[i] === SPACE && this.levelBefore(i) === MARK)) i += 1;
    return i;
  }

  private levelBefore(edge: number): number {
    return edge === 0 ? this.line.initialLevel : this.levels[edge - 1];
  }

  /** Whether the line was at mark for a whole character before the edge, so that it can only be a start. */
  private restsBefore(edge: number): boolean {
    const since = edge === 0 ? 0 : this.ticks[edge - 1];
    return this.ticks[edge] - since >= this.characterTicks;
  }

  /** The start edge, from `edge` on, that gives the fewest damaged characters until the line rests; the earliest of equals. */
  private bestStart(edge: number): number {
    let best = edge;
    let fewest = Infinity;
    let candidate = edge;
    for (let i = 0; i < TRIAL_EDGES && candidate < this.ticks.length && fewest > 0; i++) {
      if (i > 0 && this.restsBefore(candidate) && fewest < Infinity) {
        // Beyond a rest the alignment is no question any more.
        break;
      }
      const errors = this.trialErrors(this.ticks[candidate], candidate);
      if (errors < fewest) {
        fewest = errors;
        best = candidate;
      }
      candidate = this.nextStart(candidate + 1);
    }
    return best;
  }

  /** Damaged characters met when reading on from a start, until the line rests for half a character or more. */
  private trialErrors(start: number, edge: number): number {
    const { attempt } = this;
    let errors = 0;
    let at = start;
    let from = edge;
    for (let i = 0; i < TRIAL_CHARACTERS; i++) {
      this.read(at, from);
      if (attempt.outcome === 'unknown') return errors;
      if (attempt.outcome === 'false-start') errors += 1;
      else if ((attempt.errors & (FRAMING_ERROR | BREAK_ERROR)) !== 0) errors += 1;
      else if ((attempt.errors & PARITY_ERROR) !== 0) errors += 0.5;
      const end = attempt.outcome === 'false-start' ? at : attempt.endTicks;
      from = this.nextStart(attempt.outcome === 'false-start' ? from + 1 : attempt.nextEdge);
      if (from >= this.ticks.length || this.ticks[from] - end > this.characterTicks / 2) return errors;
      at = this.ticks[from];
    }
    return errors;
  }

  /** Level that prevails in the middle half of the element that begins at `from`; `hint`: an edge index at or before it. */
  private prevails(from: number, hint: number): number {
    const begin = from + this.bit * 0.25;
    const end = from + this.bit * 0.75;
    let i = Math.max(0, hint);
    while (i < this.ticks.length && this.ticks[i] <= begin) i += 1;
    let level = this.levelBefore(i);
    if (i >= this.ticks.length || this.ticks[i] >= end) return level;
    let markTicks = 0;
    let at = begin;
    for (;;) {
      if (level === UNKNOWN) return UNKNOWN;
      const until = i < this.ticks.length && this.ticks[i] < end ? this.ticks[i] : end;
      if (level === MARK) markTicks += until - at;
      if (until === end) break;
      at = until;
      level = this.levels[i];
      i += 1;
    }
    return markTicks * 2 > end - begin ? MARK : SPACE;
  }

  /** Reads one character whose start element begins at `start`; leaves the result in `attempt` to spare an object per character. */
  private read(start: number, edge: number): void {
    const { attempt, bit, ticks } = this;
    let i = edge;
    attempt.errors = 0;
    if (i < ticks.length && ticks[i] === start && i + 1 < ticks.length && this.isFalseStart(i)) {
      attempt.outcome = 'false-start';
      attempt.nextEdge = edge + 1;
      return;
    }
    const startLevel = this.prevails(start, i);
    if (startLevel !== SPACE) {
      attempt.outcome = startLevel === UNKNOWN ? 'unknown' : 'false-start';
      attempt.nextEdge = edge + 1;
      return;
    }
    let word = 0;
    let hasUnknown = false;
    for (let n = 1; n <= this.bitCount; n++) {
      const at = start + n * bit;
      while (i < ticks.length && ticks[i] <= at) i += 1;
      const level = this.prevails(at, i);
      if (level === MARK) word |= 1 << (n - 1);
      else if (level === UNKNOWN) hasUnknown = true;
    }
    const stopAt = start + (this.bitCount + 1) * bit;
    while (i < ticks.length && ticks[i] <= stopAt) i += 1;
    const stop = this.prevails(stopAt, i);
    const stopMiddle = stopAt + bit / 2;
    let next = i;
    while (next < ticks.length && ticks[next] <= stopMiddle) next += 1;
    if (hasUnknown || stop === UNKNOWN || this.hasUnknownWithin(edge, start, stopMiddle)) {
      attempt.outcome = 'unknown';
      attempt.nextEdge = next;
      return;
    }
    if (stopMiddle > this.line.endTicks) {
      // The record ends inside the character: it was never whole.
      attempt.outcome = 'unknown';
      attempt.nextEdge = ticks.length;
      return;
    }
    attempt.outcome = 'character';
    attempt.value = word & this.dataMask;
    attempt.endTicks = start + this.characterTicks;
    attempt.nextEdge = next;
    if (stop === SPACE) this.judgeDamagedStop(word, start, edge, next);
    else if (this.hasParityError(word)) attempt.errors = PARITY_ERROR;
  }

  /** A stop element at space: a break where the line stays at space beyond the whole character, else a framing error. */
  private judgeDamagedStop(word: number, start: number, edge: number, next: number): void {
    const { attempt, ticks } = this;
    const back = edge + 1;
    const backAt = back < ticks.length ? ticks[back] : this.line.endTicks;
    const isAllSpace = word === 0 && (edge >= ticks.length || ticks[edge] <= start);
    if (isAllSpace && backAt - start > this.characterTicks + this.bit / 4) {
      attempt.errors = BREAK_ERROR;
      attempt.endTicks = backAt;
      attempt.nextEdge = Math.max(next, back);
      return;
    }
    attempt.errors = FRAMING_ERROR | (this.hasParityError(word) ? PARITY_ERROR : 0);
  }

  private isFalseStart(edge: number): boolean {
    const { ticks, bit } = this;
    const width = ticks[edge + 1] - ticks[edge];
    if (width >= bit * FALSE_START_SHARE) return false;
    if (this.levels[edge + 1] !== MARK) return false;
    // A start element with a short dent: the line is back at space soon and for longer than the dent.
    const back = edge + 2 < ticks.length ? ticks[edge + 2] - ticks[edge + 1] : Infinity;
    return !(back < bit * 0.2 && width > back);
  }

  private hasUnknownWithin(edge: number, start: number, end: number): boolean {
    for (let i = edge; i < this.ticks.length && this.ticks[i] < end; i++) {
      if (this.levels[i] === UNKNOWN && this.ticks[i] >= start) return true;
    }
    return false;
  }

  private hasParityError(word: number): boolean {
    const { parity } = this.framing;
    if (parity === 'none') return false;
    let ones = 0;
    for (let bits = word; bits !== 0; bits &= bits - 1) ones += 1;
    if (parity === 'odd') return (ones & 1) === 0;
    if (parity === 'even') return (ones & 1) === 1;
    return word >> this.framing.dataBits !== 1;
  }

  private reportFalseStart(edge: number): void {
    if (this.falseStarts.length >= 10_000) return;
    const end = edge + 1 < this.ticks.length ? this.ticks[edge + 1] : this.line.endTicks;
    this.falseStarts.push({ startTicks: this.ticks[edge], endTicks: end });
  }
}

function original(map: Int32Array | null, edge: number): number {
  return map === null ? edge : map[edge];
}
