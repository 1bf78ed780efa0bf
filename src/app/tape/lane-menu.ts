import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { MatMenuModule } from '@angular/material/menu';
import { PreferenceStore } from '../account/preference-store';
import { Icon } from '../ui/icon';
import type { LaneId } from './drawing/lanes';
import { TapeStage } from './tape-stage';

const KEY = 'hiddenLanes';

/** Lanes a person may do without; time and findings always stay. */
const LANES: readonly (readonly [LaneId, string])[] = [
  ['dividers', 'Dividers'],
  ['rts', 'RTS'],
  ['dtr', 'DTR'],
  ['txd', 'TXD'],
  ['dsr', 'DSR'],
  ['supply', 'Supply'],
  ['contact', 'Contact'],
  ['ready', 'Ready'],
  ['reply', 'Reply'],
  ['edges', 'Edges'],
  ['lineUse', 'Line use'],
  ['packets', 'Packets'],
  ['held', 'Held'],
];

/** Which lanes the tape shows, kept with the account. */
@Component({
  selector: 'lw-lane-menu',
  template: `
    <button class="icon-button" type="button" aria-label="Lanes" [matMenuTriggerFor]="menu">
      <lw-icon name="columns" />
    </button>
    <mat-menu #menu="matMenu">
      @for (lane of lanes; track lane[0]) {
        <button
          mat-menu-item
          type="button"
          role="menuitemcheckbox"
          [attr.aria-checked]="!stage.hiddenLanes().includes(lane[0])"
          (click)="$event.stopPropagation(); toggle(lane[0])"
        >
          {{ lane[1] }}{{ stage.hiddenLanes().includes(lane[0]) ? ', hidden' : '' }}
        </button>
      }
    </mat-menu>
  `,
  imports: [Icon, MatMenuModule],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class LaneMenu {
  private readonly preferences = inject(PreferenceStore);
  protected readonly stage = inject(TapeStage);
  protected readonly lanes = LANES;

  constructor() {
    const known = LANES.map(([id]) => id);
    this.stage.setHiddenLanes(
      this.preferences
        .read(KEY, isList, [] as string[])
        .filter((id): id is LaneId => known.includes(id as LaneId)),
    );
  }

  protected toggle(id: LaneId): void {
    const hidden = this.stage.hiddenLanes();
    const next = hidden.includes(id) ? hidden.filter((other) => other !== id) : [...hidden, id];
    this.stage.setHiddenLanes(next);
    this.preferences.write(KEY, next);
  }
}

function isList(value: unknown): value is string[] {
  return Array.isArray(value) && value.every((item) => typeof item === 'string');
}
