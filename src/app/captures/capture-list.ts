import { computed, inject, Injectable, signal } from '@angular/core';
import { takeUntilDestroyed, toObservable, toSignal } from '@angular/core/rxjs-interop';
import { auditTime, catchError, map, merge, of, startWith, Subject, switchMap, tap } from 'rxjs';
import type { CapturePage, CaptureQuery } from '#shared/contract/http/captures';
import type { JobView } from '#shared/contract/http/jobs';
import { ApiClient } from '../api/api-client';
import { EventStream } from '../api/event-stream';
import type { Problem } from '../api/problem';
import { toProblem } from '../api/problem';

/** Changes that come together are answered with one question. */
const GATHER_MS = 350;

type Answer = { readonly page: CapturePage } | { readonly problem: Problem };

/** The page of captures that is asked for, kept true by the server's events. */
@Injectable()
export class CaptureList {
  private readonly api = inject(ApiClient);
  private readonly events = inject(EventStream);
  private readonly again = new Subject<void>();
  private readonly jobs = signal<ReadonlyMap<string, JobView>>(new Map());
  private readonly asked = signal<CaptureQuery | null>(null);
  private readonly busy = signal(true);

  private readonly answer = toSignal(
    merge(
      toObservable(this.asked),
      merge(
        this.again,
        this.events.of('capture').pipe(auditTime(GATHER_MS)),
        this.events.events.pipe(
          switchMap((event) =>
            event.kind === 'missed' || (event.kind === 'job' && isOver(event.job)) ? of(event) : [],
          ),
          auditTime(GATHER_MS),
        ),
      ),
    ).pipe(
      switchMap(() => {
        const query = this.asked();
        if (query === null) return [];
        this.busy.set(true);
        return this.api.ask('GET /captures', { query }).pipe(
          map((page): Answer => ({ page })),
          catchError((error: unknown) => of<Answer>({ problem: toProblem(error) })),
          tap(() => this.busy.set(false)),
        );
      }),
      startWith(null),
    ),
    { initialValue: null },
  );

  /** The last page there was, also while it is asked for again. */
  private lastPage: CapturePage | null = null;
  readonly page = computed(() => {
    const answer = this.answer();
    if (answer !== null && 'page' in answer) this.lastPage = answer.page;
    return this.lastPage;
  });
  readonly problem = computed(() => {
    const answer = this.answer();
    return answer !== null && 'problem' in answer ? answer.problem : null;
  });
  readonly isBusy = this.busy.asReadonly();

  constructor() {
    this.events
      .of('job')
      .pipe(takeUntilDestroyed())
      .subscribe(({ job }) => this.jobs.update((jobs) => new Map(jobs).set(job.capture, job)));
  }

  ask(query: CaptureQuery): void {
    this.asked.set(query);
  }

  reload(): void {
    this.again.next();
  }

  /** The newest that was heard of a capture's job; null where nothing was. */
  jobOf(number: string): JobView | null {
    return this.jobs().get(number) ?? null;
  }
}

function isOver({ state }: JobView): boolean {
  return state === 'done' || state === 'failed' || state === 'cancelled' || state === 'queued';
}
