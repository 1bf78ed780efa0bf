import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import type { CheckView, RuleResultView } from '#shared/contract/http/checks';
import type { DecodeView } from '#shared/contract/http/decodes';
import { formatInterval } from '../../ui/format-interval';
import type { GlyphKind } from '../../ui/verdict-glyph';
import { VerdictGlyph } from '../../ui/verdict-glyph';
import { measuredText, uncertaintyText, unitText } from '../details/measured';
import type { TapeModel } from '../drawing/tape-model';
import { qualityOf } from './quality';
import type { HostView } from '#shared/hosts/what-hosts-see';
import { whatHostsSee } from '#shared/hosts/what-hosts-see';

const HOST_GLYPHS: Readonly<Record<HostView['outcome'], GlyphKind>> = {
  found: 'pass',
  sometimes: 'inconclusive',
  missed: 'violation',
  'not-shown': 'not-shown',
  told: 'not-applicable',
};

/** What this capture can and cannot show, and every rule with its figure. */
@Component({
  selector: 'lw-quality-card',
  templateUrl: './quality-card.html',
  styleUrl: './quality-card.scss',
  imports: [VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class QualityCard {
  readonly model = input.required<TapeModel>();
  readonly decode = input.required<DecodeView>();
  readonly check = input.required<CheckView | null>();

  protected readonly quality = computed(() => qualityOf(this.model()));
  protected readonly hosts = computed(() => whatHostsSee(this.model().tape));
  protected readonly rules = computed(() => this.check()?.rules ?? []);
  protected readonly judged = computed(() =>
    this.rules().filter(({ verdict }) => verdict !== 'not-shown' && verdict !== 'not-applicable'),
  );
  protected readonly notShown = computed(() => this.rules().filter(({ verdict }) => verdict === 'not-shown'));
  protected readonly notApplicable = computed(() =>
    this.rules().filter(({ verdict }) => verdict === 'not-applicable'),
  );
  protected readonly resolution = computed(() => {
    const { tape } = this.model();
    return formatInterval(tape.resolutionTicks * tape.tickS);
  });

  protected hostGlyph({ outcome }: HostView): GlyphKind {
    return HOST_GLYPHS[outcome];
  }

  protected hostWords({ outcome, n, found, attempt }: HostView): string {
    switch (outcome) {
      case 'told':
        return 'does not look';
      case 'not-shown':
        return 'not shown';
      case 'missed':
        return `not found in ${n} of ${n} resets`;
      default:
        return `found in ${found} of ${n} resets${attempt === 1 ? '' : `, at attempt ${attempt}`}`;
    }
  }

  protected glyph(verdict: RuleResultView['verdict']): GlyphKind {
    return verdict;
  }

  protected figure({ measured, uncertainty, unit }: RuleResultView): string {
    if (measured === null) return '';
    const u = uncertainty === null ? '' : ` ± ${uncertaintyText(uncertainty)}`;
    return `${measuredText(measured, unit)}${u} ${unitText(unit)}`;
  }

  protected limit({ limit, unit, sense }: RuleResultView): string {
    if (limit === null) return '';
    return `${sense === 'at-least' ? 'at least ' : ''}${measuredText(limit, unit)} ${unitText(unit)}`;
  }
}
