import { DestroyRef, inject, Injectable } from '@angular/core';
import { catchError, debounceTime, EMPTY, Subject, switchMap } from 'rxjs';
import type { Preferences } from '#shared/contract/http/accounts';
import { ApiClient } from '../api/api-client';
import { Session } from './session';

const WAIT_MS = 800;

/** What a person likes, kept with their account, so that it is the same on every computer. */
@Injectable({ providedIn: 'root' })
export class PreferenceStore {
  private readonly api = inject(ApiClient);
  private readonly session = inject(Session);
  private readonly writes = new Subject<Preferences>();

  constructor() {
    const writing = this.writes
      .pipe(
        debounceTime(WAIT_MS),
        switchMap((body) =>
          this.api.ask('PUT /me/preferences', { body }).pipe(
            // A preference that could not be kept is no reason to bother anybody; it holds on this page.
            catchError(() => EMPTY),
          ),
        ),
      )
      .subscribe();
    inject(DestroyRef).onDestroy(() => writing.unsubscribe());
  }

  /** @param isRight whether a stored value can be used: the store outlives versions of this program */
  read<T>(key: string, isRight: (value: unknown) => value is T, otherwise: T): T {
    const value = this.session.account()?.preferences[key];
    return isRight(value) ? value : otherwise;
  }

  write(key: string, value: unknown): void {
    const account = this.session.account();
    if (account === null) return;
    const preferences = { ...account.preferences, [key]: value };
    this.session.update({ ...account, preferences });
    this.writes.next(preferences);
  }
}
