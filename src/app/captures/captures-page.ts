import type { ElementRef } from '@angular/core';
import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  signal,
  viewChild,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatDialog } from '@angular/material/dialog';
import { MatMenuModule } from '@angular/material/menu';
import { Router, RouterLink } from '@angular/router';
import { switchMap } from 'rxjs';
import type { CaptureQuery, CaptureView } from '#shared/contract/http/captures';
import { ApiClient } from '../api/api-client';
import { Downloads } from '../api/downloads';
import { loadWhen } from '../api/load-when';
import { toProblem } from '../api/problem';
import { confirm } from '../ui/confirm-dialog';
import { Icon } from '../ui/icon';
import { Notices } from '../ui/notices';
import { ProblemNote } from '../ui/problem-note';
import { RibbonProgress } from '../ui/ribbon-progress';
import { LongDate, ShortDate } from '../ui/short-date';
import { TinyTape } from '../ui/tiny-tape';
import { TitleBlock } from '../ui/title-block';
import { TitleCell } from '../ui/title-cell';
import { VerdictCountsView } from '../ui/verdict-counts';
import { VerdictGlyph } from '../ui/verdict-glyph';
import { CaptureFilter } from './capture-filter';
import { CaptureList } from './capture-list';
import { rowState } from './capture-row-state';
import { DropFiles } from './drop-files';
import { MapDrawer } from './line-map/map-drawer';
import { UploadQueue } from './upload-queue';
import { UploadRow } from './upload-row';

