import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  signal,
  untracked,
  viewChild,
} from '@angular/core';
import { takeUntilDestroyed, toObservable } from '@angular/core/rxjs-interop';
import { MatButton } from '@angular/material/button';
import { MatDialog } from '@angular/material/dialog';
import { MatMenuModule } from '@angular/material/menu';
import { Router, RouterLink } from '@angular/router';
import { debounceTime, filter, switchMap } from 'rxjs';
import { PreferenceStore } from '../account/preference-store';
import { ApiClient } from '../api/api-client';
import { Downloads } from '../api/downloads';
import { toProblem } from '../api/problem';
import { rowState } from '../captures/capture-row-state';
import { Icon } from '../ui/icon';
import { Notices } from '../ui/notices';
import { ProblemNote } from '../ui/problem-note';
import { RibbonProgress } from '../ui/ribbon-progress';
import { ScreenWatch } from '../ui/screen-size';
import { LongDate, ShortDate } from '../ui/short-date';
import { TitleBlock } from '../ui/title-block';
import { TitleCell } from '../ui/title-cell';
import { VerdictCountsView } from '../ui/verdict-counts';
import type { LineMapInput } from '../captures/line-map/line-map-draft';
import { ChecksPanel } from './checks-panel';
import { DetailsDrawer } from './details/details-drawer';
import { hostSize } from './element-size';
import { secondsAt } from './drawing/time-scale';
import { Legend } from './legend';
import { MotionSheet } from './motion-sheet';
import { PaletteSource } from './palette-source';
import { ReadOutBar } from './read-out-bar';
import { ResetStack } from './reset-stack';
import type { SpanToState } from './state-span-dialog';
import { StateSpanDialog } from './state-span-dialog';
import { characterTable } from './tables/character-table';
import { sortFindings } from './tables/findings-by-place';
import type { FindingOrder } from './tables/finding-table';
import { findingTable } from './tables/finding-table';
import { lineTable } from './tables/line-table';
import { packetTable } from './tables/packet-table';
import { QualityCard } from './tables/quality-card';
import { RowList } from './tables/row-list';
import { strokeTable } from './tables/stroke-table';
import type { TableRow, TapeTable } from './tables/table-row';
import { fromAddress, toAddress } from './tape-address';
import { TapeCanvas } from './tape-canvas';
import { TapeKeys } from './tape-keys';
import type { LoadedTape } from './tape-source';
import { TapeSource } from './tape-source';
import { TapeStage } from './tape-stage';
import { TapeStrip } from './tape-strip';

type TabName = 'Packets' | 'Characters' | 'Findings' | 'Strokes' | 'Lines' | 'Motion' | 'Figures' | 'Checks';

/** What stands above and below the lanes: title block, strip, read-out bar. */
const AROUND_PX = 64 + 46 + 38;
const LEAST_LOWER_PX = 200;
const ADDRESS_WAIT_MS = 400;
const LEGEND_KEY = 'legendSeen';
const FOLLOW_KEY = 'rowsFollow';

