import { HttpEventType } from '@angular/common/http';
import { computed, inject, Injectable, signal } from '@angular/core';
import type { Subscription } from 'rxjs';
import { last, map, switchMap, tap } from 'rxjs';
import type { CaptureView } from '#shared/contract/http/captures';
import { ApiClient } from '../api/api-client';
import type { Problem } from '../api/problem';
import { toProblem } from '../api/problem';

export type UploadState =
  | { readonly kind: 'waiting' }
  | { readonly kind: 'sending'; readonly sentBytes: number; readonly startedAt: number }
  | { readonly kind: 'received'; readonly capture: CaptureView }
  /** The server said no, before or after the body was sent. */
  | { readonly kind: 'refused'; readonly problem: Problem }
  /** The connection was lost or the server was too busy: it may be sent again. */
  | { readonly kind: 'lost'; readonly problem: Problem };

export interface Upload {
  readonly id: number;
  readonly file: File;
  readonly state: UploadState;
}

const AT_ONCE = 2;

/** Files on their way to the server. Lives on while the person looks at other screens. */
@Injectable({ providedIn: 'root' })
export class UploadQueue {
  private readonly api = inject(ApiClient);
  private readonly uploads = signal<readonly Upload[]>([]);
  private readonly running = new Map<number, Subscription>();
  private count = 0;

  readonly list = this.uploads.asReadonly();
  readonly received = computed(() =>
    this.uploads().flatMap(({ state }) => (state.kind === 'received' ? [state.capture] : [])),
  );
  readonly isBusy = computed(() =>
    this.uploads().some(({ state }) => state.kind === 'waiting' || state.kind === 'sending'),
  );

  constructor() {
    addEventListener('beforeunload', (event) => {
      if (this.isBusy()) event.preventDefault();
    });
  }

  add(files: Iterable<File>): void {
    const added = [...files].map((file): Upload => ({ id: ++this.count, file, state: { kind: 'waiting' } }));
    this.uploads.update((list) => [...list, ...added]);
    this.startNext();
  }

  /** Stops the upload if it runs, and takes it off the list. */
  remove(id: number): void {
    this.running.get(id)?.unsubscribe();
    this.running.delete(id);
    this.uploads.update((list) => list.filter((upload) => upload.id !== id));
    this.startNext();
  }

  /** Takes entries off whose captures are known to the list by now. */
  forget(numbers: readonly string[]): void {
    this.uploads.update((list) =>
      list.filter(({ state }) => state.kind !== 'received' || !numbers.includes(state.capture.number)),
    );
  }

  sendAgain(id: number): void {
    this.set(id, { kind: 'waiting' });
    this.startNext();
  }

  private startNext(): void {
    for (const { id, file, state } of this.uploads()) {
      if (this.running.size >= AT_ONCE) return;
      if (state.kind === 'waiting' && !this.running.has(id)) this.send(id, file);
    }
  }

  private send(id: number, file: File): void {
    const startedAt = Date.now();
    this.set(id, { kind: 'sending', sentBytes: 0, startedAt });
    const form = new FormData();
    form.append('about', '{}');
    form.append('file', file);
    const run = this.api
      .ask('POST /uploads/check', { body: { name: file.name, size: file.size } })
      .pipe(
        switchMap(() => this.api.send('POST /captures', form)),
        tap((event) => {
          if (event.type === HttpEventType.UploadProgress) {
            // The form is a little longer than the file.
            const sentBytes = Math.min(file.size, event.loaded);
            this.set(id, { kind: 'sending', sentBytes, startedAt });
          }
        }),
        last(),
        map((event) => (event.type === HttpEventType.Response ? event.body : null)),
      )
      .subscribe({
        next: (capture) => {
          if (capture !== null) this.set(id, { kind: 'received', capture });
        },
        error: (error: unknown) => {
          const problem = toProblem(error);
          this.set(id, { kind: mayPass(problem) ? 'lost' : 'refused', problem });
          this.end(id);
        },
        complete: () => this.end(id),
      });
    if (!run.closed) this.running.set(id, run);
  }

  private end(id: number): void {
    this.running.delete(id);
    this.startNext();
  }

  private set(id: number, state: UploadState): void {
    this.uploads.update((list) => list.map((upload) => (upload.id === id ? { ...upload, state } : upload)));
  }
}

/** Could the same file be taken if it were sent again? */
function mayPass({ status }: Problem): boolean {
  return status === 0 || status === 401 || status === 408 || status === 429 || status >= 500;
}
