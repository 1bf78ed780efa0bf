import { ChangeDetectionStrategy, Component, computed, inject, input, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { Session } from '../account/session';
import { ApiClient } from '../api/api-client';
import { Icon } from '../ui/icon';
import { Notices } from '../ui/notices';
import { ProblemNote } from '../ui/problem-note';
import { LongDate, ShortDate } from '../ui/short-date';
import { TinyTape } from '../ui/tiny-tape';
import { TitleBlock } from '../ui/title-block';
import { TitleCell } from '../ui/title-cell';
import { VerdictCountsView } from '../ui/verdict-counts';
import { BuildForm } from './build-form';
import { CaptureCountsView } from './capture-counts';
import { keepTrue } from './kept-true';

@Component({
  selector: 'lw-build-page',
  templateUrl: './build-page.html',
  styleUrl: './pages.scss',
  imports: [
    BuildForm,
    CaptureCountsView,
    Icon,
    LongDate,
    MatButton,
    ProblemNote,
    RouterLink,
    ShortDate,
    TinyTape,
    TitleBlock,
    TitleCell,
    VerdictCountsView,
  ],
  host: { '(keydown.escape)': 'isEditing.set(false)' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class BuildPage {
  private readonly api = inject(ApiClient);
  private readonly notices = inject(Notices);

  /** Of the device. */
  readonly id = input.required<string>();
  readonly buildId = input.required<string>();

  protected readonly mayChange = inject(Session).has('firmware', 'qa', 'admin');
  protected readonly isEditing = signal(false);
  protected readonly build = keepTrue(this.buildId, (id) =>
    this.api.ask('GET /builds/:id', { params: { id } }),
  );
  protected readonly heading = computed(() => this.build.value()?.name ?? '');

  protected saved(): void {
    this.isEditing.set(false);
    this.build.reload();
    this.notices.done('Build saved');
  }

  /** Slowest reply in ms and line use in %, where the decode has them. */
  protected figure(metrics: Readonly<Record<string, number | null>>, name: string, decimals: number): string {
    const value = metrics[name];
    return value === null || value === undefined ? '–' : value.toFixed(decimals);
  }
}
