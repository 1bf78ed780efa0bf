import { computed, inject, Injectable, signal } from '@angular/core';
import { Router } from '@angular/router';
import type { Observable } from 'rxjs';
import { catchError, finalize, firstValueFrom, map, of, shareReplay, tap } from 'rxjs';
import type { Account, Role, Session as SessionView, SignIn } from '#shared/contract/http/accounts';
import { ApiClient } from '../api/api-client';

/** That somebody signed in on this browser: without it, asking for a refresh is pointless. */
const MARK = 'lw-signed-in';
/** A token that ends this soon is not used for something long. */
const MARGIN_MS = 30_000;

/** Who is signed in. The access token lives in memory only; the refresh token in a cookie no script can read. */
@Injectable({ providedIn: 'root' })
export class Session {
  private readonly api = inject(ApiClient);
  private readonly router = inject(Router);
  private readonly current = signal<SessionView | null>(null);
  private refreshing: Observable<string> | null = null;

  readonly account = computed(() => this.current()?.account ?? null);
  readonly token = computed(() => this.current()?.accessToken ?? null);

  /** May the signed-in person's role be one of these? */
  has(...roles: Role[]): boolean {
    const account = this.account();
    return account !== null && roles.includes(account.role);
  }

  /** The token if it is good for a while yet. */
  freshToken(): string | null {
    const session = this.current();
    return session !== null && Date.parse(session.expiresAt) - Date.now() > MARGIN_MS
      ? session.accessToken
      : null;
  }

  /** Takes up the session of an earlier visit, if there is one. Never fails: without one the person signs in. */
  async restore(): Promise<void> {
    if (localStorage.getItem(MARK) === null) return;
    await firstValueFrom(this.refresh().pipe(catchError(() => of(null))));
  }

  signIn(body: SignIn): Observable<SessionView> {
    return this.api.ask('POST /session', { body }).pipe(tap((session) => this.take(session)));
  }

  /** A new token. However many ask at once, the server is asked once. */
  refresh(): Observable<string> {
    this.refreshing ??= this.api.ask('POST /session/refresh').pipe(
      tap((session) => this.take(session)),
      map((session) => session.accessToken),
      finalize(() => (this.refreshing = null)),
      shareReplay(1),
    );
    return this.refreshing;
  }

  /** A session that came with a new password. */
  take(session: SessionView): void {
    localStorage.setItem(MARK, '1');
    this.current.set(session);
  }

  /** Preferences and name as the server has them now. */
  update(account: Account): void {
    this.current.update((session) => (session === null ? null : { ...session, account }));
  }

  /** The server does not know this session any more: sign in, then come back here. */
  expire(): void {
    if (this.current() === null) return;
    this.forget();
    void this.router.navigate(['/sign-in'], { queryParams: { to: this.router.url, ended: true } });
  }

  async signOut(where: 'here' | 'everywhere'): Promise<void> {
    await firstValueFrom(this.api.ask(where === 'here' ? 'DELETE /session' : 'DELETE /sessions'));
    this.forget();
    await this.router.navigateByUrl('/sign-in');
  }

  private forget(): void {
    localStorage.removeItem(MARK);
    this.current.set(null);
  }
}
