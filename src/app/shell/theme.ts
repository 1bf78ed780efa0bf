import { DOCUMENT, inject, Injectable, signal } from '@angular/core';

export const THEMES = ['system', 'light', 'dark'] as const;
export type ThemeChoice = (typeof THEMES)[number];

const KEY = 'lw-theme';

/** Light, dark, or as the computer has it; kept on this computer, so that it holds before anybody signs in. */
@Injectable({ providedIn: 'root' })
export class Theme {
  private readonly root = inject(DOCUMENT).documentElement;
  private readonly chosen = signal<ThemeChoice>(stored());

  readonly choice = this.chosen.asReadonly();

  choose(choice: ThemeChoice): void {
    this.chosen.set(choice);
    localStorage.setItem(KEY, choice);
    this.apply();
  }

  apply(): void {
    const choice = this.chosen();
    if (choice === 'system') delete this.root.dataset['theme'];
    else this.root.dataset['theme'] = choice;
  }
}

function stored(): ThemeChoice {
  const value = localStorage.getItem(KEY);
  return THEMES.find((theme) => theme === value) ?? 'system';
}
