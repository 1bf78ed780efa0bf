import { computed, Injectable, signal } from '@angular/core';
import { countBefore, countUpTo } from '#shared/time/sorted-search';
import { describe } from './drawing/describe';
import { stepToEdge } from './drawing/hit-test';
import type { LaneId } from './drawing/lanes';
import { readOut } from './drawing/read-out';
import { spanOf } from './drawing/selection-places';
import type { TapeModel } from './drawing/tape-model';
import type { TapeWindow } from './drawing/time-scale';
import { pxPerBit } from './drawing/time-scale';
import type { TapeSelection } from './drawing/view';
import {
  clampWindow,
  fitWindow,
  panBy,
  stepFactor,
  windowAtScale,
  windowLimits,
  zoomAt,
} from './drawing/zoom';

const NOWHERE: TapeWindow = { startTicks: 0, endTicks: 1 };
/** Length of a window's move, ms. Source: design 11. */
const MOVE_MS = 180;
/** Scale of the key for the handshake and of the key for edges, px a bit. Source: design 8. */
export const HANDSHAKE_PX = 10;
export const EDGES_PX = 30;

export interface Dividers {
  readonly a: number | null;
  readonly b: number | null;
}

/** Where somebody is on a tape and what they have selected there: window, selection, dividers. Tape, tables and drawer share it. */
@Injectable()
export class TapeStage {
  private readonly shown = signal<TapeModel | null>(null);
  private readonly frame = signal<TapeWindow>(NOWHERE);
  private readonly chosen = signal<TapeSelection | null>(null);
  private readonly blades = signal<Dividers>({ a: null, b: null });
  private readonly held = signal<'a' | 'b' | null>(null);
  private readonly pointed = signal<number | null>(null);
  private readonly paper = signal(900);
  private readonly hidden = signal<readonly LaneId[]>([]);
  private animation = 0;
  /** Where a move under way leads; decisions must not be made from the middle of it. */
  private goal: TapeWindow | null = null;

  readonly model = this.shown.asReadonly();
  readonly window = this.frame.asReadonly();
  readonly selection = this.chosen.asReadonly();
  readonly dividers = this.blades.asReadonly();
  /** The divider the arrow keys move. */
  readonly activeDivider = this.held.asReadonly();
  /** The packet under the pointer, on whichever picture. */
  readonly hoverPacket = this.pointed.asReadonly();
  readonly paperPx = this.paper.asReadonly();
  readonly hiddenLanes = this.hidden.asReadonly();
  /** All resets one below the other instead of the tape. */
  readonly isStacked = signal(false);
  readonly edgeReference = signal<'measured' | 'nominal'>('measured');

  readonly perBit = computed(() => {
    const model = this.shown();
    return model === null ? 0 : pxPerBit(model.tape, this.frame(), this.paper());
  });
  readonly readOut = computed(() => {
    const model = this.shown();
    return model === null ? null : readOut(model, this.blades());
  });
  /** The selected thing in words. */
  readonly said = computed(() => {
    const model = this.shown();
    const selection = this.chosen();
    return model === null || selection === null ? '' : describe(model, selection);
  });

  /** Shows another model; the window stays where it is the same tape. */
  show(model: TapeModel): void {
    const before = this.shown();
    this.shown.set(model);
    if (before?.tape === model.tape) {
      // Findings of another check have other indexes.
      if (this.chosen()?.kind === 'finding') this.chosen.set(null);
      return;
    }
    this.chosen.set(null);
    this.blades.set({ a: null, b: null });
    this.frame.set({ startTicks: 0, endTicks: Math.max(1, model.tape.endTicks) });
  }

  setPaper(widthPx: number): void {
    const px = Math.max(50, widthPx);
    if (px === this.paper()) return;
    this.paper.set(px);
    const model = this.shown();
    if (model !== null) this.set(this.frame());
  }

  /** At once: what follows the pointer must not lag. */
  set(window: TapeWindow): void {
    const model = this.shown();
    if (model === null) return;
    cancelAnimationFrame(this.animation);
    this.goal = null;
    this.frame.set(clampWindow(window, windowLimits(model.tape, this.paper())));
  }

