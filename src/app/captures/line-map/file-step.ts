import { ChangeDetectionStrategy, Component, computed, input, output } from '@angular/core';
import type { CaptureView } from '#shared/contract/http/captures';
import type { LinesView } from '#shared/contract/http/mapping';
import { formatInterval } from '../../ui/format-interval';
import { FileSize } from '../../ui/file-size';
import { VerdictGlyph } from '../../ui/verdict-glyph';
import type { LineMapDraft } from './line-map-draft';

const FORMATS = { vcd: 'VCD, value changes', csv: 'CSV', bytes: 'byte log' } as const;

/** What the file is, and what it does not tell: sample rate, resolution, accuracy of its clock. */
@Component({
  selector: 'lw-file-step',
  templateUrl: './file-step.html',
  styleUrl: './steps.scss',
  imports: [FileSize, VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class FileStep {
  readonly capture = input.required<CaptureView | null>();
  readonly lines = input.required<LinesView | null>();
  readonly needsRate = input.required<boolean>();
  readonly draft = input.required<LineMapDraft>();
  readonly rateChosen = output<number>();

  protected readonly seal = computed(() => this.capture()?.sha256.slice(0, 8) ?? '');
  protected readonly interval = formatInterval;

  protected formatOf({ format, layout }: LinesView): string {
    return `${FORMATS[format]}${format === 'csv' ? (layout === 'sampled' ? ', samples' : ', changes') : ''}`;
  }

  protected setResolution(text: string): void {
    const us = Number(text);
    this.draft().setExtras({ resolutionS: text.trim() !== '' && us > 0 ? us / 1e6 : null });
  }

  protected setAccuracy(text: string): void {
    const ppm = Number(text);
    this.draft().setExtras({ timeAccuracyPpm: text.trim() !== '' && ppm >= 0 ? ppm : null });
  }

  protected setRate(text: string): void {
    const kHz = Number(text);
    if (kHz > 0) this.rateChosen.emit(kHz * 1000);
  }
}
