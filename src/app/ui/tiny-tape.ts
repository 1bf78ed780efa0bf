import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';

const HEIGHT = 20;

export interface TinyMark {
  /** 0 to 1. */
  readonly at: number;
  readonly verdict: 'violation' | 'inconclusive';
}

/** How much of the data line is in use over the whole capture, with marks where something was found. */
@Component({
  selector: 'lw-tiny-tape',
  template: `
    <svg class="density" [attr.viewBox]="box()" preserveAspectRatio="none" aria-hidden="true">
      <path [attr.d]="columns()" />
    </svg>
    @for (mark of marks(); track $index) {
      <span class="mark" [class]="mark.verdict" [style.left.%]="mark.at * 100"></span>
    }
  `,
  styleUrl: './tiny-tape.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class TinyTape {
  /** Share of the line in use per column, 0 to 1. */
  readonly density = input.required<readonly number[]>();
  readonly marks = input<readonly TinyMark[]>([]);

  protected readonly box = computed(() => `0 0 ${Math.max(1, this.density().length)} ${HEIGHT}`);
  protected readonly columns = computed(() => {
    let path = '';
    this.density().forEach((share, i) => {
      if (share <= 0) return;
      // Whatever is there must be seen.
      const height = Math.max(2, share * HEIGHT);
      path += `M${i} ${HEIGHT}v${-height}h1v${height}z`;
    });
    return path;
  });
}