  /** With a short move, so that the eye can follow. */
  moveTo(window: TapeWindow): void {
    const model = this.shown();
    if (model === null) return;
    const to = clampWindow(window, windowLimits(model.tape, this.paper()));
    if (matchMedia('(prefers-reduced-motion: reduce)').matches) {
      this.set(to);
      return;
    }
    cancelAnimationFrame(this.animation);
    this.goal = to;
    const from = this.frame();
    const startedAt = performance.now();
    const step = (now: number): void => {
      const share = Math.min(1, Math.max(0, (now - startedAt) / MOVE_MS));
      this.frame.set(share === 1 ? to : between(from, to, eased(share)));
      if (share < 1) this.animation = requestAnimationFrame(step);
      else this.goal = null;
    };
    this.animation = requestAnimationFrame(step);
  }

  zoom(factor: number, focusTicks: number, isSmooth = false): void {
    const model = this.shown();
    if (model === null) return;
    const window = zoomAt(
      isSmooth ? this.destination() : this.frame(),
      factor,
      focusTicks,
      windowLimits(model.tape, this.paper()),
    );
    if (isSmooth) this.moveTo(window);
    else this.set(window);
  }

  /** To the next step of the scale. */
  zoomStep(direction: 1 | -1): void {
    this.zoom(stepFactor(this.perBit(), direction), this.focusTicks(), true);
  }

  pan(share: number): void {
    const model = this.shown();
    if (model !== null) this.moveTo(panBy(this.destination(), share, windowLimits(model.tape, this.paper())));
  }

  showAll(): void {
    const model = this.shown();
    if (model !== null) this.moveTo({ startTicks: 0, endTicks: model.tape.endTicks });
  }

  showAtScale(perBit: number, ticks: number): void {
    const model = this.shown();
    if (model !== null) this.moveTo(windowAtScale(model.tape, this.paper(), perBit, ticks));
  }

  /** A window at `perBit` in which the instant stands a fifth from the left. */
  showFrom(perBit: number, ticks: number): void {
    const model = this.shown();
    if (model === null) return;
    const { startTicks, endTicks } = windowAtScale(model.tape, this.paper(), perBit, ticks);
    const shift = (endTicks - startTicks) * 0.3;
    this.moveTo({ startTicks: startTicks + shift, endTicks: endTicks + shift });
  }

  fit(thing: TapeSelection): void {
    const model = this.shown();
    if (model === null) return;
    const { startTicks, endTicks } = spanOf(model, thing);
    this.moveTo(fitWindow(startTicks, endTicks, windowLimits(model.tape, this.paper()), 0.4));
  }

  select(thing: TapeSelection | null): void {
    this.chosen.set(thing);
  }

  /** Selects and brings it into view; keeps the scale unless it is too coarse to see the thing. */
  reveal(thing: TapeSelection): void {
    const model = this.shown();
    if (model === null) return;
    this.chosen.set(thing);
    this.isStacked.set(false);
    const { startTicks, endTicks } = spanOf(model, thing);
    const { startTicks: from, endTicks: to } = this.destination();
    const length = to - from;
    const isLong = endTicks - startTicks > length;
    if (isLong) this.fit(thing);
    else if (startTicks < from + length * 0.05 || endTicks > to - length * 0.05) {
      const middle = (startTicks + endTicks) / 2;
      this.moveTo({ startTicks: middle - length / 2, endTicks: middle + length / 2 });
    }
  }

  /** To the next violation or inconclusive finding in order of time, going round; to any finding where there are none of those. */
  stepFinding(direction: 1 | -1): void {
    const model = this.shown();
    if (model === null || model.findings.length === 0) return;
    const isGrave = (index: number): boolean =>
      model.findings[index].verdict === 'violation' || model.findings[index].verdict === 'inconclusive';
    const order = [...model.findingOrder];
    const graves = order.filter(isGrave);
    const list = graves.length > 0 ? graves : order;
    const selection = this.chosen();
    const at = selection?.kind === 'finding' ? list.indexOf(selection.index) : -1;
    let next: number;
    if (at >= 0) next = (at + direction + list.length) % list.length;
    else {
      const focus = this.edgeOrFocus(direction);
      const later = list.findIndex((index) => model.places[index].ticks > focus);
      const first = later < 0 ? list.length : later;
      next = (direction > 0 ? first : first - 1 + list.length) % list.length;
    }
    this.reveal({ kind: 'finding', index: list[next] });
  }

