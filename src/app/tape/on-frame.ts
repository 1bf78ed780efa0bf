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

/**
 * The same, but while changes come one after the other it paints only every `restMs`: for what stands beside the thing that moves.
 * Call in an injection context.
 */
export function onRest<T>(restMs: number, read: () => T, paint: (value: T) => void): void {
  let timer: ReturnType<typeof setTimeout> | undefined;
  let newest: T;
  let paintedAt = -Infinity;
  const run = (): void => {
    timer = undefined;
    paintedAt = performance.now();
    paint(newest);
  };
  effect(() => {
    newest = read();
    if (timer !== undefined) return;
    const waitMs = Math.max(0, paintedAt + restMs - performance.now());
    timer = setTimeout(run, waitMs === 0 ? 0 : restMs);
  });
  inject(DestroyRef).onDestroy(() => clearTimeout(timer));
}
