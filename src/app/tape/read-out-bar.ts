import type { ElementRef } from '@angular/core';
import {
  ChangeDetectionStrategy,
  Component,
  computed,
  inject,
  input,
  output,
  signal,
  viewChild,
} from '@angular/core';
import { Icon } from '../ui/icon';
import { formatInterval } from '../ui/format-interval';
import { formatFigure } from './drawing/figures';
import type { FindQuery } from './drawing/find-on-tape';
import { findNext, parseFind } from './drawing/find-on-tape';
import { formatSpan } from './drawing/read-out';
import { LaneMenu } from './lane-menu';
import { TapeKeys } from './tape-keys';
import { TapeStage } from './tape-stage';

/** Below this scale the window is told by its length, px a bit. Source: design 8. */
const SURVEY_PX = 0.12;

/** What the dividers measure, ways to places, find, zoom. */
@Component({
  selector: 'lw-read-out-bar',
  templateUrl: './read-out-bar.html',
  styleUrl: './read-out-bar.scss',
  imports: [Icon, LaneMenu],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ReadOutBar {
  protected readonly stage = inject(TapeStage);
  protected readonly keys = inject(TapeKeys);

  readonly isPhone = input(false);
  /** The person wants to say what happened between the dividers. */
  readonly spanStated = output();

  private readonly field = viewChild<ElementRef<HTMLInputElement>>('finder');
  protected readonly isFinding = signal(false);
  protected readonly answer = signal('');

  protected readonly positions = computed(() => {
    const read = this.stage.readOut();
    const text = (seconds: number | null): string | null =>
      seconds === null ? null : `${formatFigure(seconds, 6)} s`;
    return { a: text(read?.aS ?? null), b: text(read?.bS ?? null) };
  });
  protected readonly span = computed(() => {
    const read = this.stage.readOut();
    if (read === null || read.spanS === null) return [];
    const bits = read.bits === null ? [] : [`${formatFigure(read.bits, 2)} bits`];
    return read.spanS >= 0.5
      ? [
          formatSpan(read.spanS),
          `${read.packets} packets`,
          `${formatFigure(read.packetsPerSecond ?? 0, 1)}/s`,
        ]
      : [
          formatSpan(read.spanS),
          ...bits,
          ...(read.hertz === null ? [] : [`${formatFigure(read.hertz, 1)} Hz`]),
        ];
  });
  protected readonly scale = computed(() => {
    const model = this.stage.model();
    const perBit = this.stage.perBit();
    if (model === null) return '';
    if (perBit >= SURVEY_PX) return `${Number(perBit.toPrecision(perBit >= 10 ? 2 : 2))} px/bit`;
    const { startTicks, endTicks } = this.stage.window();
    return formatInterval(Number(((endTicks - startTicks) * model.tape.tickS).toPrecision(3)));
  });
  protected readonly resets = computed(() => this.stage.model()?.tape.resets.length ?? 0);
  protected readonly findings = computed(() => this.stage.model()?.findings.length ?? 0);

  openFind(): void {
    this.isFinding.set(true);
    this.answer.set('');
    requestAnimationFrame(() => this.field()?.nativeElement.select());
  }

  protected closeFind(): void {
    this.isFinding.set(false);
    document.querySelector<HTMLElement>('lw-tape-canvas')?.focus();
  }

  protected find(text: string): void {
    const model = this.stage.model();
    const query: FindQuery | undefined = parseFind(text);
    if (model === null || text.trim() === '') return;
    if (query === undefined) {
      this.answer.set('Write 4D, 4D 33, dx>100, left, HSK-1 or 0.417 s');
      return;
    }
    const found = findNext(model, query, this.from());
    if (found === null) {
      this.answer.set('Not on this tape');
      return;
    }
    this.answer.set('');
    if (found.selection !== null) this.stage.reveal(found.selection);
    else {
      const { startTicks, endTicks } = this.stage.window();
      const half = (endTicks - startTicks) / 2;
      this.stage.moveTo({ startTicks: found.ticks - half, endTicks: found.ticks + half });
    }
  }

  /** Goes on behind what was found last. */
  private from(): number {
    return this.stage.focusTicks();
  }
}
