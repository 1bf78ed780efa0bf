import { CaptureError } from './capture-error';
import { SteppedRecorder } from './analog-recorder';
import type { RecorderClock } from './digital-recorder';
import { DigitalRecorder } from './digital-recorder';
import type { KeepRule } from './format-reader';

/** Vectors wider than this are memories or buses, not ports: their bits become no channels. */
const WIDEST_SPLIT_VECTOR = 1024;
/** Dumps of large designs hold millions of bits: beyond this number only vectors that are asked for are split. */
const MOST_SPLIT_BITS = 20_000;
const MOST_VARIABLES = 500_000;
const MOST_NAME_CHARACTERS = 64_000_000;
/** Names of one net that are kept: a clock may have one in each of a hundred thousand scopes. */
const MOST_ALIASES = 256;

/** What stands behind an identifier code. */
export type VcdVariable =
  | { readonly kind: 'bits'; readonly size: number; readonly bits: readonly DigitalRecorder[] }
  | { readonly kind: 'real'; readonly recorder: SteppedRecorder }
  /** Declared, but no channel: events, strings, parameters, very wide vectors. */
  | { readonly kind: 'ignored' };

/** One `$var` as it is written. */
export interface VcdDeclaration {
  readonly type: string;
  readonly size: number;
  readonly code: string;
  /** With scope path. */
  readonly name: string;
  /** `[7:0]`, `[3]` or empty. */
  readonly range: string;
}

const REAL_TYPES = new Set(['real', 'realtime', 'shortreal']);
const IGNORED_TYPES = new Set(['event', 'string', 'parameter']);

/** The variables of a dump by their codes. */
export class VcdVariables {
  readonly digital: DigitalRecorder[] = [];
  readonly analog: SteppedRecorder[] = [];
  readonly list: VcdVariable[] = [];
  /** The recorders of variables of one bit, as in `list`; null for all other variables. */
  readonly oneBit: (DigitalRecorder | null)[] = [];
  private readonly indexByCode = new Map<string, number>();
  /** Index + 1 by the characters of codes of up to three; 0 where there is none. */
  readonly indexByShortCode = new Int32Array(95 * 95 * 95);
  private nameCharacters = 0;
  private splitBits = 0;

  constructor(
    private readonly clock: RecorderClock,
    private readonly keep: KeepRule,
  ) {}

  get channelCount(): number {
    return this.digital.length + this.analog.length;
  }

  declare(declaration: VcdDeclaration): void {
    const known = this.indexByCode.get(declaration.code);
    if (known !== undefined) this.addAlias(this.list[known], declaration);
    else this.addVariable(declaration);
    if (this.list.length > MOST_VARIABLES || this.nameCharacters > MOST_NAME_CHARACTERS) {
      throw new CaptureError(
        'too-many-channels',
        `more than ${this.list.length} variables are declared: too many`,
      );
    }
  }

  /** Index into `list` of the code in `bytes[start, end)`; −1 where it is not declared. */
  find(bytes: Uint8Array, start: number, end: number): number {
    const length = end - start;
    if (length > 3) {
      if (length > 64) return -1;
      return this.indexByCode.get(String.fromCharCode(...bytes.subarray(start, end))) ?? -1;
    }
    let key = 0;
    for (let i = start; i < end; i++) {
      if (bytes[i] > 126) return -1;
      key = key * 95 + bytes[i] - 32;
    }
    return this.indexByShortCode[key] - 1;
  }

  private addVariable(declaration: VcdDeclaration): void {
    const index = this.list.length;
    const variable = this.makeVariable(declaration);
    this.list.push(variable);
    this.oneBit.push(variable.kind === 'bits' && variable.size === 1 ? variable.bits[0] : null);
    this.indexByCode.set(declaration.code, index);
    if (declaration.code.length > 3) return;
    let key = 0;
    for (let i = 0; i < declaration.code.length; i++) key = key * 95 + declaration.code.charCodeAt(i) - 32;
    this.indexByShortCode[key] = index + 1;
  }

  private makeVariable(declaration: VcdDeclaration): VcdVariable {
    if (IGNORED_TYPES.has(declaration.type)) return { kind: 'ignored' };
    if (REAL_TYPES.has(declaration.type)) {
      this.nameCharacters += declaration.name.length;
      const recorder = new SteppedRecorder(declaration.name);
      this.analog.push(recorder);
      return { kind: 'real', recorder };
    }
    if (!this.isSplit(declaration)) return { kind: 'ignored' };
    this.nameCharacters += declaration.name.length * declaration.size;
    if (declaration.size > 1) this.splitBits += declaration.size;
    const bits = bitNames(declaration).map(
      (name) => new DigitalRecorder(name, this.clock, this.keep.isKept(name)),
    );
    this.digital.push(...bits);
    return { kind: 'bits', size: declaration.size, bits };
  }

  private isSplit(declaration: VcdDeclaration): boolean {
    const { size } = declaration;
    if (size < 2) return size === 1;
    if (size > WIDEST_SPLIT_VECTOR) return false;
    return this.splitBits + size <= MOST_SPLIT_BITS || this.keep.isBitKept(declaration.name);
  }

  private addAlias(variable: VcdVariable, declaration: VcdDeclaration): void {
    if (variable.kind === 'ignored') return;
    if (variable.kind === 'real') {
      addName(variable.recorder, declaration.name);
      return;
    }
    bitNames({ ...declaration, size: variable.size }).forEach((name, i) => {
      addName(variable.bits[i], name);
      if (this.keep.isKept(name)) variable.bits[i].isKept = true;
    });
  }
}

function addName(recorder: { readonly name: string; readonly aliases: string[] }, name: string): void {
  if (recorder.aliases.length >= MOST_ALIASES || recorder.name === name) return;
  if (!recorder.aliases.includes(name)) recorder.aliases.push(name);
}

/** Names of the bits, the most significant first. A one-bit vector keeps its plain name, one selected bit carries its number. */
function bitNames({ name, size, range }: VcdDeclaration): string[] {
  const [, left, right] = /^\[(-?\d+)(?::(-?\d+))?\]$/.exec(range) ?? [];
  if (size === 1) return [left !== undefined && right === undefined ? name + range : name];
  const first = left === undefined || right === undefined ? size - 1 : Number(left);
  const step = left !== undefined && right !== undefined && Number(right) > Number(left) ? 1 : -1;
  return Array.from({ length: size }, (_, i) => `${name}[${first + step * i}]`);
}
