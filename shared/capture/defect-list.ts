import type { Defect } from './capture';

/** Defects told one by one; the rest is only counted, so that a file of rubbish cannot fill the memory. */
const TOLD_ONE_BY_ONE = 100;

/** Where in the file something stands. `line` and `column` are 1-based, `byte` is 0-based. */
export interface Place {
  readonly line: number | null;
  readonly column: number | null;
  readonly byte: number | null;
}

/** Collects what is wrong with a file. Holds at most a hundred defects and one that says how many more there were. */
export class DefectList {
  private readonly told: Defect[] = [];
  private untold = 0;

  get count(): number {
    return this.told.length + this.untold;
  }

  /** Further defects are only counted: their messages need not be made. */
  get isFull(): boolean {
    return this.told.length >= TOLD_ONE_BY_ONE;
  }

  addUntold(): void {
    this.untold += 1;
  }

  add(code: string, message: string, place: Place): void {
    if (this.isFull) {
      this.addUntold();
      return;
    }
    this.told.push({ code, message, line: place.line, column: place.column, byte: place.byte });
  }

  toArray(): readonly Defect[] {
    if (this.untold === 0) return this.told;
    const message = `${this.untold} more defects, not listed one by one`;
    return [...this.told, { code: 'more-defects', message, line: null, column: null, byte: null }];
  }
}
