import type { ElementRef } from '@angular/core';
import {
  ChangeDetectionStrategy,
  Component,
  computed,
  inject,
  input,
  signal,
  viewChild,
} from '@angular/core';
import { hitResetStack, layOutResetStack, paintResetStack } from './drawing/resets-stack';
import { hostSize } from './element-size';
import { onFrame } from './on-frame';
import { prepareSurface } from './paint-surface';
import { PaletteSource } from './palette-source';
import { HANDSHAKE_PX, TapeStage } from './tape-stage';

/** A browser gives a canvas only so much height; beyond it the tape's own tables are the way. */
const TALLEST_PX = 16_000;

/** All resets one below the other, aligned at RTS ON. The Lines table holds the same figures. */
@Component({
  selector: 'lw-reset-stack',
  template: `
    <div class="bar">
      <span>{{ count() }} {{ count() === 1 ? 'reset' : 'resets' }}, sorted by</span>
      <div class="orders" role="group" aria-label="Order">
        <button type="button" [attr.aria-pressed]="order() === 'time'" (click)="order.set('time')">
          time
        </button>
        <button type="button" [attr.aria-pressed]="order() === 'latency'" (click)="order.set('latency')">
          latency
        </button>
      </div>
      <button type="button" class="text-button" (click)="stage.isStacked.set(false)">Back to the tape</button>
    </div>
    @if (count() === 0) {
      <p class="empty"><strong>No resets.</strong> RTS never goes from OFF to ON in this capture.</p>
    }
    <div class="scroll" [style.height.px]="layout()?.heightPx">
      <canvas
        #canvas
        role="img"
        [attr.aria-label]="'All ' + count() + ' resets aligned at RTS ON, as in the table Lines'"
        [style.height.px]="layout()?.heightPx"
        (click)="open($event)"
      ></canvas>
    </div>
  `,
  styleUrl: './reset-stack.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ResetStack {
  protected readonly stage = inject(TapeStage);
  private readonly palette = inject(PaletteSource).palette;
  private readonly size = hostSize();
  readonly gutterPx = input.required<number>();
  protected readonly order = signal<'time' | 'latency'>('time');
  private readonly canvas = viewChild.required<ElementRef<HTMLCanvasElement>>('canvas');

  protected readonly count = computed(() => this.stage.model()?.tape.resets.length ?? 0);
  protected readonly layout = computed(() => {
    const model = this.stage.model();
    const { widthPx } = this.size();
    if (model === null || widthPx === 0 || model.tape.resets.length === 0) return null;
    const layout = layOutResetStack(model, this.order(), widthPx, this.gutterPx());
    return layout.heightPx <= TALLEST_PX ? layout : { ...layout, heightPx: TALLEST_PX };
  });

  constructor() {
    onFrame(
      () => ({ layout: this.layout(), palette: this.palette(), selection: this.stage.selection() }),
      ({ layout, palette, selection }) => {
        if (layout === null) return;
        const surface = prepareSurface(this.canvas().nativeElement, layout.widthPx, layout.heightPx);
        const selected = selection?.kind === 'reset' ? selection.index : null;
        if (surface !== null) paintResetStack(surface.ctx, layout, palette, selected);
      },
    );
  }

  protected open(event: MouseEvent): void {
    const layout = this.layout();
    const model = this.stage.model();
    if (layout === null || model === null) return;
    const box = (event.target as HTMLElement).getBoundingClientRect();
    const reset = hitResetStack(layout, event.clientY - box.top);
    if (reset === null) return;
    this.stage.isStacked.set(false);
    this.stage.select({ kind: 'reset', index: reset });
    this.stage.showFrom(HANDSHAKE_PX, model.tape.resets[reset].onTicks);
  }
}
