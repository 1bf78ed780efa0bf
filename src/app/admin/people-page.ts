import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { toSignal } from '@angular/core/rxjs-interop';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import type { Observable } from 'rxjs';
import { scan } from 'rxjs';
import type { Person, PersonChange, ResetLink, Role } from '#shared/contract/http/accounts';
import { Session } from '../account/session';
import { ApiClient } from '../api/api-client';
import { EventStream } from '../api/event-stream';
import { loadWhen } from '../api/load-when';
import type { Problem } from '../api/problem';
import { fieldMessage, toProblem } from '../api/problem';
import { Icon } from '../ui/icon';
import { Notices } from '../ui/notices';
import { ProblemNote } from '../ui/problem-note';
import { ShortDate } from '../ui/short-date';
import { TitleBlock } from '../ui/title-block';
import { TitleCell } from '../ui/title-cell';

/** In the order of the contract's `ROLES`. */
const ROLE_NAMES: readonly { role: Role; says: string }[] = [
  { role: 'firmware', says: 'Firmware: uploads, maps, checks; devices and builds' },
  { role: 'qa', says: 'QA: the same' },
  { role: 'support', says: 'Support: uploads, maps, checks' },
  { role: 'admin', says: 'Admin: everything, and people' },
];

@Component({
  selector: 'lw-people-page',
  templateUrl: './people-page.html',
  styleUrl: './people-page.scss',
  imports: [Icon, MatButton, ProblemNote, ReactiveFormsModule, ShortDate, TitleBlock, TitleCell],
  host: { '(keydown.escape)': 'open(null)' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PeoplePage {
  private readonly api = inject(ApiClient);
  private readonly notices = inject(Notices);
  private readonly changes = signal(0);
  private readonly heard = toSignal(
    inject(EventStream)
      .of('person')
      .pipe(scan((count) => count + 1, 0)),
    {
      initialValue: 0,
    },
  );

  protected readonly ownId = inject(Session).account()?.id;
  protected readonly roles = ROLE_NAMES;
  protected readonly state = loadWhen(
    computed(() => [this.changes(), this.heard()]),
    () => this.api.ask('GET /people'),
  );
  /** Kept while the list is asked for again. */
  private lastList: readonly Person[] = [];
  protected readonly people = computed(() => {
    const state = this.state();
    if (state.status === 'ready') this.lastList = state.value;
    return this.lastList;
  });
  protected readonly active = computed(() => this.people().filter(({ isActive }) => isActive).length);

  protected readonly drawer = signal<{ kind: 'new' } | { kind: 'person'; id: number } | null>(null);
  protected readonly chosen = computed(() => {
    const drawer = this.drawer();
    return drawer?.kind === 'person' ? (this.people().find(({ id }) => id === drawer.id) ?? null) : null;
  });
  protected readonly link = signal<ResetLink | null>(null);
  protected readonly problem = signal<Problem | null>(null);
  protected readonly isBusy = signal(false);
  protected readonly isSure = signal(false);
  protected readonly form = inject(NonNullableFormBuilder).group({
    name: ['', Validators.required],
    email: ['', [Validators.required, Validators.email]],
    role: ['firmware' as Role],
  });
  protected readonly messageFor = (path: string) => fieldMessage(this.problem(), path);

  protected open(drawer: { kind: 'new' } | { kind: 'person'; id: number } | null): void {
    this.drawer.set(drawer);
    this.link.set(null);
    this.problem.set(null);
    this.isSure.set(false);
    this.form.reset();
  }

  protected create(): void {
    this.form.markAllAsTouched();
    if (this.form.invalid) return;
    this.run(this.api.ask('POST /people', { body: this.form.getRawValue() }), (person) => {
      this.open({ kind: 'person', id: person.id });
      this.makeLink(person.id);
    });
  }

  protected makeLink(id: number): void {
    this.run(this.api.ask('POST /people/:id/reset-link', { params: { id } }), (link) => this.link.set(link));
  }

  protected change(id: number, body: PersonChange, said: string): void {
    this.run(this.api.ask('PATCH /people/:id', { params: { id }, body }), () => {
      this.isSure.set(false);
      this.notices.done(said);
    });
  }

  protected async copy(link: ResetLink): Promise<void> {
    await navigator.clipboard.writeText(link.url);
    this.notices.say('Link copied');
  }

  private run<T>(ask: Observable<T>, done: (value: T) => void): void {
    this.isBusy.set(true);
    this.problem.set(null);
    ask.subscribe({
      next: (value) => {
        this.isBusy.set(false);
        this.changes.update((n) => n + 1);
        done(value);
      },
      error: (error: unknown) => {
        this.isBusy.set(false);
        this.problem.set(toProblem(error));
      },
    });
  }
}
