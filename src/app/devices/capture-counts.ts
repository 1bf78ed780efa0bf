import { ChangeDetectionStrategy, Component, input } from '@angular/core';
import type { CaptureCounts } from '#shared/contract/http/devices';
import { VerdictGlyph } from '../ui/verdict-glyph';

/** Captures by their overall verdict. */
@Component({
  selector: 'lw-capture-counts',
  template: `
    @let n = counts();
    @if (n.total === 0) {
      <span class="quiet">none yet</span>
    }
    @if (n.fail > 0) {
      <span class="count"
        ><lw-verdict-glyph kind="violation" /><strong>{{ n.fail }}</strong
        ><span class="visually-hidden">failed</span></span
      >
    }
    @if (n.inconclusive > 0) {
      <span class="count"
        ><lw-verdict-glyph kind="inconclusive" /><strong>{{ n.inconclusive }}</strong
        ><span class="visually-hidden">inconclusive</span></span
      >
    }
    @if (n.pass > 0) {
      <span class="count"
        ><lw-verdict-glyph kind="pass" />{{ n.pass }}<span class="visually-hidden">passed</span></span
      >
    }
    @if (n.open > 0) {
      <span class="count"
        ><lw-verdict-glyph kind="not-shown" />{{ n.open
        }}<span class="visually-hidden">not decoded</span></span
      >
    }
  `,
  styles: `
    :host {
      display: inline-flex;
      gap: 12px;
    }
    .count {
      align-items: center;
      display: inline-flex;
      gap: 5px;
    }
    strong {
      font-weight: 600;
    }
  `,
  imports: [VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CaptureCountsView {
  readonly counts = input.required<CaptureCounts>();
}
