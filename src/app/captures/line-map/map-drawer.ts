import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  output,
  signal,
} from '@angular/core';
import { toObservable, toSignal } from '@angular/core/rxjs-interop';
import { MatButton } from '@angular/material/button';
import { catchError, concat, debounceTime, forkJoin, map, of, switchMap } from 'rxjs';
import type { PresetView, PreviewView } from '#shared/contract/http/mapping';
import type { RulebookKey } from '#shared/contract/http/rulebooks';
import { ApiClient } from '../../api/api-client';
import { loadWhen } from '../../api/load-when';
import type { Problem } from '../../api/problem';
import { toProblem } from '../../api/problem';
import { Icon } from '../../ui/icon';
import { Notices } from '../../ui/notices';
import { ProblemNote } from '../../ui/problem-note';
import { VerdictGlyph } from '../../ui/verdict-glyph';
import type { AboutAnswer } from './about-step';
import { AboutStep } from './about-step';
import { FileStep } from './file-step';
import { LineMapDraft } from './line-map-draft';
import { LinesStep } from './lines-step';
import { mergeAbout } from './merge-about';

const STEPS = ['File', 'Lines', 'About'] as const;
type Step = (typeof STEPS)[number];

const WAIT_MS = 250;

type Preview =
  | { readonly kind: 'ready'; readonly preview: PreviewView }
  | { readonly kind: 'asking' }
  | { readonly kind: 'failed'; readonly problem: Problem };

