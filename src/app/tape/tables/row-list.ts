import { CdkVirtualScrollViewport, ScrollingModule } from '@angular/cdk/scrolling';
import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  ElementRef,
  inject,
  input,
  output,
  signal,
  viewChild,
} from '@angular/core';
import { VerdictGlyph } from '../../ui/verdict-glyph';
import { onRest } from '../on-frame';
import { TapeStage } from '../tape-stage';
import type { TableRow, TapeTable } from './table-row';

const ROW_PX = 24;
/** Rows follow a moving tape in steps: making rows for every frame would make the tape stutter. */
const REST_MS = 120;
const TALL_ROW_PX = 46;

/** A table over a column of rows, of which only those in sight exist. Roving focus; what is selected here is selected on the tape. */
@Component({
  selector: 'lw-row-list',
  templateUrl: './row-list.html',
  styleUrl: './row-list.scss',
  imports: [ScrollingModule, VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RowList {
  private readonly stage = inject(TapeStage);
  private readonly element: HTMLElement = inject<ElementRef<HTMLElement>>(ElementRef).nativeElement;

  readonly table = input.required<TapeTable>();
  readonly label = input.required<string>();
  /** Rows go where the tape goes. */
  readonly follows = input(true);
  readonly isTall = input(false);
  readonly picked = output<TableRow>();

  private readonly viewport = viewChild(CdkVirtualScrollViewport);
  protected readonly focused = signal(0);
  protected readonly rowPx = computed(() => (this.isTall() ? TALL_ROW_PX : ROW_PX));
  protected readonly indexes = computed(() => Array.from({ length: this.table().count }, (_, i) => i));
  protected readonly tracks = computed(() => this.trackList(false));
  protected readonly narrowTracks = computed(() => this.trackList(true));
  protected readonly selected = computed(() => {
    const selection = this.stage.selection();
    return selection === null ? -1 : this.table().indexOf(selection);
  });

  constructor() {
    effect(() => {
      const index = this.selected();
      const viewport = this.viewport();
      if (index < 0 || viewport === undefined) return;
      this.focused.set(index);
      if (!this.isInSight(index)) viewport.scrollToIndex(Math.max(0, index - 2));
    });
    onRest(
      REST_MS,
      () => ({
        viewport: this.viewport(),
        startTicks: this.stage.window().startTicks,
        table: this.table(),
        isFree: this.follows() && this.selected() < 0,
      }),
      ({ viewport, startTicks, table, isFree }) => {
        if (!isFree || viewport === undefined) return;
        const index = table.indexAt(startTicks);
        if (index >= 0) viewport.scrollToIndex(index);
      },
    );
  }

  protected isText(cell: NonNullable<TableRow['cells'][number]>): cell is string {
    return typeof cell === 'string';
  }

  protected pick(index: number): void {
    this.focused.set(index);
    this.picked.emit(this.table().rowAt(index));
  }

  protected onKey(event: KeyboardEvent): void {
    const last = this.table().count - 1;
    const page = Math.max(1, Math.floor((this.viewport()?.getViewportSize() ?? 240) / this.rowPx()) - 1);
    const at = this.focused();
    const to = {
      ArrowDown: at + 1,
      ArrowUp: at - 1,
      PageDown: at + page,
      PageUp: at - page,
      Home: 0,
      End: last,
    }[event.key];
    if (to !== undefined) {
      event.preventDefault();
      this.focusRow(Math.min(last, Math.max(0, to)));
    } else if (event.key === 'Enter' || event.key === ' ') {
      event.preventDefault();
      this.pick(at);
    }
  }

  private focusRow(index: number): void {
    this.focused.set(index);
    if (!this.isInSight(index)) this.viewport()?.scrollToIndex(Math.max(0, index - 2));
    // The row may be made by the scroll.
    requestAnimationFrame(() => {
      this.element.querySelector<HTMLElement>(`[data-row="${index}"]`)?.focus({ preventScroll: true });
    });
  }

  private isInSight(index: number): boolean {
    const viewport = this.viewport();
    if (viewport === undefined) return false;
    const top = viewport.measureScrollOffset('top');
    return index * this.rowPx() >= top && (index + 1) * this.rowPx() <= top + viewport.getViewportSize();
  }

  private trackList(isNarrow: boolean): string {
    return this.table()
      .columns.filter(({ isRoomy }) => !isNarrow || isRoomy !== true)
      .map(({ width }) => width)
      .join(' ');
  }
}
