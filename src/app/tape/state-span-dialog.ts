import { ChangeDetectionStrategy, Component, inject, signal } from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MAT_DIALOG_DATA, MatDialogModule, MatDialogRef } from '@angular/material/dialog';
import type { LineMapInput } from '../captures/line-map/line-map-draft';

export interface SpanToState {
  readonly startS: number;
  readonly endS: number;
  /** The map the tape was decoded with. */
  readonly map: LineMapInput;
}

const KINDS = [
  ['rest', 'The device was at rest'],
  ['stroke', 'A straight stroke'],
  ['closed-path', 'A path that ends where it began'],
  ['excluded', 'Leave this stretch out'],
] as const;
type Kind = (typeof KINDS)[number][0];

/** Asks what the hand did between the dividers; closes with the map that says so. */
@Component({
  selector: 'lw-state-span-dialog',
  templateUrl: './state-span-dialog.html',
  styles: `
    form {
      display: flex;
      flex-direction: column;
      gap: 10px;
      padding-top: 4px;
    }
  `,
  imports: [MatButton, MatDialogModule, ReactiveFormsModule],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class StateSpanDialog {
  private readonly dialog = inject<MatDialogRef<StateSpanDialog, LineMapInput>>(MatDialogRef);
  protected readonly span = inject<SpanToState>(MAT_DIALOG_DATA);
  protected readonly kinds = KINDS;
  protected readonly problem = signal('');
  protected readonly form = inject(NonNullableFormBuilder).group({
    kind: ['rest' as Kind],
    axis: ['x' as 'x' | 'y'],
    lengthMm: [''],
    uncertaintyMm: [''],
    reason: [''],
  });

  protected state(): void {
    const { kind, axis, lengthMm, uncertaintyMm, reason } = this.form.getRawValue();
    const { startS, endS, map } = this.span;
    if (kind === 'excluded') {
      if (reason.trim() === '') {
        this.problem.set('Say why it is left out: the reason stays with the decode.');
        return;
      }
      this.dialog.close({
        ...map,
        excluded: [...(map.excluded ?? []), { startS, endS, reason: reason.trim() }],
      });
      return;
    }
    const length = Number(lengthMm);
    const uncertainty = Number(uncertaintyMm);
    if (kind === 'stroke' && !(length > 0)) {
      this.problem.set('The length of the stroke is needed, in millimetres.');
      return;
    }
    const stroke = {
      axis,
      lengthMm: length,
      ...(uncertaintyMm.trim() !== '' && uncertainty >= 0 ? { lengthUncertaintyMm: uncertainty } : {}),
    };
    const declared = { kind, startS, endS, ...(kind === 'stroke' ? stroke : {}) };
    this.dialog.close({ ...map, declared: [...(map.declared ?? []), declared] });
  }
}