/** Which channel is which line, for one capture or for a whole batch with one map; then its decode. */
@Component({
  selector: 'lw-map-drawer',
  templateUrl: './map-drawer.html',
  styleUrl: './map-drawer.scss',
  imports: [AboutStep, FileStep, Icon, LinesStep, MatButton, ProblemNote, VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class MapDrawer {
  private readonly api = inject(ApiClient);
  private readonly notices = inject(Notices);

  /** One capture, or several that get the same map; the first is shown. */
  readonly numbers = input.required<readonly string[]>();
  readonly closed = output();
  /** The decodes were asked for. */
  readonly used = output<readonly string[]>();

  protected readonly steps = STEPS;
  protected readonly step = signal<Step>('Lines');
  protected readonly draft = signal(new LineMapDraft());
  protected readonly isBusy = signal(false);
  protected readonly problem = signal<Problem | null>(null);
  protected readonly about = signal<AboutAnswer | null>(null);
  protected readonly rulebook = signal<RulebookKey>('baseline');
  private readonly askedRateHz = signal<number | undefined>(undefined);

  private readonly first = computed(() => this.numbers()[0]);
  protected readonly captures = loadWhen(this.numbers, (numbers) =>
    forkJoin(numbers.map((number) => this.api.ask('GET /captures/:number', { params: { number } }))),
  );
  protected readonly capture = computed(() => {
    const state = this.captures();
    return state.status === 'ready' ? state.value[0] : null;
  });
  protected readonly lines = loadWhen(
    computed(() => ({ number: this.first(), sampleRateHz: this.askedRateHz() })),
    ({ number, sampleRateHz }) =>
      this.api.ask('GET /captures/:number/lines', { params: { number }, query: { sampleRateHz } }),
  );
  protected readonly needsRate = computed(() => {
    const state = this.lines();
    return state.status === 'failed' && state.problem.code === 'no-sample-rate';
  });

  private readonly question = computed(() => ({
    number: this.first(),
    map: this.draft().map(),
    options: this.draft().options(),
    isChanged:
      this.draft().isTouched() ||
      this.draft().extras().resolutionS !== null ||
      hasMore(this.draft().extras()),
    isReady: this.lines().status === 'ready',
  }));
  private readonly asked = toSignal(
    toObservable(this.question).pipe(
      debounceTime(WAIT_MS),
      switchMap(({ number, map: lineMap, options, isChanged, isReady }) => {
        if (!isReady || !isChanged) return of(null);
        const body = { map: lineMap, options };
        return concat(
          of<Preview>({ kind: 'asking' }),
          this.api.ask('POST /captures/:number/preview', { params: { number }, body }).pipe(
            map((preview): Preview => ({ kind: 'ready', preview })),
            catchError((error: unknown) => of<Preview>({ kind: 'failed', problem: toProblem(error) })),
          ),
        );
      }),
    ),
    { initialValue: null },
  );
  private lastPreview: PreviewView | null = null;
  /** What the map makes of the capture; the last one while a new one is on its way. */
  protected readonly preview = computed(() => {
    const asked = this.asked();
    const lines = this.lines();
    if (asked === null) this.lastPreview = lines.status === 'ready' ? lines.value.preview : null;
    else if (asked.kind === 'ready') this.lastPreview = asked.preview;
    return this.lastPreview;
  });
  protected readonly previewProblem = computed(() => {
    const asked = this.asked();
    return asked?.kind === 'failed' ? asked.problem : null;
  });
  protected readonly isAsking = computed(() => this.asked()?.kind === 'asking');

  constructor() {
    // Another capture: everything begins anew.
    effect(() => {
      this.first();
      this.draft.set(new LineMapDraft());
      this.about.set(null);
      this.problem.set(null);
      this.step.set('Lines');
    });
    effect(() => {
      const state = this.lines();
      if (state.status === 'ready') this.draft().suggest(state.value);
      if (this.needsRate()) this.step.set('File');
    });
  }

  protected focusStep(): void {
    // The tab gets its place in the order with the next rendering.
    queueMicrotask(() => document.getElementById(`step-${this.step()}`)?.focus());
  }

  protected setRate(sampleRateHz: number): void {
    this.draft().setExtras({ sampleRateHz });
    this.askedRateHz.set(sampleRateHz);
  }

  protected usePreset(preset: PresetView): void {
    this.draft().use(preset);
    this.notices.say(`Preset ${preset.name} taken over`);
  }

  protected savePreset(name: string): void {
    const state = this.lines();
    if (state.status !== 'ready') return;
    const body = {
      name,
      channels: this.draft().channels,
      map: this.draft().presetMap(this.preview()?.lines ?? []),
      options: this.draft().options(),
    };
    this.api.ask('POST /presets', { body }).subscribe({
      next: () =>
        this.notices.done(`Preset ${name} saved. It is offered where these channel names come again.`),
      error: (error: unknown) => this.problem.set(toProblem(error)),
    });
  }

  protected useMapping(): void {
    const captures = this.captures();
    if (captures.status !== 'ready' || this.isBusy()) return;
    this.isBusy.set(true);
    this.problem.set(null);
    const numbers = this.numbers();
    const about = this.about();
    const isBatch = numbers.length > 1;
    const changes = captures.value.flatMap(({ number, about: known }) => {
      if (about === null) return [];
      const body = {
        about: isBatch ? mergeAbout(known, about.about) : about.about,
        ...(isBatch && about.buildId === null ? {} : { buildId: about.buildId }),
      };
      return [this.api.ask('PATCH /captures/:number', { params: { number }, body })];
    });
    const body = { map: this.draft().map(), options: this.draft().options(), rulebook: this.rulebook() };
    (changes.length === 0 ? of([]) : forkJoin(changes))
      .pipe(
        switchMap(() => this.api.ask('POST /captures/decodes', { body: { ...body, numbers: [...numbers] } })),
      )
      .subscribe({
        next: ({ refused }) => {
          this.isBusy.set(false);
          for (const { number, problem } of refused) this.notices.fail(`${number}: ${problem.detail}`);
          this.used.emit(numbers);
        },
        error: (error: unknown) => {
          this.isBusy.set(false);
          this.problem.set(toProblem(error));
        },
      });
  }
}

function hasMore(extras: {
  timeAccuracyPpm: number | null;
  protocol?: unknown;
  excluded: readonly unknown[];
}): boolean {
  return extras.timeAccuracyPpm !== null || Boolean(extras.protocol) || extras.excluded.length > 0;
}
