import { ChangeDetectionStrategy, Component, computed, inject, input, output, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { catchError, EMPTY, filter, merge, of, switchMap, take, timer } from 'rxjs';
import type { RulebookKey } from '#shared/contract/http/rulebooks';
import { ApiClient } from '../api/api-client';
import { loadWhen } from '../api/load-when';
import type { Problem } from '../api/problem';
import { toProblem } from '../api/problem';
import { ProblemNote } from '../ui/problem-note';
import { LongDate, ShortDate } from '../ui/short-date';
import type { GlyphKind } from '../ui/verdict-glyph';
import { VerdictGlyph } from '../ui/verdict-glyph';
import { VerdictCountsView } from '../ui/verdict-counts';
import { measuredText, unitText } from './details/measured';
import type { LoadedTape } from './tape-source';
import { TapeSource } from './tape-source';

const ASK_AGAIN_MS = 1500;

/** The decodes and checks of a capture, checking again, and what changed. A check never changes: a new one is made. */
@Component({
  selector: 'lw-checks-panel',
  templateUrl: './checks-panel.html',
  styleUrl: './checks-panel.scss',
  imports: [LongDate, MatButton, ProblemNote, RouterLink, ShortDate, VerdictCountsView, VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ChecksPanel {
  private readonly api = inject(ApiClient);
  private readonly source = inject(TapeSource);

  readonly loaded = input.required<LoadedTape>();
  /** Id of the check that was made. */
  readonly checked = output<number>();

  protected readonly rulebook = signal<RulebookKey>('baseline');
  protected readonly isBusy = signal(false);
  protected readonly problem = signal<Problem | null>(null);
  private readonly rulebooksState = loadWhen(
    computed(() => 0),
    () => this.api.ask('GET /rulebooks'),
  );
  protected readonly rulebooks = computed(() => {
    const state = this.rulebooksState();
    return state.status === 'ready' ? state.value : [];
  });
  private readonly changesState = loadWhen(
    computed(() => this.loaded().check?.id ?? null),
    (id) => (id === null ? of(null) : this.api.ask('GET /checks/:id/changes', { params: { id } })),
  );
  protected readonly changes = computed(() => {
    const state = this.changesState();
    return state.status === 'ready' ? state.value : null;
  });
  protected readonly measured = measuredText;
  protected readonly unit = unitText;

  protected glyph(verdict: string): GlyphKind {
    return verdict as GlyphKind;
  }

  protected checkAgain(): void {
    const { decode } = this.loaded();
    this.isBusy.set(true);
    this.problem.set(null);
    this.api
      .ask('POST /decodes/:id/checks', { params: { id: decode.id }, body: { rulebook: this.rulebook() } })
      .pipe(
        switchMap(({ id }) =>
          // Its end may have been told before anybody listened: ask as well.
          merge(
            this.source.whenOver(id),
            timer(0, ASK_AGAIN_MS).pipe(
              switchMap(() =>
                this.api.ask('GET /jobs/:id', { params: { id } }).pipe(catchError(() => EMPTY)),
              ),
            ),
          ),
        ),
        filter(({ state }) => state !== 'queued' && state !== 'running'),
        take(1),
      )
      .subscribe({
        next: (job) => {
          this.isBusy.set(false);
          if (job.checkId !== null) this.checked.emit(job.checkId);
          else if (job.problem !== null) this.problem.set(toProblem(new Error(job.problem.detail)));
        },
        error: (error: unknown) => {
          this.isBusy.set(false);
          this.problem.set(toProblem(error));
        },
      });
  }
}
