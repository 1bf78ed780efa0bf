import { ChangeDetectionStrategy, Component, computed, inject, input, output } from '@angular/core';
import type { CheckView, FindingView } from '#shared/contract/http/checks';
import { Icon } from '../../ui/icon';
import { Notices } from '../../ui/notices';
import type { GlyphKind } from '../../ui/verdict-glyph';
import { VerdictGlyph } from '../../ui/verdict-glyph';
import { VERDICT_WORDS } from '../drawing/finding-words';
import { TapeStage } from '../tape-stage';
import { positionOf } from '../tables/positions';
import { CharacterInspector } from './character-inspector';
import { characterFacts, packetFacts, pnpFacts, resetFacts } from './facts';
import { Gauge } from './gauge';
import { measuredText, uncertaintyText, unitText } from './measured';

const BASES = {
  std: 'a published standard',
  ref: 'a reference design or document',
  cp: 'common practice',
  house: 'our own choice',
} as const;
const KINDS = { bound: 'bound', k2: 'k = 2' } as const;
/** Places of the same rule listed at once. */
const MOST_PLACES = 40;

/** What is selected, in figures: measured value, uncertainty, limit, rule, basis; or the check at a glance. */
@Component({
  selector: 'lw-details-drawer',
  templateUrl: './details-drawer.html',
  styleUrl: './details-drawer.scss',
  imports: [CharacterInspector, Gauge, Icon, VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class DetailsDrawer {
  protected readonly stage = inject(TapeStage);
  private readonly notices = inject(Notices);

  readonly check = input.required<CheckView | null>();
  /** The block at the left of the lower pane, on narrow windows: only the head figures. */
  readonly isCompact = input(false);
  readonly linkCopied = output();
  readonly closed = output();

  protected readonly words = VERDICT_WORDS;
  protected readonly bases = BASES;
  protected readonly kinds = KINDS;
  protected readonly measured = measuredText;
  protected readonly uncertainty = uncertaintyText;
  protected readonly unit = unitText;

  protected readonly finding = computed((): FindingView | null => {
    const selection = this.stage.selection();
    return selection?.kind === 'finding' ? (this.stage.model()?.findings[selection.index] ?? null) : null;
  });
  protected readonly rule = computed(() => {
    const finding = this.finding();
    return finding === null ? null : (this.check()?.rules.find(({ id }) => id === finding.rule) ?? null);
  });
  /** Everywhere the same rule was judged, the one shown included. */
  protected readonly places = computed(() => {
    const model = this.stage.model();
    const finding = this.finding();
    if (model === null || finding === null) return [];
    return [...model.findingOrder]
      .filter((index) => model.findings[index].rule === finding.rule)
      .map((index) => ({
        index,
        finding: model.findings[index],
        at: positionOf(model, model.places[index].ticks),
      }));
  });
  protected readonly shownPlaces = computed(() => {
    const places = this.places();
    if (places.length <= MOST_PLACES) return places;
    const selection = this.stage.selection();
    const at = Math.max(
      0,
      places.findIndex(({ index }) => index === selection?.index),
    );
    const from = Math.min(Math.max(0, at - MOST_PLACES / 2), places.length - MOST_PLACES);
    return places.slice(from, from + MOST_PLACES);
  });
  protected readonly others = computed(() =>
    this.places().flatMap(({ finding, index }) =>
      finding.measured === null || index === this.stage.selection()?.index ? [] : [finding.measured],
    ),
  );

  protected readonly facts = computed(() => {
    const model = this.stage.model();
    const selection = this.stage.selection();
    if (model === null || selection === null) return null;
    switch (selection.kind) {
      case 'packet':
        return packetFacts(model, selection.index);
      case 'character':
        return characterFacts(model, selection.index);
      case 'reset':
        return resetFacts(model, selection.index);
      case 'finding':
        return null;
    }
  });
  protected readonly pnp = computed(() => {
    const model = this.stage.model();
    const selection = this.stage.selection();
    return model !== null && selection?.kind === 'reset' ? pnpFacts(model, selection.index) : null;
  });
  /** Findings at the selected thing that is no finding itself. */
  protected readonly here = computed(() => {
    const model = this.stage.model();
    const facts = this.facts();
    if (model === null || facts === null) return [];
    return [...model.findingOrder]
      .filter((index) => {
        const { ticks } = model.places[index];
        return ticks >= facts.startTicks && ticks <= facts.endTicks;
      })
      .map((index) => ({ index, finding: model.findings[index] }));
  });
  /** Violations and inconclusive findings of the whole check, the worst first. */
  protected readonly worst = computed(() => {
    const model = this.stage.model();
    if (model === null) return [];
    const listed = [...model.findingOrder]
      .map((index) => ({
        index,
        finding: model.findings[index],
        at: positionOf(model, model.places[index].ticks),
      }))
      .filter(({ finding }) => finding.verdict === 'violation' || finding.verdict === 'inconclusive');
    return listed.sort((a, b) => weight(a.finding) - weight(b.finding)).slice(0, MOST_PLACES);
  });

  protected step(direction: 1 | -1): void {
    const model = this.stage.model();
    if (model === null) return;
    const selection = this.stage.selection();
    if (selection === null || selection.kind === 'finding') {
      this.stage.stepFinding(direction);
      return;
    }
    const count = {
      packet: model.tape.packets.count,
      character: model.tape.characters.count,
      reset: model.tape.resets.length,
    }[selection.kind];
    const index = selection.index + direction;
    if (index >= 0 && index < count) this.stage.reveal({ kind: selection.kind, index });
  }

  protected reveal(index: number): void {
    this.stage.reveal({ kind: 'finding', index });
  }

  protected glyph(verdict: string): GlyphKind {
    return verdict as GlyphKind;
  }

  protected copyLink(): void {
    this.linkCopied.emit();
    void navigator.clipboard
      .writeText(location.href)
      .then(() => this.notices.say('Link to this view copied'));
  }
}

const VERDICTS = ['violation', 'inconclusive'];
const SEVERITIES = ['blocking', 'warning', 'note'];

function weight({ verdict, severity }: FindingView): number {
  return VERDICTS.indexOf(verdict) * 3 + SEVERITIES.indexOf(severity);
}
