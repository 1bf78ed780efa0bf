import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { Router, RouterLink } from '@angular/router';
import type { DeviceView } from '#shared/contract/http/devices';
import { Session } from '../account/session';
import { ApiClient } from '../api/api-client';
import { Icon } from '../ui/icon';
import { ProblemNote } from '../ui/problem-note';
import { TitleBlock } from '../ui/title-block';
import { TitleCell } from '../ui/title-cell';
import { CaptureCountsView } from './capture-counts';
import { DeviceForm } from './device-form';
import { keepTrue } from './kept-true';

@Component({
  selector: 'lw-devices-page',
  templateUrl: './devices-page.html',
  styleUrl: './pages.scss',
  imports: [CaptureCountsView, DeviceForm, Icon, MatButton, ProblemNote, RouterLink, TitleBlock, TitleCell],
  host: { '(keydown.escape)': 'isMaking.set(false)' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class DevicesPage {
  private readonly api = inject(ApiClient);
  private readonly router = inject(Router);
  protected readonly mayMake = inject(Session).has('firmware', 'qa', 'admin');
  protected readonly devices = keepTrue(
    computed(() => 0),
    () => this.api.ask('GET /devices'),
  );
  protected readonly isMaking = signal(false);

  protected open(device: DeviceView): void {
    void this.router.navigate(['/devices', device.id]);
  }
}
