import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import type { ChannelView } from '#shared/contract/http/mapping';
import type { Polarity } from '#shared/line/line-map';

const HEIGHT = 10;
/** Columns where the line moves are drawn at least this tall, share of the height. */
const LEAST = 0.2;

/** A channel over the whole capture. With a polarity, thickness is space or ON; without, the high level. */
@Component({
  selector: 'lw-channel-level',
  template: `<svg class="level" [attr.viewBox]="box()" preserveAspectRatio="none" aria-hidden="true">
    <path class="base" [attr.d]="base()" />
    <path [attr.d]="columns()" />
  </svg>`,
  styles: `
    :host {
      align-self: center;
      display: block;
      min-width: 0;
    }
    .level {
      display: block;
      height: 12px;
      width: 100%;
    }
    path {
      fill: var(--lw-ribbon);
    }
    .base {
      fill: none;
      stroke: var(--lw-ribbon);
      vector-effect: non-scaling-stroke;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ChannelLevel {
  readonly channel = input.required<ChannelView>();
  readonly polarity = input.required<Polarity | null>();
  readonly isData = input(false);

  protected readonly box = computed(() => `0 0 ${this.channel().ribbon.length} ${HEIGHT}`);
  protected readonly base = computed(() => `M0 ${HEIGHT / 2}h${this.channel().ribbon.length}`);
  protected readonly columns = computed(() => {
    const isInverted = this.polarity() === 'logic';
    let path = '';
    this.channel().ribbon.forEach((share, i) => {
      if (share < 0) return;
      const full = isInverted ? 1 - share : share;
      if (full <= 0) return;
      const height = Math.max(LEAST, full) * HEIGHT;
      path += `M${i} ${(HEIGHT - height) / 2}h1v${height}h-1z`;
    });
    return path;
  });
}
