import type { Signal } from '@angular/core';
import { DestroyRef, inject, Injectable, signal } from '@angular/core';

/** `wide` from 1200 px, `narrow` from 900 px, else `phone`. Source: design 6 and 16.8. */
export type ScreenSize = 'wide' | 'narrow' | 'phone';

const WIDE = '(min-width: 1200px)';
const NARROW = '(min-width: 900px)';

/** Which of the three layouts the window asks for. */
@Injectable({ providedIn: 'root' })
export class ScreenWatch {
  private readonly current = signal(now());
  readonly size: Signal<ScreenSize> = this.current.asReadonly();

  constructor() {
    const stop = new AbortController();
    for (const query of [WIDE, NARROW]) {
      matchMedia(query).addEventListener('change', () => this.current.set(now()), { signal: stop.signal });
    }
    inject(DestroyRef).onDestroy(() => stop.abort());
  }
}

function now(): ScreenSize {
  if (matchMedia(WIDE).matches) return 'wide';
  return matchMedia(NARROW).matches ? 'narrow' : 'phone';
}