  /** To the next packet or character, from the selection or from where the focus is. */
  stepThing(kind: 'packet' | 'character', direction: 1 | -1): void {
    const model = this.shown();
    if (model === null) return;
    const starts = kind === 'packet' ? model.packetStarts : model.tape.characters.startTicks;
    const selection = this.chosen();
    const focus = this.edgeOrFocus(direction);
    const index =
      selection?.kind === kind
        ? selection.index + direction
        : direction > 0
          ? countUpTo(starts, focus)
          : countBefore(starts, focus) - 1;
    if (index >= 0 && index < starts.length) this.reveal({ kind, index });
  }

  setDivider(name: 'a' | 'b', ticks: number | null): void {
    this.blades.update((dividers) => ({ ...dividers, [name]: ticks }));
    this.held.set(ticks === null ? null : name);
  }

  setDividers(dividers: Dividers): void {
    this.blades.set(dividers);
  }

  swapDividers(): void {
    this.blades.update(({ a, b }) => ({ a: b, b: a }));
  }

  clearDividers(): void {
    this.blades.set({ a: null, b: null });
    this.held.set(null);
  }

  releaseDivider(): void {
    this.held.set(null);
  }

  /** The divider in hand goes from edge to edge, or by one sample. */
  stepDivider(direction: 1 | -1, byWhat: 'edge' | 'sample'): void {
    const model = this.shown();
    const name = this.held();
    if (model === null || name === null) return;
    const at = this.blades()[name];
    if (at === null) return;
    const next =
      byWhat === 'edge'
        ? stepToEdge(model, at, direction)
        : at + direction * Math.max(1, model.tape.resolutionTicks);
    this.setDivider(name, Math.min(Math.max(0, next), model.tape.endTicks));
    this.keepInView(next);
  }

  hover(packet: number | null): void {
    if (packet !== this.pointed()) this.pointed.set(packet);
  }

  setHiddenLanes(lanes: readonly LaneId[]): void {
    this.hidden.set(lanes);
  }

  /** The window in which a move under way will end. */
  private destination(): TapeWindow {
    return this.goal ?? this.frame();
  }

  /** Where keys act: the selection if it is in view, the divider in hand, else the middle. */
  focusTicks(): number {
    const model = this.shown();
    const { startTicks, endTicks } = this.destination();
    const isIn = (ticks: number): boolean => ticks >= startTicks && ticks <= endTicks;
    const divider = this.held();
    const blade = divider === null ? null : this.blades()[divider];
    if (blade !== null && isIn(blade)) return blade;
    const selection = this.chosen();
    if (model !== null && selection !== null) {
      const at =
        selection.kind === 'finding'
          ? model.places[selection.index].ticks
          : spanOf(model, selection).startTicks;
      if (isIn(at)) return at;
    }
    return (startTicks + endTicks) / 2;
  }

  /** With nothing in hand a walk begins at the edge of the window. */
  private edgeOrFocus(direction: 1 | -1): number {
    if (this.chosen() !== null || this.held() !== null) return this.focusTicks();
    const { startTicks, endTicks } = this.destination();
    return direction > 0 ? startTicks - 1 : endTicks + 1;
  }

  private keepInView(ticks: number): void {
    const { startTicks, endTicks } = this.destination();
    if (ticks >= startTicks && ticks <= endTicks) return;
    const half = (endTicks - startTicks) / 2;
    this.moveTo({ startTicks: ticks - half, endTicks: ticks + half });
  }
}

/** On the way between two windows; lengths go in proportion, so that a zoom keeps its pace. */
function between(from: TapeWindow, to: TapeWindow, share: number): TapeWindow {
  const [a, b] = [from.endTicks - from.startTicks, to.endTicks - to.startTicks];
  const length = a * (b / a) ** share;
  const part = a === b ? share : (length - a) / (b - a);
  const middle =
    (from.startTicks + from.endTicks) / 2 +
    part * ((to.startTicks + to.endTicks) / 2 - (from.startTicks + from.endTicks) / 2);
  return { startTicks: middle - length / 2, endTicks: middle + length / 2 };
}

/** Near to cubic-bezier(.2, 0, 0, 1): quick at first, then gentle. */
function eased(share: number): number {
  return 1 - (1 - share) ** 3;
}