@Component({
  selector: 'lw-tape-page',
  templateUrl: './tape-page.html',
  styleUrl: './tape-page.scss',
  imports: [
    ChecksPanel,
    DetailsDrawer,
    Icon,
    Legend,
    LongDate,
    MatButton,
    MatMenuModule,
    MotionSheet,
    ProblemNote,
    QualityCard,
    ReadOutBar,
    ResetStack,
    RibbonProgress,
    RouterLink,
    RowList,
    ShortDate,
    TapeCanvas,
    TapeStrip,
    TitleBlock,
    TitleCell,
    VerdictCountsView,
  ],
  providers: [PaletteSource, TapeKeys, TapeSource, TapeStage],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class TapePage {
  private readonly router = inject(Router);
  private readonly api = inject(ApiClient);
  private readonly notices = inject(Notices);
  private readonly downloads = inject(Downloads);
  private readonly preferences = inject(PreferenceStore);
  private readonly hostSize = hostSize();
  private readonly keys = inject(TapeKeys);
  private readonly dialog = inject(MatDialog);
  protected readonly source = inject(TapeSource);
  protected readonly stage = inject(TapeStage);
  protected readonly screen = inject(ScreenWatch).size;

  /** Of the address. */
  readonly number = input.required<string>();
  readonly decode = input<string>();
  readonly check = input<string>();
  readonly w = input<string>();
  readonly a = input<string>();
  readonly b = input<string>();
  readonly sel = input<string>();
  readonly stack = input<string>();

  private readonly bar = viewChild(ReadOutBar);

  protected readonly tab = signal<TabName>('Packets');
  protected readonly findingOrder = signal<FindingOrder>('worst');
  protected readonly follows = signal(this.preferences.read(FOLLOW_KEY, isFlag, true));
  protected readonly isLegendOpen = signal(!this.preferences.read(LEGEND_KEY, isFlag, false));
  protected readonly isDrawerOpen = signal(true);

  protected readonly state = this.source.state;
  protected readonly loaded = computed(() => {
    const state = this.state();
    return state.kind === 'ready' ? state.loaded : null;
  });
  protected readonly capture = computed(() => {
    const state = this.state();
    if (state.kind === 'undecoded') return state.capture;
    return this.loaded()?.capture ?? null;
  });
  /** Of a capture that has nothing to draw yet, or of a decode that runs beside the one shown. */
  protected readonly doing = computed(() => {
    const capture = this.capture();
    return capture === null ? null : rowState(capture, this.source.job());
  });
  protected readonly heading = computed(() => {
    const capture = this.capture();
    return capture === null ? this.number() : capture.about.subject || capture.fileName;
  });
  protected readonly line = computed(() => {
    const decode = this.loaded()?.decode;
    if (decode === undefined) return null;
    return decode.nominalBitRate === null ? 'no data' : `${decode.nominalBitRate} ${decode.framing}`;
  });
  protected readonly gutterPx = computed(() => ({ wide: 96, narrow: 84, phone: 58 })[this.screen()]);
  protected readonly roomPx = computed(() => {
    if (this.screen() === 'phone') return 300;
    return Math.max(320, this.hostSize().heightPx - AROUND_PX - LEAST_LOWER_PX);
  });

  private readonly findings = computed(() => {
    const model = this.stage.model();
    return model === null ? null : sortFindings(model);
  });
  protected readonly table = computed((): TapeTable | null => {
    const model = this.stage.model();
    const findings = this.findings();
    if (model === null || findings === null) return null;
    switch (this.tab()) {
      case 'Packets':
        return packetTable(model, findings);
      case 'Characters':
        return characterTable(model, findings);
      case 'Findings':
        return findingTable(model, this.loaded()?.check?.rules ?? [], this.findingOrder());
      case 'Strokes':
        return strokeTable(model, findings);
      case 'Lines':
        return lineTable(model, findings);
      default:
        return null;
    }
  });
  protected readonly tabs = computed((): readonly { name: TabName; count: number | null }[] => {
    const model = this.stage.model();
    if (model === null) return [];
    const { tape } = model;
    const tables = [
      { name: 'Packets' as const, count: tape.packets.count },
      { name: 'Characters' as const, count: tape.characters.count },
      { name: 'Findings' as const, count: model.findings.length },
      { name: 'Strokes' as const, count: model.runs.length },
      { name: 'Lines' as const, count: tape.controlEvents.length },
    ];
    const motion = this.screen() === 'wide' ? [] : [{ name: 'Motion' as const, count: null }];
    const rest = [
      { name: 'Figures' as const, count: null },
      {
        name: 'Checks' as const,
        count: this.loaded()?.decodes.reduce((n, d) => n + d.checks.length, 0) ?? 0,
      },
    ];
    if (this.screen() !== 'phone') return [...tables, ...motion, ...rest];
    return [tables[2], tables[0], ...motion, rest[0], tables[1], tables[3], tables[4], rest[1]];
  });

  constructor() {
    effect(() =>
      this.source.ask({
        number: this.number(),
        decode: whole(this.decode()),
        check: whole(this.check()),
      }),
    );
    effect(() => {
      const loaded = this.loaded();
      if (loaded !== null) untracked(() => this.show(loaded.model));
    });
    if (this.screen() === 'phone') this.tab.set('Findings');
    const place = computed(() => {
      const model = this.stage.model();
      if (model === null) return null;
      return toAddress(model, {
        window: this.stage.window(),
        dividers: this.stage.dividers(),
        selection: this.stage.selection(),
        isStacked: this.stage.isStacked(),
      });
    });
    toObservable(place)
      .pipe(debounceTime(ADDRESS_WAIT_MS), takeUntilDestroyed())
      .subscribe((queryParams) => {
        if (queryParams === null) return;
        void this.router.navigate([], { queryParams, queryParamsHandling: 'merge', replaceUrl: true });
      });
  }

  protected onTapeKey(event: KeyboardEvent): void {
    const target = event.target as HTMLElement;
    if (target.closest('input, select, .mat-mdc-menu-panel') !== null) return;
    // A button keeps its own keys.
    if (target.closest('button, a') !== null && (event.key === 'Enter' || event.key === ' ')) return;
    const isTaken = this.keys.press(event, {
      openFind: () => this.bar()?.openFind(),
      showTab: (name) => this.showTab(name),
      copyLink: () => this.copyLink(),
      openDetails: () => this.isDrawerOpen.set(true),
    });
    if (isTaken) event.preventDefault();
  }

  protected pick(row: TableRow): void {
    if (row.selection !== null) this.stage.reveal(row.selection);
    else {
      const { startTicks, endTicks } = this.stage.window();
      const half = (endTicks - startTicks) / 2;
      this.stage.moveTo({ startTicks: row.startTicks - half, endTicks: row.startTicks + half });
    }
  }

  protected stepTab(event: Event, direction: 1 | -1): void {
    const names = this.tabs().map(({ name }) => name);
    const next = names[(names.indexOf(this.tab()) + direction + names.length) % names.length];
    this.tab.set(next);
    event.preventDefault();
    requestAnimationFrame(() => document.getElementById(`tab-${next}`)?.focus());
  }

  protected toggleFollow(): void {
    this.follows.update((follows) => !follows);
    this.preferences.write(FOLLOW_KEY, this.follows());
  }

  protected setLegend(isOpen: boolean): void {
    this.isLegendOpen.set(isOpen);
    if (!isOpen) this.preferences.write(LEGEND_KEY, true);
  }

  protected save(kind: 'log' | 'result' | 'packets.csv' | 'file'): void {
    const loaded = this.loaded();
    const path =
      kind === 'file' || loaded === null
        ? `/captures/${this.number()}/file`
        : `/decodes/${loaded.decode.id}/${kind}${loaded.check !== null && kind !== 'packets.csv' ? `?check=${loaded.check.id}` : ''}`;
    this.downloads.save(path).catch((error: unknown) => this.notices.fail(toProblem(error).detail));
  }

  protected showCheck(check: number): void {
    this.tab.set('Checks');
    void this.router.navigate([], { queryParams: { check }, queryParamsHandling: 'merge' });
  }

  /** What happened between the dividers goes into a new decode. */
  protected stateSpan({ model, decode, check }: LoadedTape): void {
    const { a, b } = this.stage.dividers();
    if (a === null || b === null || a === b) return;
    const data: SpanToState = {
      startS: secondsAt(model.tape, Math.min(a, b)),
      endS: secondsAt(model.tape, Math.max(a, b)),
      map: decode.map,
    };
    this.dialog
      .open<StateSpanDialog, SpanToState, LineMapInput>(StateSpanDialog, { data, width: '440px' })
      .afterClosed()
      .pipe(
        filter((map) => map !== undefined),
        switchMap((map) =>
          this.api.ask('POST /captures/:number/decodes', {
            params: { number: this.number() },
            body: { map, options: decode.options, rulebook: check?.rulebook.key },
          }),
        ),
      )
      .subscribe({
        next: () => {
          this.notices.say('Being decoded again with what you said');
          // The latest is shown once it is there.
          void this.router.navigate([], {
            queryParams: { decode: null, check: null },
            queryParamsHandling: 'merge',
          });
        },
        error: (error: unknown) => this.notices.fail(toProblem(error).detail),
      });
  }

  protected cancel(jobId: number): void {
    this.api.ask('DELETE /jobs/:id', { params: { id: jobId } }).subscribe({
      next: () => this.source.reload(),
      error: (error: unknown) => this.notices.fail(toProblem(error).detail),
    });
  }

  private showTab(name: 'Packets' | 'Motion'): void {
    if (this.tabs().some((tab) => tab.name === name)) this.tab.set(name);
    else document.querySelector<HTMLElement>('lw-motion-sheet')?.scrollIntoView();
  }

  private copyLink(): void {
    void navigator.clipboard
      .writeText(location.href)
      .then(() => this.notices.say('Link to this view copied'));
  }

  /** The first time as the address says, else with the first violation, else with the whole tape. */
  private show(model: Parameters<TapeStage['show']>[0]): void {
    const isNew = this.stage.model()?.tape !== model.tape;
    this.stage.show(model);
    if (!isNew) return;
    const place = fromAddress(model, { w: this.w(), a: this.a(), b: this.b(), sel: this.sel() });
    this.stage.setDividers(place.dividers);
    this.stage.isStacked.set(this.stack() === 'resets');
    if (place.selection !== null) this.stage.select(place.selection);
    if (place.window !== null) this.stage.set(place.window);
    else if (place.selection !== null) this.stage.reveal(place.selection);
  }
}

function whole(text: string | undefined): number | undefined {
  const value = Number(text);
  return text !== undefined && Number.isInteger(value) && value > 0 ? value : undefined;
}

function isFlag(value: unknown): value is boolean {
  return typeof value === 'boolean';
}
