import { ChangeDetectionStrategy, Component, computed, input, output, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import type { ChannelView, LinesView, PresetView, PreviewView } from '#shared/contract/http/mapping';
import type { LineRole } from '#shared/line/line-map';
import type { Problem } from '../../api/problem';
import { Icon } from '../../ui/icon';
import { ProblemNote } from '../../ui/problem-note';
import { VerdictGlyph } from '../../ui/verdict-glyph';
import { formatInterval } from '../../ui/format-interval';
import { ChannelLevel } from './channel-level';
import { Excerpt } from './excerpt';
import type { ExcludedSpan, LineMapDraft } from './line-map-draft';
import { ROLE_NAMES, ROLES } from './line-roles';

/** More channels than this are shown only when asked for, those in use first. */
const SHOWN_AT_ONCE = 8;

/** One channel after the other: what it is, its polarity, why; and what comes of it. */
@Component({
  selector: 'lw-lines-step',
  templateUrl: './lines-step.html',
  styleUrl: './steps.scss',
  imports: [ChannelLevel, Excerpt, Icon, MatButton, ProblemNote, VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class LinesStep {
  readonly lines = input.required<LinesView>();
  readonly draft = input.required<LineMapDraft>();
  readonly preview = input.required<PreviewView | null>();
  readonly isAsking = input.required<boolean>();
  readonly previewProblem = input.required<Problem | null>();
  readonly presetUsed = output<PresetView>();
  readonly presetSaved = output<string>();

  protected readonly roles = ROLES;
  protected readonly roleNames = ROLE_NAMES;
  protected readonly showsAll = signal(false);
  protected readonly ordered = computed(() => {
    const rank = (channel: ChannelView): number =>
      this.lines().suggestions.some((s) => s.channel === channel.name) ? 0 : channel.isTooBusy ? 2 : 1;
    return [...this.lines().channels].sort((a, b) => rank(a) - rank(b));
  });
  protected readonly shown = computed(() =>
    this.showsAll() ? this.ordered() : this.ordered().slice(0, SHOWN_AT_ONCE),
  );
  protected readonly sampling = computed(() => {
    const { sampleIntervalS, resolutionS } = this.lines();
    return sampleIntervalS === null
      ? `times to ${formatInterval(resolutionS)}`
      : `sampled every ${formatInterval(sampleIntervalS)}`;
  });

  protected reasonOf(channel: ChannelView): { good: boolean | null; text: string } {
    const use = this.draft().useOf(channel.name);
    if (use === null) {
      if (channel.isTooBusy)
        return { good: null, text: 'Changes too often for a line of a pointing device.' };
      if (channel.edges === 0 && channel.kind === 'digital') return { good: null, text: 'Never changes.' };
      return { good: null, text: 'Not used.' };
    }
    const doubt = this.preview()?.doubts.find(({ role }) => role === use.role);
    if (doubt !== undefined) return { good: false, text: doubt.message };
    const found = this.draft().isTouched()
      ? this.preview()?.detections.find(
          (d) => d.subject === 'line' && d.role === use.role && d.reason !== 'stated',
        )
      : undefined;
    const suggestion = this.lines().suggestions.find(
      (s) => s.role === use.role && s.channel === channel.name,
    );
    const text = found?.reason ?? suggestion?.reason ?? 'Chosen by you.';
    return { good: true, text: text.charAt(0).toUpperCase() + text.slice(1) };
  }

  protected assign(channel: string, value: string): void {
    this.draft().assign(channel, value === '' ? null : (value as LineRole));
  }

  protected setThresholds(channel: string, high: string, low: string): void {
    const [h, l] = [Number(high), Number(low)];
    const isGiven =
      high.trim() !== '' && low.trim() !== '' && Number.isFinite(h) && Number.isFinite(l) && h >= l;
    this.draft().setThresholds(channel, isGiven ? { high: h, low: l } : undefined);
  }

  protected addSpan(start: HTMLInputElement, end: HTMLInputElement, reason: HTMLInputElement): void {
    const span: ExcludedSpan = {
      startS: Number(start.value),
      endS: Number(end.value),
      reason: reason.value.trim(),
    };
    if (!(span.endS > span.startS) || span.reason === '' || start.value === '') return;
    this.draft().setExtras({ excluded: [...this.draft().extras().excluded, span] });
    for (const field of [start, end, reason]) field.value = '';
  }

  protected removeSpan(index: number): void {
    this.draft().setExtras({
      excluded: this.draft()
        .extras()
        .excluded.filter((_, i) => i !== index),
    });
  }
}
