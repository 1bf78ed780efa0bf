import { DestroyRef, inject, Injectable } from '@angular/core';
import type { TapeHit } from './drawing/hit-test';
import { TapeStage } from './tape-stage';

/** What the pointer asks of the canvas it works on; px of the canvas, ticks of the tape. */
export interface PointerTarget {
  hit(xPx: number, yPx: number): TapeHit | null;
  ticksAt(xPx: number): number;
  ticksPerPx(): number;
  snap(ticks: number): number;
  moved(xPx: number, yPx: number, hit: TapeHit | null): void;
  drew(span: { fromTicks: number; toTicks: number } | null): void;
  opened(hit: TapeHit): void;
}

interface Point {
  readonly xPx: number;
  readonly yPx: number;
}

type Doing =
  | { readonly kind: 'press'; readonly at: Point; readonly hit: TapeHit | null }
  | { readonly kind: 'pan'; readonly grabTicks: number }
  | { readonly kind: 'draw'; readonly fromTicks: number }
  | { readonly kind: 'divider'; readonly name: 'a' | 'b' }
  | { readonly kind: 'pinch'; readonly leftTicks: number; readonly rightTicks: number };

/** Farther than this a press is a drag, px. */
const SLOP_PX = 4;
/** One notch of a wheel zooms by this. */
const NOTCH = 1.2;
const NOTCH_PX = 100;

/** The place of the canvas is asked for this seldom while events come thick: asking makes the browser lay out the page at once. */
const BOX_MS = 250;

/** Wheel zooms at the pointer, drag pans, drag in the ruler selects a window, two fingers pinch, dividers snap to edges. */
@Injectable()
export class TapePointer {
  private readonly stage = inject(TapeStage);
  private readonly stopping = new AbortController();
  private readonly fingers = new Map<number, Point>();
  private doing: Doing | null = null;
  private box = { left: 0, top: 0 };
  private boxUntil = 0;
  private element!: HTMLElement;
  private target!: PointerTarget;

  constructor() {
    inject(DestroyRef).onDestroy(() => this.stopping.abort());
  }

  attach(element: HTMLElement, target: PointerTarget): void {
    this.element = element;
    this.target = target;
    const options = { signal: this.stopping.signal };
    element.addEventListener('pointerdown', (event) => this.down(event), options);
    element.addEventListener('pointermove', (event) => this.move(event), options);
    element.addEventListener('pointerup', (event) => this.up(event), options);
    element.addEventListener('pointercancel', (event) => this.cancel(event), options);
    element.addEventListener('dblclick', (event) => this.twice(event), options);
    element.addEventListener('wheel', (event) => this.wheel(event), { ...options, passive: false });
  }

  private down(event: PointerEvent): void {
    if (event.button !== 0) return;
    const at = this.pointOf(event);
    this.fingers.set(event.pointerId, at);
    this.element.setPointerCapture(event.pointerId);
    if (this.fingers.size === 2) {
      const [left, right] = this.sortedFingers();
      this.doing = {
        kind: 'pinch',
        leftTicks: this.target.ticksAt(left.xPx),
        rightTicks: this.target.ticksAt(right.xPx),
      };
      return;
    }
    const hit = this.target.hit(at.xPx, at.yPx);
    this.doing =
      hit?.kind === 'divider' ? { kind: 'divider', name: hit.divider } : { kind: 'press', at, hit };
  }

  private move(event: PointerEvent): void {
    const at = this.pointOf(event);
    if (this.fingers.has(event.pointerId)) this.fingers.set(event.pointerId, at);
    const doing = this.doing;
    switch (doing?.kind) {
      case undefined:
        this.target.moved(at.xPx, at.yPx, this.target.hit(at.xPx, at.yPx));
        break;
      case 'press':
        if (Math.abs(at.xPx - doing.at.xPx) > SLOP_PX || Math.abs(at.yPx - doing.at.yPx) > SLOP_PX)
          this.startDrag(doing.at, doing.hit);
        break;
      case 'pan':
        this.panTo(doing.grabTicks, at.xPx);
        break;
      case 'draw':
        this.target.drew({ fromTicks: doing.fromTicks, toTicks: this.target.ticksAt(at.xPx) });
        break;
      case 'divider': {
        const ticks = this.target.ticksAt(at.xPx);
        this.stage.setDivider(doing.name, this.bounded(event.altKey ? ticks : this.target.snap(ticks)));
        break;
      }
      case 'pinch':
        this.pinch(doing.leftTicks, doing.rightTicks);
        break;
    }
  }

