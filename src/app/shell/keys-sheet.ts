import { ChangeDetectionStrategy, Component } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatDialogModule } from '@angular/material/dialog';
import { KEY_GROUPS } from './keys';

@Component({
  selector: 'lw-keys-sheet',
  template: `
    <h2 mat-dialog-title tabindex="-1">Keys</h2>
    <mat-dialog-content tabindex="0">
      @for (group of groups; track group.where) {
        <section>
          <h3>{{ group.where }}</h3>
          <dl>
            @for (row of group.keys; track row[0]) {
              <dt class="mono">{{ row[0] }}</dt>
              <dd>{{ row[1] }}</dd>
            }
          </dl>
        </section>
      }
    </mat-dialog-content>
    <mat-dialog-actions align="end">
      <button matButton="filled" type="button" mat-dialog-close>Close</button>
    </mat-dialog-actions>
  `,
  styles: `
    mat-dialog-content {
      display: grid;
      gap: 20px;
      grid-template-columns: repeat(auto-fit, minmax(280px, 1fr));
    }
    dl {
      display: grid;
      gap: 0 16px;
      grid-template-columns: auto minmax(0, 1fr);
      margin-top: 4px;
    }
    dt,
    dd {
      border-top: 1px solid var(--lw-rule);
      color: var(--lw-ink);
      padding: 5px 0;
    }
    h3 {
      color: var(--lw-ink);
    }
  `,
  imports: [MatButton, MatDialogModule],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class KeysSheet {
  protected readonly groups = KEY_GROUPS;
}
