import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';

export type GlyphKind = 'pass' | 'violation' | 'inconclusive' | 'not-shown' | 'not-applicable';

/** What is filled with the colour of the verdict, and what is drawn over it in the colour of the paper; box of 16. */
const SHAPES: Record<GlyphKind, { fill: string; line: string; over: string; dash: string }> = {
  pass: {
    fill: '',
    line: 'M8 1.8a6.2 6.2 0 1 0 0 12.4A6.2 6.2 0 0 0 8 1.8M5.2 8.2l2 2 3.6-4',
    over: '',
    dash: '',
  },
  violation: {
    fill: 'M8 .6 15.4 8 8 15.4.6 8z',
    line: '',
    over: 'M5.9 5.9l4.2 4.2M10.1 5.9l-4.2 4.2',
    dash: '',
  },
  inconclusive: {
    fill: '',
    line: 'M2 2h12v12H2zM4.4 8.8c1.2-2 2.4-2 3.6-.8s2.4 1.2 3.6-.8',
    over: '',
    dash: '',
  },
  'not-shown': {
    fill: '',
    line: 'M8 1.8a6.2 6.2 0 1 0 0 12.4A6.2 6.2 0 0 0 8 1.8',
    over: '',
    dash: '2.4 2.4',
  },
  'not-applicable': { fill: '', line: 'M4 8h8', over: '', dash: '' },
};

/** The mark of a verdict. The word stands beside it wherever it matters. */
@Component({
  selector: 'lw-verdict-glyph',
  template: `<svg viewBox="0 0 16 16" aria-hidden="true">
    @if (shape().fill) {
      <path class="fill" [attr.d]="shape().fill" />
    }
    @if (shape().line) {
      <path class="line" [attr.d]="shape().line" [attr.stroke-dasharray]="shape().dash || null" />
    }
    @if (shape().over) {
      <path class="over" [attr.d]="shape().over" />
    }
  </svg>`,
  styles: `
    :host {
      color: var(--lw-ink-2);
      display: inline-flex;
      flex: none;
      height: 16px;
      width: 16px;
    }
    :host(.pass) {
      color: var(--lw-pass);
    }
    :host(.violation) {
      color: var(--lw-violation);
    }
    :host(.inconclusive) {
      color: var(--lw-open);
    }
    .fill {
      fill: currentcolor;
    }
    .line,
    .over {
      fill: none;
      stroke: currentcolor;
      stroke-width: 1.6;
    }
    .over {
      stroke: var(--lw-sheet);
    }
    @media (forced-colors: active) {
      :host {
        color: CanvasText;
      }
      .over {
        stroke: Canvas;
      }
    }
  `,
  host: { '[class]': 'kind()' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class VerdictGlyph {
  readonly kind = input.required<GlyphKind>();
  protected readonly shape = computed(() => SHAPES[this.kind()]);
}
