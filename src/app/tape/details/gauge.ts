import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import type { FindingView, RuleResultView } from '#shared/contract/http/checks';
import { roundStep } from '../drawing/ruler-steps';

const WIDTH = 272;
const INSET = 8;
const LINE_Y = 22;
/** More rings than this would be one blot. */
const MOST_RINGS = 60;

/**
 * Where the measured values of a rule stand against its limit: base line, limit as a heavy tick, the forbidden side hatched, the
 * shown value as its verdict's glyph with its uncertainty, the others as rings.
 */
@Component({
  selector: 'lw-gauge',
  templateUrl: './gauge.html',
  styleUrl: './gauge.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Gauge {
  /** The value in question. */
  readonly finding =
    input.required<Pick<FindingView, 'verdict' | 'measured' | 'uncertainty' | 'limit' | 'unit'>>();
  readonly rule = input.required<Pick<RuleResultView, 'sense'>>();
  /** Measured values of all findings of the rule. */
  readonly others = input<readonly number[]>([]);

  protected readonly width = WIDTH;
  protected readonly y = LINE_Y;

  private readonly range = computed(() => {
    const { measured, uncertainty, limit } = this.finding();
    const values = [measured ?? 0, ...this.others(), ...(limit === null ? [] : [limit])];
    const u = uncertainty ?? 0;
    const low = Math.min(...values, (measured ?? 0) - u);
    const high = Math.max(...values, (measured ?? 0) + u);
    const spread = Math.max(high - low, Math.abs(high) * 0.05, 1e-9);
    return { low: low - spread * 0.25, high: high + spread * 0.25 };
  });
  private readonly scale = computed(() => {
    const { low, high } = this.range();
    return (value: number): number => INSET + ((value - low) / (high - low)) * (WIDTH - 2 * INSET);
  });

  protected readonly ticks = computed(() => {
    const { low, high } = this.range();
    const step = roundStep((high - low) / 4);
    const decimals = Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
    const ticks: { xPx: number; label: string }[] = [];
    for (let value = Math.ceil(low / step) * step; value <= high; value += step) {
      ticks.push({ xPx: this.scale()(value), label: value.toFixed(decimals).replace('-', '−') });
    }
    return ticks;
  });
  protected readonly limitX = computed(() => {
    const { limit } = this.finding();
    return limit === null ? null : this.scale()(limit);
  });
  protected readonly forbidden = computed(() => {
    const x = this.limitX();
    if (x === null) return null;
    switch (this.rule().sense) {
      case 'at-most':
        return { from: x, to: WIDTH - INSET };
      case 'at-least':
        return { from: INSET, to: x };
      case 'none':
        return null;
    }
  });
  protected readonly value = computed(() => {
    const { measured, uncertainty, verdict } = this.finding();
    if (measured === null) return null;
    const x = this.scale();
    const u = uncertainty ?? 0;
    return { xPx: x(measured), fromPx: x(measured - u), toPx: x(measured + u), verdict };
  });
  /** The piece beyond the limit. */
  protected readonly over = computed(() => {
    const limit = this.limitX();
    const value = this.value();
    if (limit === null || value === null || value.verdict !== 'violation') return null;
    return { from: Math.min(limit, value.xPx), to: Math.max(limit, value.xPx) };
  });
  protected readonly rings = computed(() =>
    this.others()
      .slice(0, MOST_RINGS)
      .map((value) => this.scale()(value)),
  );
}
