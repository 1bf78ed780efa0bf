import { ChangeDetectionStrategy, Component, computed, inject, input, signal } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { Router } from '@angular/router';
import { debounceTime, Subject } from 'rxjs';
import type { PersonRef } from '#shared/contract/http/accounts';
import type { CaptureQuery } from '#shared/contract/http/captures';
import { ApiClient } from '../api/api-client';
import { loadWhen } from '../api/load-when';
import { Icon } from '../ui/icon';

const WAIT_MS = 250;

const VERDICTS = [
  ['fail', 'failed'],
  ['inconclusive', 'inconclusive'],
  ['pass', 'passed'],
] as const;
const SORTS = [
  ['newest', 'Newest first'],
  ['oldest', 'Oldest first'],
  ['worst', 'Worst first'],
  ['longest', 'Longest first'],
] as const;
const STATES = [
  ['received', 'not mapped'],
  ['queued', 'queued'],
  ['running', 'running'],
  ['decoded', 'decoded'],
  ['failed', 'failed'],
] as const;

/** Search, filters and order of the captures; what is chosen stands in the address bar. */
@Component({
  selector: 'lw-capture-filter',
  templateUrl: './capture-filter.html',
  styleUrl: './capture-filter.scss',
  imports: [Icon],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CaptureFilter {
  private readonly api = inject(ApiClient);
  private readonly router = inject(Router);
  private readonly typed = new Subject<string>();

  readonly query = input.required<CaptureQuery>();
  readonly owners = input.required<readonly PersonRef[]>();

  protected readonly isOpen = signal(false);
  protected readonly verdicts = VERDICTS;
  protected readonly sorts = SORTS;
  protected readonly states = STATES;
  private readonly devicesState = loadWhen(
    computed(() => 0),
    () => this.api.ask('GET /devices'),
  );
  protected readonly devices = computed(() => {
    const state = this.devicesState();
    return state.status === 'ready' ? state.value : [];
  });

  constructor() {
    this.typed
      .pipe(debounceTime(WAIT_MS), takeUntilDestroyed())
      .subscribe((search) => this.set({ search: search.trim() }));
  }

  protected type(text: string): void {
    this.typed.next(text);
  }

  protected set(part: Readonly<Record<string, string>>): void {
    const queryParams = Object.fromEntries(
      Object.entries({ ...part, page: '' }).map(([name, value]) => [name, value === '' ? null : value]),
    );
    void this.router.navigate([], { queryParams, queryParamsHandling: 'merge', replaceUrl: true });
  }

  protected valueOf(element: EventTarget | null): string {
    return (element as HTMLInputElement | HTMLSelectElement).value;
  }
}
