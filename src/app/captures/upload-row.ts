import { ChangeDetectionStrategy, Component, computed, inject, input, output } from '@angular/core';
import { MatButton } from '@angular/material/button';
import type { CaptureView } from '#shared/contract/http/captures';
import { FileSize } from '../ui/file-size';
import { Icon } from '../ui/icon';
import { RibbonProgress } from '../ui/ribbon-progress';
import { VerdictGlyph } from '../ui/verdict-glyph';
import type { Upload } from './upload-queue';
import { UploadQueue } from './upload-queue';

/** Under this the time left is a guess not worth saying, ms. */
const LEAST_MS = 1500;

/** One file on its way: a ribbon, or what came of it. */
@Component({
  selector: 'lw-upload-row',
  templateUrl: './upload-row.html',
  styleUrl: './upload-row.scss',
  imports: [FileSize, Icon, MatButton, RibbonProgress, VerdictGlyph],
  host: { '[class.mapping]': 'isMapping()' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class UploadRow {
  protected readonly queue = inject(UploadQueue);
  readonly upload = input.required<Upload>();
  /** Its lines are being mapped in the drawer. */
  readonly isMapping = input(false);
  readonly map = output<CaptureView>();

  protected readonly state = computed(() => this.upload().state);
  protected readonly percent = computed(() => {
    const { state, file } = this.upload();
    return state.kind === 'sending' && file.size > 0 ? (100 * state.sentBytes) / file.size : 0;
  });
  protected readonly timeLeft = computed(() => {
    const { state, file } = this.upload();
    if (state.kind !== 'sending' || state.sentBytes === 0) return '';
    const passedMs = Date.now() - state.startedAt;
    if (passedMs < LEAST_MS) return '';
    const leftS = Math.ceil(((passedMs / state.sentBytes) * (file.size - state.sentBytes)) / 1000);
    return leftS < 90 ? `, ${leftS} s left` : `, ${Math.ceil(leftS / 60)} min left`;
  });
}
