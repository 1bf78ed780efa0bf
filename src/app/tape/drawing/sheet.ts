import type { FindingView } from '#shared/contract/http/checks';
import { layOutHeads } from './finding-heads';
import type { FindingHead } from './finding-heads';
import type { LaneId, LaneLayout } from './lanes';
import { layOutPackets } from './packet-marks';
import type { LaneMark } from './packet-marks';
import { ringCounts, stickScale } from './packet-vectors';
import type { Palette } from './palette';
import { Pen } from './pen';
import { scaleAt } from './scales';
import type { ScaleName } from './scales';
import type { TapeModel } from './tape-model';
import type { TimeScale } from './time-scale';
import { pxPerBit } from './time-scale';
import type { TapeView } from './view';
import { paperWidth, timeScaleOf } from './view';

/** Everything a painter of one frame needs. */
export interface Sheet {
  readonly pen: Pen;
  readonly ctx: CanvasRenderingContext2D;
  readonly model: TapeModel;
  readonly view: TapeView;
  readonly lanes: readonly LaneLayout[];
  readonly palette: Palette;
  readonly scale: TimeScale;
  readonly pxPerBit: number;
  readonly scaleName: ScaleName;
  /** Left and right edge of the paper, px. */
  readonly leftPx: number;
  readonly rightPx: number;
  /** Heads and marks of this frame, laid out when first asked for. */
  readonly heads: () => readonly FindingHead[];
  readonly marks: () => readonly LaneMark[];
  /** Counts of the ring, and px a count of movements without one. */
  readonly ring: () => number;
  readonly stick: () => number;
}

export function makeSheet(
  ctx: CanvasRenderingContext2D,
  model: TapeModel,
  view: TapeView,
  lanes: readonly LaneLayout[],
  palette: Palette,
): Sheet {
  const perBit = pxPerBit(model.tape, view.window, paperWidth(view));
  return {
    pen: new Pen(ctx),
    ctx,
    model,
    view,
    lanes,
    palette,
    scale: timeScaleOf(view),
    pxPerBit: perBit,
    scaleName: scaleAt(perBit),
    leftPx: view.gutterPx,
    rightPx: view.widthPx,
    heads: once(() => withLane(lanes, 'findings', (lane) => layOutHeads(model, view, lane))),
    marks: once(() => withLane(lanes, 'packets', (lane) => layOutPackets(model, view, lane))),
    ring: once(() => ringCounts(model, view)),
    stick: once(() => {
      const lane = lanes.find((candidate) => candidate.id === 'packets');
      return lane === undefined ? 1 : stickScale(model, view, perBit, lane.heightPx);
    }),
  };
}

function once<T>(make: () => T): () => T {
  let made: { readonly value: T } | undefined;
  return () => (made ??= { value: make() }).value;
}

function withLane<T>(
  lanes: readonly LaneLayout[],
  id: LaneId,
  layOut: (lane: LaneLayout) => readonly T[],
): readonly T[] {
  const lane = lanes.find((candidate) => candidate.id === id);
  return lane === undefined ? [] : layOut(lane);
}

export function laneOf(sheet: Pick<Sheet, 'lanes'>, id: LaneId): LaneLayout | undefined {
  return sheet.lanes.find((lane) => lane.id === id);
}

export function bottomOf(lane: LaneLayout): number {
  return lane.topPx + lane.heightPx;
}

export function middleOf(lane: LaneLayout): number {
  return lane.topPx + lane.heightPx / 2;
}

type Judged = FindingView['verdict'] | null;

/** The ink of a verdict; plain ink where nothing was judged. */
export function inkOf(palette: Palette, verdict: Judged): string {
  switch (verdict) {
    case 'violation':
      return palette.violation;
    case 'inconclusive':
      return palette.open;
    case 'pass':
      return palette.pass;
    default:
      return palette.ink3;
  }
}

/** Ground and text of a plate in a verdict's colour. */
export function plateColours(palette: Palette, verdict: Judged): { ground: string; text: string } {
  switch (verdict) {
    case 'violation':
      return { ground: palette.violationContainer, text: palette.onViolationContainer };
    case 'inconclusive':
      return { ground: palette.openContainer, text: palette.onOpenContainer };
    case 'pass':
      return { ground: palette.passContainer, text: palette.onPassContainer };
    default:
      return { ground: palette.tint, text: palette.ink };
  }
}

/** Runs a painter with everything outside the paper cut off. */
export function onPaper(sheet: Sheet, paint: () => void): void {
  const { ctx, leftPx, rightPx, view } = sheet;
  ctx.save();
  ctx.beginPath();
  ctx.rect(leftPx, 0, rightPx - leftPx, view.heightPx);
  ctx.clip();
  paint();
  ctx.restore();
}
