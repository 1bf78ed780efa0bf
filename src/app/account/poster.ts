import { ChangeDetectionStrategy, Component } from '@angular/core';

/** Bit time at 1200 baud in ms. */
const BIT_MS = 1 / 1.2;
const PX_PER_MS = 25.2;
const LEFT_PX = 64;
const REPLY_MS = 13.24;
const LIMIT_MS = 14;

interface Character {
  readonly xPx: number;
  readonly hex: string;
  readonly letter: string;
  readonly bits: readonly number[];
}

/** Bits of a 7N1 character as they go over the line, least significant first. */
function bitsOf(code: number): number[] {
  return Array.from({ length: 7 }, (_, i) => (code >> i) & 1);
}

const xOf = (ms: number): number => LEFT_PX + ms * PX_PER_MS;

/** A reset and its answer, poster size: how this product draws. Decoration, hidden from screen readers. */
@Component({
  selector: 'lw-poster',
  templateUrl: './poster.html',
  styleUrl: './poster.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Poster {
  protected readonly bitPx = BIT_MS * PX_PER_MS;
  protected readonly startPx = xOf(0);
  protected readonly replyPx = xOf(REPLY_MS);
  protected readonly limitPx = xOf(LIMIT_MS);
  protected readonly figure = `${REPLY_MS.toFixed(2)} ms`;
  protected readonly limit = `limit ${LIMIT_MS} ms`;
  protected readonly ticks = Array.from({ length: 32 }, (_, i) => ({ xPx: xOf(i - 2), ms: i - 2 }));
  protected readonly characters: readonly Character[] = [...'M3'].map((letter, i) => ({
    xPx: xOf(REPLY_MS + i * 9 * BIT_MS),
    hex: letter.charCodeAt(0).toString(16).toUpperCase(),
    letter,
    bits: bitsOf(letter.charCodeAt(0)),
  }));

  /** Elements at space, as ribbon pieces: the start element and every 0 bit, neighbours joined. */
  protected readonly pieces = this.characters.flatMap(({ xPx, bits }) => {
    const levels = [0, ...bits, 1];
    const pieces: { xPx: number; widthPx: number }[] = [];
    for (let i = 0; i < levels.length; i++) {
      if (levels[i] === 1) continue;
      let end = i;
      while (levels[end] === 0) end++;
      pieces.push({ xPx: xPx + i * this.bitPx, widthPx: (end - i) * this.bitPx });
      i = end;
    }
    return pieces;
  });
}
