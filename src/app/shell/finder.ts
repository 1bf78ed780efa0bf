import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { toObservable, toSignal } from '@angular/core/rxjs-interop';
import { MatDialogRef } from '@angular/material/dialog';
import { Router } from '@angular/router';
import { catchError, debounceTime, forkJoin, map, of, switchMap } from 'rxjs';
import { Session } from '../account/session';
import { ApiClient } from '../api/api-client';
import type { ThemeChoice } from './theme';
import { Theme } from './theme';

interface Entry {
  readonly label: string;
  readonly hint: string;
  readonly run: () => void;
}

const WAIT_MS = 180;
const MOST_OF_A_KIND = 6;

/** Everything that can be gone to or done from anywhere, found by typing. */
@Component({
  selector: 'lw-finder',
  templateUrl: './finder.html',
  styleUrl: './finder.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Finder {
  private readonly api = inject(ApiClient);
  private readonly router = inject(Router);
  private readonly session = inject(Session);
  private readonly theme = inject(Theme);
  private readonly dialog = inject<MatDialogRef<Finder>>(MatDialogRef);

  protected readonly text = signal('');
  protected readonly at = signal(0);

  private readonly found = toSignal(
    toObservable(this.text).pipe(
      debounceTime(WAIT_MS),
      switchMap((text) => (text.trim() === '' ? of([]) : this.search(text.trim()))),
    ),
    { initialValue: [] as Entry[] },
  );

  protected readonly entries = computed(() => {
    const wanted = this.text().trim().toLowerCase();
    return [...this.actions().filter(({ label }) => label.toLowerCase().includes(wanted)), ...this.found()];
  });

  protected type(text: string): void {
    this.text.set(text);
    this.at.set(0);
  }

  protected onKey(event: KeyboardEvent): void {
    const last = this.entries().length - 1;
    if (event.key === 'ArrowDown') this.at.update((at) => Math.min(last, at + 1));
    else if (event.key === 'ArrowUp') this.at.update((at) => Math.max(0, at - 1));
    else if (event.key === 'Enter') this.pick(this.entries()[this.at()]);
    else return;
    event.preventDefault();
  }

  protected pick(entry: Entry | undefined): void {
    if (entry === undefined) return;
    this.dialog.close();
    entry.run();
  }

  private actions(): Entry[] {
    const go = (label: string, url: string): Entry => ({
      label: `Go to ${label}`,
      hint: '',
      run: () => void this.router.navigateByUrl(url),
    });
    const themes: [ThemeChoice, string][] = [
      ['light', 'Light theme'],
      ['dark', 'Dark theme'],
      ['system', 'Theme as the computer'],
    ];
    return [
      go('captures', '/captures'),
      go('devices', '/devices'),
      ...(this.session.has('admin') ? [go('people', '/admin/people')] : []),
      go('own account', '/account'),
      ...themes.map(([key, label]) => ({ label, hint: '', run: () => this.theme.choose(key) })),
      { label: 'Sign out', hint: '', run: () => void this.session.signOut('here') },
    ];
  }

  private search(text: string) {
    return forkJoin([
      this.api.ask('GET /captures', { query: { search: text } }),
      this.api.ask('GET /devices'),
    ]).pipe(
      map(([page, devices]): Entry[] => [
        ...page.captures.slice(0, MOST_OF_A_KIND).map((capture) => ({
          label: `${capture.number} ${capture.about.subject || capture.fileName}`,
          hint: [capture.device?.name, capture.build?.name].filter(Boolean).join(' '),
          run: () => void this.router.navigate(['/captures', capture.number]),
        })),
        ...devices
          .filter(({ name }) => name.toLowerCase().includes(text.toLowerCase()))
          .slice(0, MOST_OF_A_KIND)
          .map((device) => ({
            label: device.name,
            hint: `${device.kind}, ${device.builds.length} builds`,
            run: () => void this.router.navigate(['/devices', device.id]),
          })),
      ]),
      // Without an answer the actions are still there.
      catchError(() => of([] as Entry[])),
    );
  }
}
