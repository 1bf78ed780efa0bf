import type { PacketIncident, PacketTable } from './packet-table';

/** Grows a `PacketTable` without an object per packet. */
export class PacketBuilder {
  readonly incidents: PacketIncident[] = [];
  private count = 0;
  private capacity: number;
  private firstCharacter: Int32Array;
  private characterCount: Uint8Array;
  private dx: Int16Array;
  private dy: Int16Array;
  private wheel: Int8Array;
  private buttons: Uint8Array;
  private flags: Uint8Array;
  private firstStepDx: Int16Array;
  private firstStepDy: Int16Array;

  constructor(
    capacity: number,
    private readonly hasWheel: boolean,
    private readonly hasSteps: boolean,
  ) {
    this.capacity = Math.max(16, capacity);
    this.firstCharacter = new Int32Array(this.capacity);
    this.characterCount = new Uint8Array(this.capacity);
    this.dx = new Int16Array(this.capacity);
    this.dy = new Int16Array(this.capacity);
    this.wheel = new Int8Array(this.capacity);
    this.buttons = new Uint8Array(this.capacity);
    this.flags = new Uint8Array(this.capacity);
    this.firstStepDx = new Int16Array(hasSteps ? this.capacity : 0);
    this.firstStepDy = new Int16Array(hasSteps ? this.capacity : 0);
  }

  get length(): number {
    return this.count;
  }

  add(
    firstCharacter: number,
    characterCount: number,
    dx: number,
    dy: number,
    wheel: number,
    buttons: number,
    flags: number,
  ): void {
    if (this.count === this.capacity) this.grow();
    const i = this.count++;
    this.firstCharacter[i] = firstCharacter;
    this.characterCount[i] = characterCount;
    this.dx[i] = dx;
    this.dy[i] = dy;
    this.wheel[i] = wheel;
    this.buttons[i] = buttons;
    this.flags[i] = flags;
  }

  /** First half of the packet added last. */
  setFirstStep(dx: number, dy: number): void {
    this.firstStepDx[this.count - 1] = dx;
    this.firstStepDy[this.count - 1] = dy;
  }

  finish(): PacketTable {
    const { count } = this;
    return {
      count,
      firstCharacter: this.firstCharacter.slice(0, count),
      characterCount: this.characterCount.slice(0, count),
      dx: this.dx.slice(0, count),
      dy: this.dy.slice(0, count),
      wheel: this.wheel.slice(0, count),
      buttons: this.buttons.slice(0, count),
      flags: this.flags.slice(0, count),
      hasWheel: this.hasWheel,
      ...(this.hasSteps
        ? { firstStepDx: this.firstStepDx.slice(0, count), firstStepDy: this.firstStepDy.slice(0, count) }
        : {}),
    };
  }

  private grow(): void {
    this.capacity *= 2;
    const moved = <T extends Int32Array | Int16Array | Uint8Array | Int8Array>(into: T, from: T): T => {
      into.set(from);
      return into;
    };
    this.firstCharacter = moved(new Int32Array(this.capacity), this.firstCharacter);
    this.characterCount = moved(new Uint8Array(this.capacity), this.characterCount);
    this.dx = moved(new Int16Array(this.capacity), this.dx);
    this.dy = moved(new Int16Array(this.capacity), this.dy);
    this.wheel = moved(new Int8Array(this.capacity), this.wheel);
    this.buttons = moved(new Uint8Array(this.capacity), this.buttons);
    this.flags = moved(new Uint8Array(this.capacity), this.flags);
    if (!this.hasSteps) return;
    this.firstStepDx = moved(new Int16Array(this.capacity), this.firstStepDx);
    this.firstStepDy = moved(new Int16Array(this.capacity), this.firstStepDy);
  }
}
