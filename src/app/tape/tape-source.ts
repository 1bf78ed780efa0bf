import type { Signal } from '@angular/core';
import { computed, inject, Injectable, signal } from '@angular/core';
import { takeUntilDestroyed, toObservable, toSignal } from '@angular/core/rxjs-interop';
import type { Observable } from 'rxjs';
import { catchError, concat, filter, forkJoin, map, of, switchMap } from 'rxjs';
import type { CaptureView } from '#shared/contract/http/captures';
import type { CheckView } from '#shared/contract/http/checks';
import type { DecodeView } from '#shared/contract/http/decodes';
import type { JobView } from '#shared/contract/http/jobs';
import type { Tape } from '#shared/contract/tape-payload';
import { decodeTape } from '#shared/contract/tape-payload';
import { ApiClient } from '../api/api-client';
import { EventStream } from '../api/event-stream';
import type { Problem } from '../api/problem';
import { toProblem } from '../api/problem';
import { statedSpans } from './drawing/stated-spans';
import type { TapeModel } from './drawing/tape-model';
import { buildTapeModel } from './drawing/tape-model';

/** What the address asks for. */
export interface TapeQuestion {
  readonly number: string;
  /** Ordinal of the decode; the latest if left out. */
  readonly decode: number | undefined;
  /** Id of the check; the latest of the decode if left out. */
  readonly check: number | undefined;
}

export interface LoadedTape {
  readonly capture: CaptureView;
  readonly decodes: readonly DecodeView[];
  readonly decode: DecodeView;
  readonly check: CheckView | null;
  readonly model: TapeModel;
}

export type TapeState =
  | { readonly kind: 'loading' }
  | { readonly kind: 'failed'; readonly problem: Problem }
  /** Nothing to draw yet: not mapped, being decoded, or not to be decoded. */
  | { readonly kind: 'undecoded'; readonly capture: CaptureView }
  | { readonly kind: 'ready'; readonly loaded: LoadedTape };

/** Gets everything a tape page shows, and asks again when the server tells of a change. */
@Injectable()
export class TapeSource {
  private readonly api = inject(ApiClient);
  private readonly events = inject(EventStream);
  private readonly asked = signal<TapeQuestion | null>(null);
  private readonly round = signal(0);
  private readonly heardJob = signal<JobView | null>(null);
  private kept: { readonly decodeId: number; readonly tape: Tape } | null = null;

  readonly state: Signal<TapeState>;
  /** The newest job of this capture that was heard of; null where none was. */
  readonly job = computed(() => {
    const job = this.heardJob();
    return job?.capture === this.asked()?.number ? job : null;
  });

  constructor() {
    const question = computed(() => ({ asked: this.asked(), round: this.round() }));
    let shown: string | null = null;
    this.state = toSignal(
      toObservable(question).pipe(
        switchMap(({ asked }) => {
          if (asked === null) return of<TapeState>({ kind: 'loading' });
          const answer = this.load(asked).pipe(
            catchError((error: unknown) => of<TapeState>({ kind: 'failed', problem: toProblem(error) })),
          );
          // What is on the screen stays there while the same capture is asked for again.
          if (shown === asked.number) return answer;
          shown = asked.number;
          return concat(of<TapeState>({ kind: 'loading' }), answer);
        }),
      ),
      { initialValue: { kind: 'loading' } },
    );
    this.events.events.pipe(takeUntilDestroyed()).subscribe((event) => {
      const number = this.asked()?.number;
      if (event.kind === 'job' && event.job.capture === number) {
        this.heardJob.set(event.job);
        if (event.job.state !== 'running') this.reload();
      } else if (event.kind === 'missed' || (event.kind === 'capture' && event.number === number))
        this.reload();
    });
  }

  ask(question: TapeQuestion): void {
    this.asked.set(question);
  }

  reload(): void {
    this.round.update((round) => round + 1);
  }

  /** Emits once when a job of this capture has ended. */
  whenOver(jobId: number): Observable<JobView> {
    return this.events.of('job').pipe(
      map(({ job }) => job),
      filter(({ id, state }) => id === jobId && state !== 'queued' && state !== 'running'),
    );
  }

  private load({ number, decode, check }: TapeQuestion): Observable<TapeState> {
    const params = { number };
    return forkJoin([
      this.api.ask('GET /captures/:number', { params }),
      this.api.ask('GET /captures/:number/decodes', { params }),
    ]).pipe(
      switchMap(([capture, decodes]): Observable<TapeState> => {
        const chosen = decode === undefined ? decodes[0] : decodes.find(({ ordinal }) => ordinal === decode);
        if (decodes.length === 0) return of({ kind: 'undecoded', capture });
        if (chosen === undefined) {
          const detail = `${number} has no decode ${decode ?? ''}.`;
          return of({ kind: 'failed', problem: { ...NOT_THERE, title: detail, detail } });
        }
        const checkId = check ?? chosen.checks[0]?.id;
        return forkJoin([
          this.tapeOf(chosen.id),
          checkId === undefined ? of(null) : this.api.ask('GET /checks/:id', { params: { id: checkId } }),
        ]).pipe(
          map(([tape, checked]): TapeState => {
            const loaded = {
              capture,
              decodes,
              decode: chosen,
              check: checked,
              model: toModel(tape, checked, chosen),
            };
            return { kind: 'ready', loaded };
          }),
        );
      }),
    );
  }

  private tapeOf(decodeId: number): Observable<Tape> {
    if (this.kept?.decodeId === decodeId) return of(this.kept.tape);
    return this.api.askBytes('GET /decodes/:id/tape', { id: decodeId }).pipe(
      map((buffer) => {
        const tape = decodeTape(buffer);
        this.kept = { decodeId, tape };
        return tape;
      }),
    );
  }
}

const NOT_THERE = { type: 'urn:linewitness:problem:not-found', status: 404, code: 'not-found' } as const;

function toModel(tape: Tape, check: CheckView | null, decode: DecodeView): TapeModel {
  const limitOf = (id: string): number | null => check?.rules.find((rule) => rule.id === id)?.limit ?? null;
  const replyLimitMs = limitOf('HSK-1');
  const limits = {
    replyLimitS: replyLimitMs === null ? null : replyLimitMs / 1e3,
    lineUseLimit: limitOf('RPT-1'),
    distortionLimit: limitOf('FRM-8'),
    grossDistortionLimit: limitOf('FRM-2'),
  };
  return buildTapeModel(tape, check?.findings ?? [], limits, statedSpans(tape, decode.map));
}
