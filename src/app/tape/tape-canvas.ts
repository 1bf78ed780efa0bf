import {
  ChangeDetectionStrategy,
  Component,
  computed,
  DestroyRef,
  effect,
  ElementRef,
  inject,
  input,
  output,
  signal,
  viewChild,
} from '@angular/core';
import { describeTape } from './drawing/describe';
import type { TapeHit } from './drawing/hit-test';
import { hitTest, snapToEdge } from './drawing/hit-test';
import { lanesHeight, layOutLanes } from './drawing/lanes';
import { paintOverlay, paintTape } from './drawing/paint-tape';
import type { TapeView } from './drawing/view';
import { paperWidth, timeScaleOf } from './drawing/view';
import { hostSize } from './element-size';
import { onFrame } from './on-frame';
import { PaintPace } from './paint-pace';
import { prepareSurface } from './paint-surface';
import { PaletteSource } from './palette-source';
import { TapeStage } from './tape-stage';
import { TapePointer } from './tape-pointer';

/** The tape itself: paper with data, and an overlay for what follows the pointer, on a canvas each, with pointer and touch. Keys are the page's. */
@Component({
  selector: 'lw-tape-canvas',
  template: `
    <canvas #sheet></canvas>
    <canvas #overlay [hidden]="isBare()"></canvas>
  `,
  styleUrl: './tape-canvas.scss',
  providers: [TapePointer],
  host: {
    role: 'application',
    tabindex: '0',
    '[attr.aria-label]': 'label()',
    '[style.height.px]': 'heightPx()',
    '[style.cursor]': 'cursor()',
    '(pointerleave)': 'leave()',
  },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class TapeCanvas {
  protected readonly stage = inject(TapeStage);
  private readonly palette = inject(PaletteSource).palette;
  private readonly pointer = inject(TapePointer);
  private readonly element: HTMLElement = inject<ElementRef<HTMLElement>>(ElementRef).nativeElement;
  private readonly size = hostSize();
  private readonly pace = new PaintPace();

  /** Number of the capture, for the label. */
  readonly name = input.required<string>();
  readonly gutterPx = input.required<number>();
  readonly isPhone = input(false);
  /** Height there is for all lanes together. */
  readonly roomPx = input.required<number>();
  /** Something was activated that leads elsewhere. */
  readonly opened = output<TapeHit>();

  private readonly sheetLayer = viewChild.required<ElementRef<HTMLCanvasElement>>('sheet');
  private readonly overlayLayer = viewChild.required<ElementRef<HTMLCanvasElement>>('overlay');

  private readonly hover = signal<{ xPx: number; yPx: number } | null>(null);
  private readonly drag = signal<{ fromTicks: number; toTicks: number } | null>(null);
  protected readonly cursor = signal('default');

  /** Without pointer: for paper and data, which must not be painted anew for every move of it. */
  private readonly still = computed((): TapeView => ({
    window: this.stage.window(),
    widthPx: this.size().widthPx,
    heightPx: this.roomPx(),
    gutterPx: this.gutterPx(),
    isPhone: this.isPhone(),
    selection: this.stage.selection(),
    dividers: this.stage.dividers(),
    hover: null,
    hiddenLanes: this.stage.hiddenLanes(),
    edgeReference: this.stage.edgeReference(),
  }));
  private readonly lanes = computed(() => {
    const model = this.stage.model();
    return model === null ? [] : layOutLanes(model, this.still());
  });
  /** Nothing follows the pointer: a canvas less to put on the screen. */
  protected readonly isBare = computed(() => {
    const { a, b } = this.stage.dividers();
    return a === null && b === null && this.hover() === null && this.drag() === null;
  });
  protected readonly heightPx = computed(() => lanesHeight(this.lanes()));
  protected readonly label = computed(() => {
    const model = this.stage.model();
    return model === null ? 'Tape' : describeTape(model, this.name(), this.stage.window());
  });

  constructor() {
    effect(() => this.stage.setPaper(paperWidth(this.still())));
    onFrame(
      () => ({
        model: this.stage.model(),
        view: { ...this.still(), heightPx: this.heightPx() },
        lanes: this.lanes(),
        palette: this.palette(),
        isCoarse: this.pace.isCoarse(),
      }),
      ({ model, view, lanes, palette, isCoarse }) => {
        if (model === null) return;
        this.pace.painted();
        const sheet = prepareSurface(
          this.sheetLayer().nativeElement,
          view.widthPx,
          view.heightPx,
          true,
          isCoarse ? 1 : Infinity,
        );
        if (sheet !== null) paintTape(sheet.ctx, model, view, lanes, palette);
      },
    );
    onFrame(
      () => ({
        model: this.stage.model(),
        view: { ...this.still(), heightPx: this.heightPx(), hover: this.hover(), drag: this.drag() },
        lanes: this.lanes(),
        palette: this.palette(),
      }),
      ({ model, view, lanes, palette }) => {
        if (model === null) return;
        const overlay = prepareSurface(this.overlayLayer().nativeElement, view.widthPx, view.heightPx);
        if (overlay !== null) paintOverlay(overlay.ctx, model, view, lanes, palette);
      },
    );
    this.listen();
    inject(DestroyRef).onDestroy(() => this.stage.hover(null));
  }

  protected leave(): void {
    this.hover.set(null);
    this.stage.hover(null);
  }

  private listen(): void {
    this.pointer.attach(this.element, {
      hit: (x, y) => {
        const model = this.stage.model();
        return model === null ? null : hitTest(model, this.still(), this.lanes(), x, y);
      },
      ticksAt: (x) => timeScaleOf(this.still()).ticksAt(x),
      ticksPerPx: () => timeScaleOf(this.still()).ticksPerPx,
      snap: (ticks) => {
        const model = this.stage.model();
        return model === null ? ticks : snapToEdge(model, ticks, this.still());
      },
      moved: (xPx, yPx, hit) => {
        this.hover.set({ xPx, yPx });
        this.stage.hover(hit?.kind === 'packet' ? hit.index : null);
        this.cursor.set(cursorOf(hit));
      },
      drew: (drag) => this.drag.set(drag),
      opened: (hit) => this.opened.emit(hit),
    });
  }
}

function cursorOf(hit: TapeHit | null): string {
  switch (hit?.kind) {
    case 'divider':
      return 'ew-resize';
    case 'ruler':
      return 'crosshair';
    case undefined:
    case 'gutter':
    case 'edge':
      return 'default';
    default:
      return 'pointer';
  }
}
