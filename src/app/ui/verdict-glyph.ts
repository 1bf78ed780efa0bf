import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { VERDICT_GLYPHS } from '../tape/drawing/glyphs';

export type GlyphKind = 'pass' | 'violation' | 'inconclusive' | 'not-shown' | 'not-applicable';

/** The mark of a verdict. The word stands beside it wherever it matters. */
@Component({
  selector: 'lw-verdict-glyph',
  template: `<svg viewBox="0 0 16 16" aria-hidden="true">
    @for (part of parts(); track $index) {
      <path [class]="part.as" [attr.d]="part.path" [attr.stroke-dasharray]="part.dash?.join(' ')" />
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
    .stroke,
    .cut {
      fill: none;
      stroke: currentcolor;
      stroke-width: 1.6;
    }
    .cut {
      stroke: var(--lw-sheet);
    }
    @media (forced-colors: active) {
      :host {
        color: CanvasText;
      }
      .cut {
        stroke: Canvas;
      }
    }
  `,
  host: { '[class]': 'kind()' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class VerdictGlyph {
  readonly kind = input.required<GlyphKind>();
  protected readonly parts = computed(() => VERDICT_GLYPHS[this.kind()]);
}
