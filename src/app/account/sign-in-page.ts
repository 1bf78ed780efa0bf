import { ChangeDetectionStrategy, Component, inject, input, signal } from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { Router } from '@angular/router';
import type { Problem } from '../api/problem';
import { toProblem } from '../api/problem';
import { Poster } from './poster';
import { Session } from './session';

@Component({
  selector: 'lw-sign-in-page',
  templateUrl: './sign-in-page.html',
  styleUrl: './entry-page.scss',
  imports: [MatButton, Poster, ReactiveFormsModule],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SignInPage {
  private readonly session = inject(Session);
  private readonly router = inject(Router);

  /** Where the person wanted to go. */
  readonly to = input<string>();
  /** The session was ended while a page was open. */
  readonly ended = input<string>();

  protected readonly form = inject(NonNullableFormBuilder).group({
    email: ['', Validators.required],
    password: ['', Validators.required],
  });
  protected readonly isBusy = signal(false);
  protected readonly problem = signal<Problem | null>(null);

  protected signIn(): void {
    this.form.markAllAsTouched();
    if (this.form.invalid || this.isBusy()) return;
    this.isBusy.set(true);
    this.problem.set(null);
    this.session.signIn(this.form.getRawValue()).subscribe({
      next: () => void this.router.navigateByUrl(ownAddress(this.to())),
      error: (error: unknown) => {
        this.isBusy.set(false);
        this.problem.set(toProblem(error));
      },
    });
  }
}

/** Only addresses of our own: what stands in the query may come from anywhere. */
function ownAddress(to: string | undefined): string {
  return to !== undefined && /^\/(?![/\\])/.test(to) ? to : '/captures';
}
