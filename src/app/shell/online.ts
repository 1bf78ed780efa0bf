import { DestroyRef, inject, Injectable, signal } from '@angular/core';

/** Whether the browser has a connection at all. */
@Injectable({ providedIn: 'root' })
export class Online {
  private readonly state = signal(navigator.onLine);
  readonly isOnline = this.state.asReadonly();

  constructor() {
    const stop = new AbortController();
    const { signal: aborted } = stop;
    addEventListener('online', () => this.state.set(true), { signal: aborted });
    addEventListener('offline', () => this.state.set(false), { signal: aborted });
    inject(DestroyRef).onDestroy(() => stop.abort());
  }
}
