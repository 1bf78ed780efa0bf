import { DestroyRef, inject, signal } from '@angular/core';

/** Paints closer together than this belong to one movement, ms. */
const MOVEMENT_MS = 120;
/** A gap longer than this between two paints of a movement is a missed frame, ms. */
const MISSED_MS = 25;
const MISSES = 2;
const REST_MS = 160;

/**
 * Watches how a movement goes. Where frames are missed on a screen with several device pixels to a px, it asks for one to one until
 * the movement rests: a little coarser for a moment, but in step with the hand. Make it in an injection context.
 */
export class PaintPace {
  private readonly coarse = signal(false);
  private timer: ReturnType<typeof setTimeout> | undefined;
  private lastAt = -Infinity;
  private misses = 0;

  /** Whether to paint one device pixel to a px. */
  readonly isCoarse = this.coarse.asReadonly();

  constructor() {
    inject(DestroyRef).onDestroy(() => clearTimeout(this.timer));
  }

  /** Tells that a frame is painted now. */
  painted(nowMs = performance.now()): void {
    const gap = nowMs - this.lastAt;
    this.lastAt = nowMs;
    if (gap > MOVEMENT_MS) this.misses = 0;
    else if (gap > MISSED_MS) this.misses += 1;
    if (this.misses >= MISSES) this.coarse.set(true);
    if (!this.coarse()) return;
    clearTimeout(this.timer);
    this.timer = setTimeout(() => {
      this.misses = 0;
      this.coarse.set(false);
    }, REST_MS);
  }
}
