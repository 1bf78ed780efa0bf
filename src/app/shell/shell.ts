import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { MatDialog } from '@angular/material/dialog';
import { MatMenuModule } from '@angular/material/menu';
import { RouterLink, RouterLinkActive, RouterOutlet } from '@angular/router';
import { Session } from '../account/session';
import { EventStream } from '../api/event-stream';
import { Icon } from '../ui/icon';
import { toProblem } from '../api/problem';
import { Notices } from '../ui/notices';
import { NoticeList } from './notice-list';
import { Online } from './online';
import { RegionKeys } from './region-keys';
import type { ThemeChoice } from './theme';
import { Theme } from './theme';

@Component({
  selector: 'lw-shell',
  templateUrl: './shell.html',
  styleUrl: './shell.scss',
  imports: [Icon, MatMenuModule, NoticeList, RegionKeys, RouterLink, RouterLinkActive, RouterOutlet],
  host: { '(document:keydown)': 'onKey($event)' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Shell {
  private readonly session = inject(Session);
  private readonly dialog = inject(MatDialog);
  private readonly notices = inject(Notices);
  protected readonly theme = inject(Theme);
  protected readonly online = inject(Online);
  protected readonly account = this.session.account;
  protected readonly themes: readonly { key: ThemeChoice; name: string }[] = [
    { key: 'system', name: 'As the computer' },
    { key: 'light', name: 'Light' },
    { key: 'dark', name: 'Dark' },
  ];

  constructor() {
    inject(EventStream);
  }

  protected get isAdmin(): boolean {
    return this.session.has('admin');
  }

  protected signOut(where: 'here' | 'everywhere'): void {
    this.session.signOut(where).catch((error: unknown) => this.notices.fail(toProblem(error).detail));
  }

  protected async openFinder(): Promise<void> {
    if (this.dialog.openDialogs.length > 0) return;
    const { Finder } = await import('./finder');
    this.dialog.open(Finder, {
      width: '560px',
      position: { top: '80px' },
      autoFocus: 'first-tabbable',
      ariaLabel: 'Find',
    });
  }

  protected async openKeys(): Promise<void> {
    if (this.dialog.openDialogs.length > 0) return;
    const { KeysSheet } = await import('./keys-sheet');
    this.dialog.open(KeysSheet, { width: '720px', autoFocus: 'first-heading' });
  }

  protected onKey(event: KeyboardEvent): void {
    if ((event.ctrlKey || event.metaKey) && event.key.toLowerCase() === 'k') {
      event.preventDefault();
      void this.openFinder();
    } else if (event.key === '?' && !isTyping(event.target)) {
      event.preventDefault();
      void this.openKeys();
    }
  }
}

function isTyping(target: EventTarget | null): boolean {
  return (
    target instanceof HTMLElement && target.closest('input, textarea, select, [contenteditable]') !== null
  );
}
