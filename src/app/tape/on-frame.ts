import { DestroyRef, effect, inject } from '@angular/core';

/**
 * Runs `paint` at most once a frame, whenever a signal it reads has changed; only the newest state is painted. Call in an injection
 * context.
 * @param read reads every signal the painting depends on
 */
export function onFrame<T>(read: () => T, paint: (value: T) => void): void {
  let frame = 0;
  let newest: T;
  effect(() => {
    newest = read();
    if (frame !== 0) return;
    frame = requestAnimationFrame(() => {
      frame = 0;
      paint(newest);
    });
  });
  inject(DestroyRef).onDestroy(() => cancelAnimationFrame(frame));
}
