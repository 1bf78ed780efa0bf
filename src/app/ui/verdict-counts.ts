import { ChangeDetectionStrategy, Component, input } from '@angular/core';
import type { VerdictCounts } from '#shared/contract/http/checks';
import { VerdictGlyph } from './verdict-glyph';

/** Rules by verdict: violations, inconclusive ones and passes, each with its glyph. */
@Component({
  selector: 'lw-verdict-counts',
  template: `
    @let n = counts();
    @if (n.violation > 0) {
      <span class="count"
        ><lw-verdict-glyph kind="violation" /><strong>{{ n.violation }}</strong
        ><span [class.visually-hidden]="!words()">{{
          n.violation === 1 ? 'violation' : 'violations'
        }}</span></span
      >
    }
    @if (n.inconclusive > 0) {
      <span class="count"
        ><lw-verdict-glyph kind="inconclusive" /><strong>{{ n.inconclusive }}</strong
        ><span [class.visually-hidden]="!words()">inconclusive</span></span
      >
    }
    @if (!words() || n.violation + n.inconclusive === 0) {
      <span class="count"
        ><lw-verdict-glyph kind="pass" />{{ n.pass
        }}<span [class.visually-hidden]="!words()">{{ n.pass === 1 ? 'pass' : 'passes' }}</span></span
      >
    }
    @if (!words() && n.notShown > 0) {
      <span class="count quiet"
        ><lw-verdict-glyph kind="not-shown" />{{ n.notShown
        }}<span class="visually-hidden">not shown</span></span
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
      white-space: nowrap;
    }
    strong {
      font-weight: 600;
    }
  `,
  imports: [VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class VerdictCountsView {
  readonly counts = input.required<VerdictCounts>();
  /** Say the words too, and leave out passes beside something worse. */
  readonly words = input(false);
}
