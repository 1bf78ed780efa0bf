import { judgeAtMost } from '#shared/rules/verdict';
import type { Judgement } from '#shared/rules/verdict';
import { charactersIn } from './characters-in-view';
import { edgesOfCharacter } from './edge-places';
import type { PlacedEdge } from './edge-places';
import type { LaneLayout } from './lanes';
import type { TapeModel } from './tape-model';
import type { TapeView } from './view';

/** An edge of the Edges lane with what it is judged. */
export interface EdgeStem extends PlacedEdge {
  readonly character: number;
  /** null without a limit. */
  readonly verdict: Judgement | null;
}

/** Percent of a bit shown above and below the zero line, unless the limit needs more. */
const RANGE_PERCENT = 8;
const MARGIN_PX = 18;

/** Where the zero line runs and how tall one percent is. */
export function edgeScale(
  model: TapeModel,
  view: Pick<TapeView, 'edgeReference'>,
  lane: LaneLayout,
): { readonly zeroY: number; readonly pxPerPercent: number; readonly range: number } {
  const range = Math.max(RANGE_PERCENT, 1.6 * (edgeLimit(model, view) ?? 0));
  return {
    zeroY: lane.topPx + lane.heightPx / 2,
    pxPerPercent: (lane.heightPx / 2 - MARGIN_PX) / range,
    range,
  };
}

/** The limit that goes with the due places, percent of a bit: of FRM-8 at the measured rate, of FRM-2 at the nominal. */
export function edgeLimit(model: TapeModel, view: Pick<TapeView, 'edgeReference'>): number | null {
  const { distortionLimit, grossDistortionLimit } = model.limits;
  return view.edgeReference === 'nominal' ? grossDistortionLimit : distortionLimit;
}

/** What the due places are taken from, in words. */
export function referenceName(view: TapeView): string {
  return view.edgeReference === 'nominal' ? 'nominal rate' : 'measured rate';
}

/** One sample in percent of a bit: the difference of two edges is known to this. Source: rules.md 1, uncertainty of time. */
export function samplePercent(model: TapeModel): number {
  return (100 * model.tape.resolutionTicks) / model.nominalBitTicks;
}

/** The edges in view, each against its due place. */
export function layOutEdges(model: TapeModel, view: TapeView): EdgeStem[] {
  const { data } = model.lines;
  if (data === undefined) return [];
  const unit = view.edgeReference === 'nominal' ? model.nominalBitTicks : model.bitTicks;
  const limit = edgeLimit(model, view);
  const doubt = samplePercent(model);
  const { first, end } = charactersIn(model, view.window.startTicks, view.window.endTicks);
  const stems: EdgeStem[] = [];
  for (let c = first; c < end; c++) {
    for (const edge of edgesOfCharacter(model.tape, data, c, model.bitTicks, unit)) {
      const verdict =
        limit === null ? null : judgeAtMost(Math.abs(edge.displacement), doubt, limit, 'guarded');
      stems.push({ ...edge, character: c, verdict });
    }
  }
  return stems;
}
