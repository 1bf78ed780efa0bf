import { Injectable, signal } from '@angular/core';

export interface NoticeAction {
  readonly label: string;
  readonly run: () => void;
}

export interface Notice {
  readonly id: number;
  readonly kind: 'said' | 'done' | 'failed';
  readonly text: string;
  readonly action: NoticeAction | null;
}

const MOST = 3;

/** Short notices for what has no place of its own on the screen: copied, undone, finished elsewhere. At most three. */
@Injectable({ providedIn: 'root' })
export class Notices {
  private readonly shown = signal<readonly Notice[]>([]);
  private count = 0;

  readonly list = this.shown.asReadonly();

  say(text: string, action: NoticeAction | null = null): void {
    this.add('said', text, action);
  }

  done(text: string, action: NoticeAction | null = null): void {
    this.add('done', text, action);
  }

  /** Stays until closed. */
  fail(text: string, action: NoticeAction | null = null): void {
    this.add('failed', text, action);
  }

  close(id: number): void {
    this.shown.update((list) => list.filter((notice) => notice.id !== id));
  }

  private add(kind: Notice['kind'], text: string, action: NoticeAction | null): void {
    const notice = { id: ++this.count, kind, text, action };
    this.shown.update((list) => [...list.filter((other) => other.text !== text), notice].slice(-MOST));
  }
}
