import {
  ChangeDetectionStrategy,
  Component,
  computed,
  ElementRef,
  inject,
  input,
  viewChild,
} from '@angular/core';
import type { StripHit } from './drawing/strip';
import { FAN_PX, hitStrip, paintStrip, STRIP_PX, stripTicksAt } from './drawing/strip';
import { hostSize } from './element-size';
import { onFrame } from './on-frame';
import { prepareSurface } from './paint-surface';
import { PaletteSource } from './palette-source';
import { TapeStage } from './tape-stage';

/** The whole tape with a handle where the window stands. Keys: those of the tape; this is for the pointer. */
@Component({
  selector: 'lw-tape-strip',
  template: '<canvas #canvas></canvas>',
  styles: `
    :host {
      cursor: pointer;
      display: block;
      flex: none;
      position: relative;
      touch-action: none;
    }
    canvas {
      height: 100%;
      inset: 0;
      position: absolute;
      width: 100%;
    }
  `,
  host: {
    'aria-hidden': 'true',
    '[style.height.px]': 'heightPx',
    '(pointerdown)': 'down($event)',
    '(pointermove)': 'move($event)',
    '(pointerup)': 'grip = null',
    '(pointercancel)': 'grip = null',
  },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class TapeStrip {
  private readonly stage = inject(TapeStage);
  private readonly element: HTMLElement = inject<ElementRef<HTMLElement>>(ElementRef).nativeElement;
  private readonly size = hostSize();
  private readonly palette = inject(PaletteSource).palette;

  readonly gutterPx = input.required<number>();
  private readonly canvas = viewChild.required<ElementRef<HTMLCanvasElement>>('canvas');
  protected readonly heightPx = STRIP_PX + FAN_PX;
  protected grip: { readonly hit: StripHit; readonly offsetTicks: number } | null = null;

  private readonly view = computed(() => ({
    window: this.stage.window(),
    widthPx: this.size().widthPx,
    heightPx: this.heightPx,
    gutterPx: this.gutterPx(),
  }));

  constructor() {
    onFrame(
      () => ({ model: this.stage.model(), view: this.view(), palette: this.palette() }),
      ({ model, view, palette }) => {
        const surface = prepareSurface(this.canvas().nativeElement, view.widthPx, view.heightPx, true);
        if (surface !== null && model !== null) paintStrip(surface.ctx, model, view, palette);
      },
    );
  }

  protected down(event: PointerEvent): void {
    const model = this.stage.model();
    if (model === null || event.button !== 0) return;
    this.element.setPointerCapture(event.pointerId);
    const xPx = this.xOf(event);
    const hit = hitStrip(model, this.view(), xPx);
    const ticks = stripTicksAt(model, this.view(), xPx);
    const { startTicks, endTicks } = this.stage.window();
    if (hit === 'outside') {
      const half = (endTicks - startTicks) / 2;
      this.stage.moveTo({ startTicks: ticks - half, endTicks: ticks + half });
    }
    this.grip = {
      hit: hit === 'outside' ? 'handle' : hit,
      offsetTicks: hit === 'outside' ? (endTicks - startTicks) / 2 : ticks - startTicks,
    };
  }

  protected move(event: PointerEvent): void {
    const model = this.stage.model();
    if (model === null || this.grip === null || event.buttons === 0) return;
    const ticks = stripTicksAt(model, this.view(), this.xOf(event));
    const { startTicks, endTicks } = this.stage.window();
    if (this.grip.hit === 'left-grip')
      this.stage.set({ startTicks: Math.min(ticks, endTicks - 1), endTicks });
    else if (this.grip.hit === 'right-grip')
      this.stage.set({ startTicks, endTicks: Math.max(ticks, startTicks + 1) });
    else {
      const from = ticks - this.grip.offsetTicks;
      this.stage.set({ startTicks: from, endTicks: from + endTicks - startTicks });
    }
  }

  private xOf(event: PointerEvent): number {
    return event.clientX - this.element.getBoundingClientRect().left;
  }
}
