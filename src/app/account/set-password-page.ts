import { ChangeDetectionStrategy, Component, DOCUMENT, inject, signal } from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { PASSWORD_LENGTH } from './password-length';
import { ApiClient } from '../api/api-client';
import { loadWhen } from '../api/load-when';
import type { Problem } from '../api/problem';
import { fieldMessage, toProblem } from '../api/problem';
import { Poster } from './poster';

/** Where a link to choose a password leads. The secret stands behind `#`, so that it reaches no server's log. */
@Component({
  selector: 'lw-set-password-page',
  templateUrl: './set-password-page.html',
  styleUrl: './entry-page.scss',
  imports: [MatButton, Poster, ReactiveFormsModule, RouterLink],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SetPasswordPage {
  private readonly api = inject(ApiClient);
  private readonly secret = signal(inject(DOCUMENT).location.hash.slice(1));

  protected readonly link = loadWhen(this.secret, (token) =>
    this.api.ask('POST /password-reset/check', { body: { token } }),
  );
  protected readonly form = inject(NonNullableFormBuilder).group({
    name: [''],
    email: [''],
    password: ['', [Validators.required, Validators.minLength(PASSWORD_LENGTH.least)]],
    again: ['', Validators.required],
  });
  protected readonly least = PASSWORD_LENGTH.least;
  protected readonly isBusy = signal(false);
  protected readonly isDone = signal(false);
  protected readonly mismatch = signal(false);
  protected readonly problem = signal<Problem | null>(null);
  protected readonly messageFor = (path: string) => fieldMessage(this.problem(), path);

  protected choose(isFirstAdmin: boolean): void {
    this.form.markAllAsTouched();
    const { password, again, name, email } = this.form.getRawValue();
    this.mismatch.set(password !== again);
    if (this.form.invalid || this.mismatch() || this.isBusy()) return;
    this.isBusy.set(true);
    this.problem.set(null);
    const body = { token: this.secret(), password, ...(isFirstAdmin ? { name, email } : {}) };
    this.api.ask('POST /password-reset', { body }).subscribe({
      next: () => this.isDone.set(true),
      error: (error: unknown) => {
        this.isBusy.set(false);
        this.problem.set(toProblem(error));
      },
    });
  }
}
