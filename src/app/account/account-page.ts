import { ChangeDetectionStrategy, Component, inject, signal } from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { ApiClient } from '../api/api-client';
import type { Problem } from '../api/problem';
import { fieldMessage, toProblem } from '../api/problem';
import { Notices } from '../ui/notices';
import { TitleBlock } from '../ui/title-block';
import { PASSWORD_LENGTH } from './password-length';
import { Session } from './session';

@Component({
  selector: 'lw-account-page',
  templateUrl: './account-page.html',
  styleUrl: './account-page.scss',
  imports: [MatButton, ReactiveFormsModule, TitleBlock],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AccountPage {
  private readonly api = inject(ApiClient);
  private readonly session = inject(Session);
  private readonly notices = inject(Notices);

  protected readonly account = this.session.account;
  protected readonly least = PASSWORD_LENGTH.least;
  protected readonly isBusy = signal(false);
  protected readonly problem = signal<Problem | null>(null);
  protected readonly form = inject(NonNullableFormBuilder).group({
    current: ['', Validators.required],
    next: ['', [Validators.required, Validators.minLength(PASSWORD_LENGTH.least)]],
  });
  protected readonly messageFor = (path: string) => fieldMessage(this.problem(), path);

  protected change(): void {
    this.form.markAllAsTouched();
    if (this.form.invalid || this.isBusy()) return;
    this.isBusy.set(true);
    this.problem.set(null);
    this.api.ask('POST /me/password', { body: this.form.getRawValue() }).subscribe({
      next: (session) => {
        this.session.take(session);
        this.isBusy.set(false);
        this.form.reset();
        this.notices.done('Password changed. All other sessions have ended.');
      },
      error: (error: unknown) => {
        this.isBusy.set(false);
        this.problem.set(toProblem(error));
      },
    });
  }

  protected signOutEverywhere(): void {
    this.session.signOut('everywhere').catch((error: unknown) => this.notices.fail(toProblem(error).detail));
  }
}
