import { ChangeDetectionStrategy, Component, computed, inject, input, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { Router, RouterLink } from '@angular/router';
import type { BuildView } from '#shared/contract/http/devices';
import { Session } from '../account/session';
import { ApiClient } from '../api/api-client';
import { Icon } from '../ui/icon';
import { Notices } from '../ui/notices';
import { ProblemNote } from '../ui/problem-note';
import { LongDate, ShortDate } from '../ui/short-date';
import { TitleBlock } from '../ui/title-block';
import { TitleCell } from '../ui/title-cell';
import { BuildForm } from './build-form';
import { CaptureCountsView } from './capture-counts';
import { DeviceForm } from './device-form';
import { keepTrue } from './kept-true';

@Component({
  selector: 'lw-device-page',
  templateUrl: './device-page.html',
  styleUrl: './pages.scss',
  imports: [
    BuildForm,
    CaptureCountsView,
    DeviceForm,
    Icon,
    LongDate,
    MatButton,
    ProblemNote,
    RouterLink,
    ShortDate,
    TitleBlock,
    TitleCell,
  ],
  host: { '(keydown.escape)': 'drawer.set(null)' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class DevicePage {
  private readonly api = inject(ApiClient);
  private readonly router = inject(Router);
  private readonly notices = inject(Notices);

  readonly id = input.required<string>();

  protected readonly mayChange = inject(Session).has('firmware', 'qa', 'admin');
  protected readonly drawer = signal<'build' | 'device' | null>(null);
  protected readonly device = keepTrue(this.id, (id) => this.api.ask('GET /devices/:id', { params: { id } }));
  protected readonly heading = computed(() => this.device.value()?.name ?? '');

  protected built(build: BuildView): void {
    void this.router.navigate(['/devices', build.device.id, 'builds', build.id]);
  }

  protected saved(): void {
    this.drawer.set(null);
    this.device.reload();
    this.notices.done('Device saved');
  }
}
