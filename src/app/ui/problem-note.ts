import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import type { Place, Problem } from '#shared/contract/http/problem';
import { VerdictGlyph } from './verdict-glyph';

type Told = Pick<Problem, 'detail'> & {
  readonly place?: Place | null;
  readonly excerpt?: Problem['excerpt'] | null;
};

/** What is wrong, where in the file, and the lines around it with the culprit tinted. Actions go inside. */
@Component({
  selector: 'lw-problem-note',
  template: `
    <p class="what" role="alert">
      <lw-verdict-glyph kind="violation" /><span>{{ problem().detail }}</span>
    </p>
    @if (lines(); as lines) {
      <pre><!--
     -->@for (line of lines; track line.number) {<!--
     --><span class="line" [class.culprit]="line.isCulprit"><span class="no">{{ line.number }}</span>{{ line.text }}
</span><!--
     -->}</pre>
    }
    <div class="actions"><ng-content /></div>
  `,
  styles: `
    :host {
      display: flex;
      flex-direction: column;
      gap: 8px;
      min-width: 0;
    }
    .what {
      color: var(--lw-violation);
      display: flex;
      gap: 8px;
    }
    lw-verdict-glyph {
      margin-top: 2px;
    }
    pre {
      border: 1px solid var(--lw-rule);
      font: 400 12px/20px var(--lw-mono);
      margin: 0;
      overflow: auto;
      padding: 2px 0;
    }
    .line {
      display: block;
      padding: 0 8px;
    }
    .culprit {
      background: var(--lw-violation-container);
      color: var(--lw-on-violation-container);
      font-weight: 500;
    }
    .no {
      color: var(--lw-ink-3);
      display: inline-block;
      margin-right: 12px;
      min-width: 40px;
      text-align: right;
    }
    .culprit .no {
      color: inherit;
    }
    .actions:not(:has(*)) {
      display: none;
    }
  `,
  imports: [VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ProblemNote {
  readonly problem = input.required<Told>();
  protected readonly lines = computed(() => {
    const { excerpt, place } = this.problem();
    if (!excerpt || excerpt.lines.length === 0) return null;
    return excerpt.lines.map((text, i) => ({
      number: excerpt.firstLine + i,
      text,
      isCulprit: excerpt.firstLine + i === place?.line,
    }));
  });
}
