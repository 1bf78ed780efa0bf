import { DestroyRef, DOCUMENT, effect, inject, Injectable, signal } from '@angular/core';
import { Theme } from '../shell/theme';
import type { Palette } from './drawing/palette';
import { readPalette } from './drawing/palette';

/** The colours in force, read again when the theme changes, and once the fonts are there (canvas text needs them). */
@Injectable()
export class PaletteSource {
  private readonly document = inject(DOCUMENT);
  private readonly current = signal<Palette>(readPalette(this.document.documentElement), {
    // Fonts that arrive change the picture though not the colours.
    equal: () => false,
  });
  readonly palette = this.current.asReadonly();

  constructor() {
    const theme = inject(Theme);
    const read = (): void => this.current.set(readPalette(this.document.documentElement));
    effect(() => {
      theme.choice();
      // The attribute is set by now; styles follow in the next frame.
      requestAnimationFrame(read);
    });
    const stop = new AbortController();
    for (const query of ['(prefers-color-scheme: dark)', '(forced-colors: active)']) {
      matchMedia(query).addEventListener('change', () => requestAnimationFrame(read), {
        signal: stop.signal,
      });
    }
    inject(DestroyRef).onDestroy(() => stop.abort());
    const fonts = ['600 14px "JetBrains Mono"', '500 12px "JetBrains Mono"', '400 11px "Instrument Sans"'];
    void Promise.all(fonts.map((font) => this.document.fonts?.load(font, 'Δ4D±'))).then(
      read,
      () => undefined,
    );
  }
}
