import type { Signal } from '@angular/core';
import { toObservable, toSignal } from '@angular/core/rxjs-interop';
import type { Observable } from 'rxjs';
import { catchError, map, of, startWith, switchMap } from 'rxjs';
import type { Problem } from './problem';
import { toProblem } from './problem';

export type LoadState<T> =
  | { readonly status: 'loading' }
  | { readonly status: 'ready'; readonly value: T }
  | { readonly status: 'failed'; readonly problem: Problem };

const LOADING = { status: 'loading' } as const;

/** Asks again whenever `question` changes; a newer question cancels the older. Call in an injection context. */
export function loadWhen<Q, T>(question: Signal<Q>, ask: (q: Q) => Observable<T>): Signal<LoadState<T>> {
  const answers = toObservable(question).pipe(
    switchMap((q) =>
      ask(q).pipe(
        map((value): LoadState<T> => ({ status: 'ready', value })),
        catchError((error: unknown) => of<LoadState<T>>({ status: 'failed', problem: toProblem(error) })),
        startWith<LoadState<T>>(LOADING),
      ),
    ),
  );
  return toSignal<LoadState<T>, LoadState<T>>(answers, { initialValue: LOADING });
}
