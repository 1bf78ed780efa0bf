import { DestroyRef, Directive, effect, inject, input, output, signal } from '@angular/core';

const TIME_MS = 6000;

/** Tells when something has been seen long enough. The clock stands still while the pointer or the focus is on it. */
@Directive({
  selector: '[lwClosesByItself]',
  host: {
    '(mouseenter)': 'isHeld.set(true)',
    '(mouseleave)': 'isHeld.set(false)',
    '(focusin)': 'isHeld.set(true)',
    '(focusout)': 'isHeld.set(false)',
  },
})
export class ClosesByItself {
  readonly lwClosesByItself = input.required<boolean>();
  readonly timeUp = output();
  protected readonly isHeld = signal(false);

  constructor() {
    let timer: ReturnType<typeof setTimeout> | undefined;
    effect(() => {
      clearTimeout(timer);
      if (this.lwClosesByItself() && !this.isHeld()) timer = setTimeout(() => this.timeUp.emit(), TIME_MS);
    });
    inject(DestroyRef).onDestroy(() => clearTimeout(timer));
  }
}
