import type { Signal } from '@angular/core';
import { computed, inject } from '@angular/core';
import { toObservable, toSignal } from '@angular/core/rxjs-interop';
import type { Observable } from 'rxjs';
import { auditTime, catchError, combineLatest, filter, map, of, startWith, Subject, switchMap } from 'rxjs';
import { EventStream } from '../api/event-stream';
import type { LoadState } from '../api/load-when';
import { toProblem } from '../api/problem';

const GATHER_MS = 350;

export interface KeptTrue<T> {
  readonly state: Signal<LoadState<T>>;
  /** The last value there was, also while it is asked for again. */
  readonly value: Signal<T | null>;
  reload(): void;
}

/**
 * Asks whenever the question changes, and again when the server tells of a change of devices or captures, without a flicker.
 * Call in an injection context.
 */
export function keepTrue<Q, T>(question: Signal<Q>, ask: (q: Q) => Observable<T>): KeptTrue<T> {
  const again = new Subject<void>();
  const changes = inject(EventStream).events.pipe(
    filter(({ kind }) => kind === 'device' || kind === 'capture' || kind === 'missed'),
    auditTime(GATHER_MS),
    startWith(null),
  );
  const answers = combineLatest([toObservable(question), changes, again.pipe(startWith(undefined))]).pipe(
    switchMap(([q]) =>
      ask(q).pipe(
        map((value): LoadState<T> => ({ status: 'ready', value })),
        catchError((error: unknown) => of<LoadState<T>>({ status: 'failed', problem: toProblem(error) })),
      ),
    ),
  );
  const state = toSignal<LoadState<T>, LoadState<T>>(answers, { initialValue: { status: 'loading' } });
  let last: T | null = null;
  const value = computed(() => {
    const now = state();
    if (now.status === 'ready') last = now.value;
    return last;
  });
  return { state, value, reload: () => again.next() };
}
