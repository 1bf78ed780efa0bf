import { ChangeDetectionStrategy, Component, effect, inject, input, output, signal } from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import type { BuildView } from '#shared/contract/http/devices';
import { ApiClient } from '../api/api-client';
import type { Problem } from '../api/problem';
import { fieldMessage, toProblem } from '../api/problem';

/** Makes a build of a device or changes one. */
@Component({
  selector: 'lw-build-form',
  template: `
    <form [formGroup]="form" (ngSubmit)="save()" novalidate>
      <div class="field">
        <label for="build-name">Name</label>
        <input
          id="build-name"
          class="input mono"
          autocomplete="off"
          formControlName="name"
          [attr.aria-invalid]="form.controls.name.touched && form.controls.name.invalid"
        />
        <span class="hint">As the firmware calls itself, such as 2.3.0-rc6.</span>
        <span class="error">{{ messageFor('name') }}</span>
      </div>
      <div class="field">
        <label for="build-board">Board</label>
        <input id="build-board" class="input" autocomplete="off" formControlName="board" />
        <span class="hint">Hardware revision.</span>
      </div>
      <div class="field">
        <label for="build-notes">Notes</label>
        <textarea id="build-notes" class="input" formControlName="notes"></textarea>
      </div>
      @if (problem(); as problem) {
        <p class="form-error" role="alert">{{ problem.detail }}</p>
      }
      <button matButton="filled" type="submit" [disabled]="isBusy()">
        {{ build() === null ? 'Make the build' : 'Save' }}
      </button>
    </form>
  `,
  styleUrl: './form.scss',
  imports: [MatButton, ReactiveFormsModule],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class BuildForm {
  private readonly api = inject(ApiClient);

  readonly deviceId = input.required<number>();
  /** To change; a new one is made where left out. */
  readonly build = input<BuildView | null>(null);
  readonly saved = output<BuildView>();

  protected readonly isBusy = signal(false);
  protected readonly problem = signal<Problem | null>(null);
  protected readonly form = inject(NonNullableFormBuilder).group({
    name: ['', Validators.required],
    board: [''],
    notes: [''],
  });
  protected readonly messageFor = (path: string) => fieldMessage(this.problem(), path);

  constructor() {
    effect(() => {
      const build = this.build();
      if (build !== null) this.form.setValue({ name: build.name, board: build.board, notes: build.notes });
    });
  }

  protected save(): void {
    this.form.markAllAsTouched();
    if (this.form.invalid || this.isBusy()) return;
    this.isBusy.set(true);
    this.problem.set(null);
    const body = this.form.getRawValue();
    const build = this.build();
    const asked =
      build === null
        ? this.api.ask('POST /devices/:id/builds', { params: { id: this.deviceId() }, body })
        : this.api.ask('PATCH /builds/:id', { params: { id: build.id }, body });
    asked.subscribe({
      next: (saved) => {
        this.isBusy.set(false);
        this.saved.emit(saved);
      },
      error: (error: unknown) => {
        this.isBusy.set(false);
        this.problem.set(toProblem(error));
      },
    });
  }
}