@Component({
  selector: 'lw-captures-page',
  templateUrl: './captures-page.html',
  styleUrl: './captures-page.scss',
  imports: [
    CaptureFilter,
    DropFiles,
    Icon,
    LongDate,
    MapDrawer,
    MatButton,
    MatMenuModule,
    ProblemNote,
    RibbonProgress,
    RouterLink,
    ShortDate,
    TinyTape,
    TitleBlock,
    TitleCell,
    UploadRow,
    VerdictCountsView,
    VerdictGlyph,
  ],
  providers: [CaptureList],
  host: { '(keydown)': 'onKey($event)' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CapturesPage {
  private readonly api = inject(ApiClient);
  private readonly router = inject(Router);
  private readonly dialog = inject(MatDialog);
  private readonly notices = inject(Notices);
  private readonly downloads = inject(Downloads);
  protected readonly list = inject(CaptureList);
  protected readonly queue = inject(UploadQueue);

  /** From the query string; all optional. */
  readonly search = input<string>();
  readonly device = input<string>();
  readonly build = input<string>();
  readonly owner = input<string>();
  readonly state = input<string>();
  readonly verdict = input<string>();
  readonly sort = input<string>();
  readonly page = input<string>();
  /** Numbers whose lines are to be mapped, joined by commas. */
  readonly map = input<string>();

  private readonly picker = viewChild.required<ElementRef<HTMLInputElement>>('picker');

  protected readonly query = computed(
    () =>
      ({
        search: this.search(),
        device: this.device(),
        build: this.build(),
        owner: this.owner(),
        state: this.state(),
        verdict: this.verdict(),
        sort: this.sort(),
        page: this.page(),
      }) as CaptureQuery,
  );
  protected readonly isFiltered = computed(() => {
    const { search, device, build, owner, state, verdict } = this.query();
    return [search, device, build, owner, state, verdict].some(
      (value) => value !== undefined && value !== '',
    );
  });
  protected readonly workspace = loadWhen(
    computed(() => 0),
    () => this.api.ask('GET /workspace'),
  );
  protected readonly rows = computed(() =>
    (this.list.page()?.captures ?? []).map((capture) => ({
      capture,
      state: rowState(capture, this.list.jobOf(capture.number)),
    })),
  );
  protected readonly lastPage = computed(() => {
    const page = this.list.page();
    return page === null ? 1 : Math.max(1, Math.ceil(page.total / page.pageSize));
  });
  protected readonly marked = signal<ReadonlySet<string>>(new Set());
  protected readonly mapped = computed(() => (this.map() ?? '').split(',').filter((number) => number !== ''));
  /** Received in this visit and still to be mapped. */
  protected readonly unmapped = computed(() => this.queue.received().map(({ number }) => number));

  constructor() {
    effect(() => this.list.ask(this.query()));
  }

  protected choose(): void {
    this.picker().nativeElement.click();
  }

  protected picked(input: HTMLInputElement): void {
    if (input.files !== null) this.queue.add(input.files);
    // The same file can be chosen again.
    input.value = '';
  }

  protected openMap(numbers: readonly string[]): void {
    void this.router.navigate([], {
      queryParams: { map: numbers.length === 0 ? null : numbers.join(',') },
      queryParamsHandling: 'merge',
    });
  }

  protected mappingUsed(numbers: readonly string[]): void {
    this.queue.forget(numbers);
    this.marked.set(new Set());
    this.list.reload();
    const next = this.unmapped().find((number) => !numbers.includes(number));
    this.openMap(next === undefined ? [] : [next]);
  }

  protected goToPage(page: number): void {
    void this.router.navigate([], {
      queryParams: { page: page === 1 ? null : page },
      queryParamsHandling: 'merge',
    });
  }

  protected clearMarks(): void {
    this.marked.set(new Set());
  }

  protected mark(number: string, isMarked: boolean): void {
    this.marked.update((marked) => {
      const next = new Set(marked);
      if (isMarked) next.add(number);
      else next.delete(number);
      return next;
    });
  }

  protected cancel(jobId: number): void {
    this.api.ask('DELETE /jobs/:id', { params: { id: jobId } }).subscribe({
      next: () => this.list.reload(),
      error: (error: unknown) => this.notices.fail(toProblem(error).detail),
    });
  }

  protected save(path: string): void {
    this.downloads.save(path).catch((error: unknown) => this.notices.fail(toProblem(error).detail));
  }

  protected remove({ number, about, fileName }: CaptureView): void {
    confirm(this.dialog, {
      title: `Delete ${number}`,
      reason: `${about.subject || fileName}, its decodes and its checks will be gone for good.`,
      go: 'Delete',
    })
      .pipe(switchMap(() => this.api.ask('DELETE /captures/:number', { params: { number } })))
      .subscribe({
        next: () => {
          this.notices.done(`${number} deleted`);
          this.mark(number, false);
          if (this.mapped().includes(number)) this.openMap([]);
          this.list.reload();
        },
        error: (error: unknown) => this.notices.fail(toProblem(error).detail),
      });
  }

  protected onKey(event: KeyboardEvent): void {
    const target = event.target as HTMLElement;
    if (event.key === 'Escape' && this.mapped().length > 0) {
      this.openMap([]);
      return;
    }
    if (event.ctrlKey || event.metaKey || event.altKey || target.closest('input, select, textarea, .drawer'))
      return;
    const row = target.closest<HTMLElement>('tr[data-number]');
    const number = row?.dataset['number'];
    if (event.key === '/') document.getElementById('capture-search')?.focus();
    else if (event.key === 'u') this.choose();
    else if (event.key === 'm' && number !== undefined) this.openMap([number]);
    else if (event.key === ' ' && row === target && number !== undefined) {
      this.mark(number, !this.marked().has(number));
    } else if (event.key === 'Enter' && row === target && number !== undefined) {
      void this.router.navigate(['/captures', number]);
    } else if (event.key === 'ArrowDown') focusRow(row?.nextElementSibling);
    else if (event.key === 'ArrowUp') focusRow(row?.previousElementSibling);
    else if (event.key === 'Home') focusRow(row?.parentElement?.firstElementChild);
    else if (event.key === 'End') focusRow(row?.parentElement?.lastElementChild);
    else return;
    event.preventDefault();
  }
}

function focusRow(row: Element | null | undefined): void {
  if (row instanceof HTMLElement) row.focus();
}
