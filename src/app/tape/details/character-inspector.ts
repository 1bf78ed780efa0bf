import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { VerdictGlyph } from '../../ui/verdict-glyph';
import type { BorderSpread } from '../drawing/element-plot';
import { plotElements } from '../drawing/element-plot';
import { formatSigned } from '../drawing/figures';
import type { TapeModel } from '../drawing/tape-model';
import { inspectCharacter, START_PERCENT } from './inspect-character';
import { uncertaintyText } from './measured';

const WIDTH = 272;
const PLOT = { height: 104, left: 34, right: 8, top: 10, bottom: 22 };

/** A character under the glass: its ribbon as measured, where its edges are due, what a receiver has left; and all characters. */
@Component({
  selector: 'lw-character-inspector',
  templateUrl: './character-inspector.html',
  styleUrl: './character-inspector.scss',
  imports: [VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CharacterInspector {
  readonly model = input.required<TapeModel>();
  readonly index = input.required<number>();

  protected readonly width = WIDTH;
  protected readonly plotBox = PLOT;
  protected readonly start = START_PERCENT;
  protected readonly signed = formatSigned;
  protected readonly uncertainty = uncertaintyText;
  protected readonly limit = computed(() => this.model().limits.distortionLimit);
  protected readonly glass = computed(() => inspectCharacter(this.model(), this.index()));
  protected readonly bitPx = computed(() => WIDTH / ((this.glass()?.elements ?? 9) + 0.4));
  protected readonly plot = computed(() => plotElements(this.model()));

  /** Percent of a bit to px of the plot; wide enough for every value and the limit. Labels need 10 px each. */
  private readonly plotScale = computed(() => {
    const values = this.plot().borders.flatMap(({ toSpace, toMark }) =>
      [toSpace, toMark].flatMap((spread) => (spread === null ? [] : [spread.lowest, spread.highest])),
    );
    const limit = this.limit() ?? 0;
    const high = 1.15 * Math.max(1, limit, ...values);
    const low = 1.15 * Math.min(-1, -limit, ...values);
    const perPercent = (PLOT.height - PLOT.top - PLOT.bottom) / (high - low);
    return { yOf: (percent: number) => PLOT.top + (high - percent) * perPercent };
  });
  protected readonly zeroY = computed(() => this.plotScale().yOf(0));
  protected readonly limitYs = computed(() => {
    const limit = this.limit();
    const { yOf } = this.plotScale();
    return limit === null ? [] : [limit, -limit].map((value) => ({ value, y: yOf(value) }));
  });
  protected readonly hasZero = computed(() =>
    this.limitYs().every(({ y }) => Math.abs(y - this.zeroY()) > 10),
  );
  protected readonly marks = computed(() => {
    const { borders } = this.plot();
    const { yOf } = this.plotScale();
    const step = (WIDTH - PLOT.left - PLOT.right) / Math.max(1, borders.length);
    const place = (spread: BorderSpread | null, xPx: number, kind: 'space' | 'mark') =>
      spread === null
        ? []
        : [{ kind, xPx, low: yOf(spread.lowest), high: yOf(spread.highest), median: yOf(spread.median) }];
    return borders.flatMap(({ border, toSpace, toMark }, i) => {
      const middle = PLOT.left + (i + 0.5) * step;
      return [
        {
          border,
          middle,
          spreads: [...place(toSpace, middle - 5, 'space'), ...place(toMark, middle + 5, 'mark')],
        },
      ];
    });
  });
}
