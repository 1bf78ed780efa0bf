import { ChangeDetectionStrategy, Component, computed, ElementRef, inject, viewChild } from '@angular/core';
import { hitMotion, layOutMotion, paintMotion } from './drawing/motion-sheet';
import { hostSize } from './element-size';
import { onRest } from './on-frame';
import { prepareSurface } from './paint-surface';
import { PaletteSource } from './palette-source';
import { TapeStage } from './tape-stage';

/** The whole path is long: it need not follow every frame of a moving tape. */
const REST_MS = 120;

/** The movement on paper. A point under the pointer lights its packet on the tape; a click selects it. */
@Component({
  selector: 'lw-motion-sheet',
  template: '<canvas #canvas></canvas>',
  styles: `
    :host {
      display: block;
      min-height: 120px;
      overflow: hidden;
      position: relative;
    }
    canvas {
      height: 100%;
      inset: 0;
      position: absolute;
      width: 100%;
    }
  `,
  host: {
    role: 'img',
    '[attr.aria-label]': 'label()',
    '(pointermove)': 'point($event)',
    '(pointerleave)': 'stage.hover(null)',
    '(click)': 'choose($event)',
  },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class MotionSheet {
  protected readonly stage = inject(TapeStage);
  private readonly element: HTMLElement = inject<ElementRef<HTMLElement>>(ElementRef).nativeElement;
  private readonly palette = inject(PaletteSource).palette;
  private readonly size = hostSize();
  private readonly canvas = viewChild.required<ElementRef<HTMLCanvasElement>>('canvas');

  private readonly layout = computed(() => {
    const model = this.stage.model();
    const { widthPx, heightPx } = this.size();
    return model === null || widthPx === 0 || heightPx === 0 ? null : layOutMotion(model, widthPx, heightPx);
  });
  protected readonly label = computed(() => {
    const count = this.stage.model()?.tape.packets.count ?? 0;
    return count === 0
      ? 'Motion sheet: no movement'
      : `Motion sheet: the path of ${count} packets, as in the table`;
  });

  constructor() {
    onRest(
      REST_MS,
      () => ({
        layout: this.layout(),
        palette: this.palette(),
        view: {
          window: this.stage.window(),
          selection: this.stage.selection(),
          hoverPacket: this.stage.hoverPacket(),
        },
      }),
      ({ layout, palette, view }) => {
        if (layout === null) return;
        const surface = prepareSurface(this.canvas().nativeElement, layout.widthPx, layout.heightPx, true);
        if (surface !== null) paintMotion(surface.ctx, layout, view, palette);
      },
    );
  }

  protected point(event: MouseEvent): void {
    this.stage.hover(this.packetAt(event));
  }

  protected choose(event: MouseEvent): void {
    const packet = this.packetAt(event);
    if (packet !== null) this.stage.reveal({ kind: 'packet', index: packet });
  }

  private packetAt(event: MouseEvent): number | null {
    const layout = this.layout();
    if (layout === null) return null;
    const box = this.element.getBoundingClientRect();
    return hitMotion(layout, event.clientX - box.left, event.clientY - box.top);
  }
}
