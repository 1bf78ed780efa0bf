import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { MatButton } from '@angular/material/button';
import type { MatDialog } from '@angular/material/dialog';
import { MAT_DIALOG_DATA, MatDialogModule } from '@angular/material/dialog';
import type { Observable } from 'rxjs';
import { filter, map } from 'rxjs';

export interface Decision {
  /** The decision as a title. */
  readonly title: string;
  readonly reason: string;
  /** A verb. */
  readonly go: string;
}

@Component({
  selector: 'lw-confirm-dialog',
  template: `
    <h2 mat-dialog-title>{{ decision.title }}</h2>
    <mat-dialog-content>
      <p>{{ decision.reason }}</p>
    </mat-dialog-content>
    <mat-dialog-actions align="end">
      <button matButton="outlined" type="button" mat-dialog-close>Cancel</button>
      <button matButton="filled" type="button" [mat-dialog-close]="true">{{ decision.go }}</button>
    </mat-dialog-actions>
  `,
  imports: [MatButton, MatDialogModule],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ConfirmDialog {
  protected readonly decision = inject<Decision>(MAT_DIALOG_DATA);
}

/** Emits once if the person goes through with it, and completes. */
export function confirm(dialog: MatDialog, decision: Decision): Observable<void> {
  return dialog
    .open<ConfirmDialog, Decision, boolean>(ConfirmDialog, { data: decision, width: '440px' })
    .afterClosed()
    .pipe(
      filter((isSure) => isSure === true),
      map(() => undefined),
    );
}
