import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import type { PreviewView } from '#shared/contract/http/mapping';

const WIDTH = 362;
const RTS_Y = 16;
const REPLY_Y = 36;
const DATA_Y = 58;
const CELL_Y = 72;

interface Piece {
  readonly xPx: number;
  readonly widthPx: number;
}

/** The stretch of the capture where its handshake is, as the map would read it. */
@Component({
  selector: 'lw-excerpt',
  templateUrl: './excerpt.html',
  styleUrl: './excerpt.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Excerpt {
  readonly preview = input.required<PreviewView>();

  protected readonly width = WIDTH;
  protected readonly y = { rts: RTS_Y, reply: REPLY_Y, data: DATA_Y, cell: CELL_Y };

  private readonly xOf = computed(() => {
    const { startS, endS } = this.preview().excerpt;
    const scale = endS > startS ? WIDTH / (endS - startS) : 0;
    return (t: number): number => (t - startS) * scale;
  });

  /** RTS ON. */
  protected readonly rts = computed(() => this.pieces('rts', 1));
  /** Data at space. */
  protected readonly data = computed(() => this.pieces('data', 0));

  protected readonly reply = computed(() => {
    const reset = this.preview().excerpt.resets.find(({ replyT }) => replyT !== null);
    if (reset === undefined || reset.replyT === null) return null;
    const x = this.xOf();
    const [from, to] = [x(reset.t), x(reset.replyT)];
    return { from, to, isWide: to - from > 78, label: `${((reset.replyT - reset.t) * 1000).toFixed(2)} ms` };
  });

  protected readonly cells = computed(() => {
    const x = this.xOf();
    return this.preview().excerpt.characters.map(({ t, tEnd, value, hasError }) => {
      const hex = value.toString(16).toUpperCase().padStart(2, '0');
      const letter = value > 32 && value < 127 ? String.fromCharCode(value) : '';
      const widthPx = x(tEnd) - x(t);
      return {
        xPx: x(t),
        widthPx,
        label: widthPx > 40 ? `${hex} ${letter}` : widthPx > 18 ? hex : '',
        hasError,
      };
    });
  });

  private pieces(role: 'rts' | 'data', filled: number): readonly Piece[] | null {
    const { excerpt } = this.preview();
    const line = excerpt.lines.find((other) => other.role === role);
    if (line === undefined) return null;
    const x = this.xOf();
    const pieces: Piece[] = [];
    let level = line.initialLevel;
    let since = excerpt.startS;
    const end = (t: number): void => {
      if (level === filled && t > since) pieces.push({ xPx: x(since), widthPx: x(t) - x(since) });
    };
    line.times.forEach((t, i) => {
      end(t);
      level = line.levels[i];
      since = t;
    });
    end(excerpt.endS);
    return pieces;
  }
}