  private up(event: PointerEvent): void {
    const at = this.pointOf(event);
    const doing = this.doing;
    this.fingers.delete(event.pointerId);
    this.doing = null;
    if (doing?.kind === 'press') this.click(doing.hit);
    if (doing?.kind === 'draw') {
      this.target.drew(null);
      const to = this.target.ticksAt(at.xPx);
      this.stage.moveTo({
        startTicks: Math.min(doing.fromTicks, to),
        endTicks: Math.max(doing.fromTicks, to),
      });
    }
  }

  private cancel(event: PointerEvent): void {
    this.fingers.delete(event.pointerId);
    this.doing = null;
    this.target.drew(null);
  }

  private startDrag({ xPx }: Point, hit: TapeHit | null): void {
    const ticks = this.target.ticksAt(xPx);
    this.doing =
      hit?.kind === 'ruler' ? { kind: 'draw', fromTicks: ticks } : { kind: 'pan', grabTicks: ticks };
  }

  private click(hit: TapeHit | null): void {
    switch (hit?.kind) {
      case 'finding':
      case 'packet':
      case 'character':
      case 'reset':
        this.stage.select({ kind: hit.kind, index: hit.index });
        break;
      case 'edge-reference':
        this.stage.edgeReference.update((now) => (now === 'measured' ? 'nominal' : 'measured'));
        break;
      case 'go-to': {
        const { startTicks, endTicks } = this.stage.window();
        const half = (endTicks - startTicks) / 2;
        this.stage.moveTo({ startTicks: hit.ticks - half, endTicks: hit.ticks + half });
        break;
      }
      case undefined:
      case 'edge':
        this.stage.releaseDivider();
        break;
      default:
        break;
    }
    if (hit !== null) this.target.opened(hit);
  }

  private twice(event: MouseEvent): void {
    const at = this.pointOf(event);
    const hit = this.target.hit(at.xPx, at.yPx);
    if (hit?.kind === 'packet' || hit?.kind === 'reset' || hit?.kind === 'finding')
      this.stage.fit({ kind: hit.kind, index: hit.index });
  }

  private wheel(event: WheelEvent): void {
    event.preventDefault();
    const at = this.pointOf(event);
    const { startTicks, endTicks } = this.stage.window();
    const sideways = event.shiftKey ? event.deltaY : event.deltaX;
    if (Math.abs(sideways) > Math.abs(event.shiftKey ? 0 : event.deltaY)) {
      const shift = sideways * this.target.ticksPerPx();
      this.stage.set({ startTicks: startTicks + shift, endTicks: endTicks + shift });
    } else {
      const px = event.deltaMode === WheelEvent.DOM_DELTA_LINE ? event.deltaY * 34 : event.deltaY;
      this.stage.zoom(NOTCH ** (-px / NOTCH_PX), this.target.ticksAt(at.xPx));
    }
  }

  private panTo(grabTicks: number, xPx: number): void {
    const shift = grabTicks - this.target.ticksAt(xPx);
    const { startTicks, endTicks } = this.stage.window();
    this.stage.set({ startTicks: startTicks + shift, endTicks: endTicks + shift });
  }

  /** The instants under both fingers stay under them. */
  private pinch(leftTicks: number, rightTicks: number): void {
    if (this.fingers.size !== 2 || rightTicks - leftTicks <= 0) return;
    const [left, right] = this.sortedFingers();
    const perPx = (rightTicks - leftTicks) / Math.max(20, right.xPx - left.xPx);
    const { startTicks, endTicks } = this.stage.window();
    const before = this.target.ticksPerPx();
    const edgePx = left.xPx - (this.target.ticksAt(left.xPx) - startTicks) / before;
    const from = leftTicks - (left.xPx - edgePx) * perPx;
    this.stage.set({ startTicks: from, endTicks: from + ((endTicks - startTicks) / before) * perPx });
  }

  private sortedFingers(): [Point, Point] {
    const [one, other] = [...this.fingers.values()];
    return one.xPx <= other.xPx ? [one, other] : [other, one];
  }

  private bounded(ticks: number): number {
    return Math.min(Math.max(0, ticks), this.stage.model()?.tape.endTicks ?? 0);
  }

  private pointOf(event: MouseEvent): Point {
    if (performance.now() > this.boxUntil) {
      this.box = this.element.getBoundingClientRect();
      this.boxUntil = performance.now() + BOX_MS;
    }
    return { xPx: event.clientX - this.box.left, yPx: event.clientY - this.box.top };
  }
}
