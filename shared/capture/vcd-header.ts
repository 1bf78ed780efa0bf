import type { DefectList, Place } from './defect-list';
import { quoteForMessage, decodeText } from './text-bytes';
import { errorAt } from './text-place';
import type { VcdVariables } from './vcd-variables';

/** Real designs nest some ten scopes. */
const DEEPEST_SCOPE = 1000;
const LONGEST_NAME = 4096;

/** Unit letters and their power of ten in seconds. */
const UNIT_EXPONENTS: Readonly<Record<string, number>> = { s: 0, ms: 3, us: 6, ns: 9, ps: 12, fs: 15 };

/** Length of one unit of the dump: `numerator / denominator` seconds. */
export interface Timescale {
  readonly numerator: bigint;
  readonly denominator: bigint;
}

/**
 * Takes the declaration commands of a dump, one by one.
 * Source: IEEE 1364-2005 §18.2.3.
 */
export class VcdHeader {
  timescale: Timescale | null = null;
  declarationCount = 0;
  private readonly scopes: string[] = [];

  constructor(
    private readonly variables: VcdVariables,
    private readonly defects: DefectList,
  ) {}

  /** `words`: what stands between the keyword and `$end`. Throws `CaptureError` where nothing could be read after it. */
  take(keyword: string, words: readonly Uint8Array[], place: Place): void {
    if (keyword === '$timescale') this.takeTimescale(words, place);
    else if (keyword === '$scope') this.takeScope(words, place);
    else if (keyword === '$upscope') this.scopes.pop();
    else if (keyword === '$var') this.takeVariable(words, place);
  }

  private takeTimescale(words: readonly Uint8Array[], place: Place): void {
    const text = words.map(decodeText).join('');
    const [, number, unit] = /^(\d{1,9})(s|ms|us|ns|ps|fs)$/i.exec(text) ?? [];
    const exponent = unit === undefined ? undefined : UNIT_EXPONENTS[unit.toLowerCase()];
    if (exponent === undefined || Number(number) === 0) {
      const shown = words.length === 0 ? 'nothing' : words.slice(0, 3).map(quoteForMessage).join(' ');
      const message = `unknown timescale ${shown}: expected a number and one of s, ms, us, ns, ps, fs`;
      throw errorAt('unknown-timescale', message, place);
    }
    this.timescale = { numerator: BigInt(number), denominator: 10n ** BigInt(exponent) };
  }

  private takeScope(words: readonly Uint8Array[], place: Place): void {
    if (this.scopes.length >= DEEPEST_SCOPE) {
      const message = `scopes are nested more than ${DEEPEST_SCOPE} deep`;
      throw errorAt('scopes-too-deep', message, place);
    }
    const name = words[words.length > 1 ? 1 : 0];
    this.scopes.push(name === undefined ? '' : plainName(name));
  }

  private takeVariable(words: readonly Uint8Array[], place: Place): void {
    this.declarationCount += 1;
    if (words.length < 4) {
      const message = `a variable needs type, size, code and name, but ${words.length} of them are there`;
      this.defects.add('bad-variable', message, place);
      return;
    }
    const size = Number(decodeText(words[1]));
    if (!Number.isInteger(size) || size < 0) {
      this.defects.add(
        'bad-variable',
        `the size of a variable is ${quoteForMessage(words[1])}, not a number`,
        place,
      );
      return;
    }
    if (size > 65_536) {
      this.defects.add(
        'vector-too-wide',
        `a vector of ${size} bits is too wide for channels and is left out`,
        place,
      );
    }
    const { name, range } = splitRange(words[3], words.slice(4).map(decodeText).join(''));
    this.variables.declare({
      type: decodeText(words[0]),
      size,
      code: String.fromCharCode(...words[2].subarray(0, 64)),
      name: [...this.scopes, name].filter((part) => part !== '').join('.'),
      range,
    });
  }
}

/** Name without the backslash of an escaped identifier. */
function plainName(word: Uint8Array): string {
  const text = decodeText(word.subarray(0, LONGEST_NAME));
  return text.startsWith('\\') ? text.slice(1) : text;
}

/** A range may be a word of its own or be attached to the name; in an escaped identifier brackets belong to the name. */
function splitRange(word: Uint8Array, separateRange: string): { name: string; range: string } {
  const text = plainName(word);
  if (separateRange !== '' || word[0] === 0x5c) return { name: text, range: separateRange };
  const attached = /^(.+?)(\[-?\d+(?::-?\d+)?\])$/.exec(text);
  return attached === null ? { name: text, range: '' } : { name: attached[1], range: attached[2] };
}
