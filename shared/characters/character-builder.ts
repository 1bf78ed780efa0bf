import type { CharacterTable } from './character-table';

/** Grows a `CharacterTable` without an object per character. */
export class CharacterBuilder {
  private count = 0;
  private startTicks: Float64Array;
  private endTicks: Float64Array;
  private values: Uint8Array;
  private errors: Uint8Array;
  private startEdge: Int32Array;

  constructor(capacity: number) {
    this.startTicks = new Float64Array(capacity);
    this.endTicks = new Float64Array(capacity);
    this.values = new Uint8Array(capacity);
    this.errors = new Uint8Array(capacity);
    this.startEdge = new Int32Array(capacity);
  }

  add(startTicks: number, endTicks: number, value: number, errors: number, startEdge: number): void {
    if (this.count === this.values.length) this.grow();
    const i = this.count++;
    this.startTicks[i] = startTicks;
    this.endTicks[i] = endTicks;
    this.values[i] = value;
    this.errors[i] = errors;
    this.startEdge[i] = startEdge;
  }

  finish(): CharacterTable {
    const { count } = this;
    return {
      count,
      startTicks: this.startTicks.slice(0, count),
      endTicks: this.endTicks.slice(0, count),
      values: this.values.slice(0, count),
      errors: this.errors.slice(0, count),
      startEdge: this.startEdge.slice(0, count),
    };
  }

  private grow(): void {
    const capacity = Math.max(16, this.values.length * 2);
    const moved = <T extends Float64Array | Uint8Array | Int32Array>(into: T, from: T): T => {
      into.set(from);
      return into;
    };
    this.startTicks = moved(new Float64Array(capacity), this.startTicks);
    this.endTicks = moved(new Float64Array(capacity), this.endTicks);
    this.values = moved(new Uint8Array(capacity), this.values);
    this.errors = moved(new Uint8Array(capacity), this.errors);
    this.startEdge = moved(new Int32Array(capacity), this.startEdge);
  }
}

export const NO_CHARACTERS: CharacterTable = new CharacterBuilder(0).finish();
