import { indexesTouching } from './column-search';
import type { LaneLayout } from './lanes';
import { FLAG_FROM_PX, hasFlags } from './packet-vectors';
import type { Rect } from './pen';
import { plateSize } from './plate-words';
import { scaleAt } from './scales';
import type { TapeModel } from './tape-model';
import { pxPerBit } from './time-scale';
import type { TapeView } from './view';
import { paperWidth, timeScaleOf } from './view';

/** How much of a packet is drawn: flag with figures, flag with the ring alone, or an arrow. */
export type PacketForm = 'flag' | 'figures' | 'ring' | 'arrow';

interface Mark {
  /** Begin and end of the bracket, px; may lie outside the paper. */
  readonly x0: number;
  readonly x1: number;
}

/** A packet in the Packets lane. */
export interface PacketMark extends Mark {
  readonly kind: 'packet';
  readonly index: number;
  readonly form: PacketForm;
  /** Of the flag; for an arrow its slot. */
  readonly rect: Rect;
}

/** The nameplate of an identification; small: a single frame with the name alone. */
export interface PlateMark extends Mark {
  readonly kind: 'plate';
  /** Index of the reset. */
  readonly index: number;
  readonly isSmall: boolean;
  readonly rect: Rect;
}

/** Characters that made no packet. `hasFrame`: there is room for the reason. */
export interface IncidentMark extends Mark {
  readonly kind: 'incident';
  readonly index: number;
  readonly hasFrame: boolean;
  readonly rect: Rect;
}

export type LaneMark = PacketMark | PlateMark | IncidentMark;

/** Source: design 6, lane Packets. */
export const BRACKET_PX = 9;
export const FLAG_TOP_PX = 19;
const MOST_FLAG_PX = 58;
const FLAG_PX = { plain: 136, wheel: 158 };
const FIGURES_PX = 112;
const STICKY_PX = 10;
const STICKY_FROM_PX = 160;
const INCIDENT_PX = 136;
const SMALL_PLATE = { width: 24, height: 16, apart: 30 };

/** Everything the Packets lane names in the window, in order of time. Empty in the survey but for the nameplates. */
export function layOutPackets(model: TapeModel, view: TapeView, lane: LaneLayout): LaneMark[] {
  const perBit = pxPerBit(model.tape, view.window, paperWidth(view));
  if (scaleAt(perBit) === 'survey') return smallPlates(model, view, lane);
  const raw = collect(model, view);
  const canFlag = hasFlags(model, perBit);
  const marks = raw.map((mark, i) => {
    const next = raw[i + 1]?.x0 ?? Infinity;
    return place(model, view, lane, mark, next, canFlag);
  });
  return marks.filter((mark) => mark.x0 <= view.widthPx);
}

interface RawMark extends Mark {
  readonly kind: LaneMark['kind'];
  readonly index: number;
}

function collect(model: TapeModel, view: TapeView): RawMark[] {
  const scale = timeScaleOf(view);
  const { startTicks, endTicks } = view.window;
  const marks: RawMark[] = [];
  const add = (kind: RawMark['kind'], starts: Float64Array, ends: Float64Array): void => {
    const { first, end } = indexesTouching(starts, ends, startTicks, endTicks);
    // One more on the right: it tells the last one in view how much room it has.
    for (let i = first; i < Math.min(end + 1, starts.length); i++) {
      marks.push({ kind, index: i, x0: scale.xOf(starts[i]), x1: scale.xOf(ends[i]) });
    }
  };
  add('packet', model.packetStarts, model.packetEnds);
  add('incident', model.incidentStarts, model.incidentEnds);
  for (const plate of platesIn(model, view)) marks.push(plate);
  return marks.sort((a, b) => a.x0 - b.x0);
}

function platesIn(model: TapeModel, view: TapeView): RawMark[] {
  const scale = timeScaleOf(view);
  const plates: RawMark[] = [];
  model.tape.resets.forEach((reset, index) => {
    if (reset.identity === null || reset.identification.length === 0) return;
    const start = model.tape.characters.startTicks[reset.identification[0]];
    const end = reset.identificationEndTicks ?? start;
    const x0 = scale.xOf(start);
    if (scale.xOf(end) < view.gutterPx - 200 || x0 > view.widthPx + 400) return;
    plates.push({ kind: 'plate', index, x0, x1: scale.xOf(end) });
  });
  return plates;
}

function place(
  model: TapeModel,
  view: TapeView,
  lane: LaneLayout,
  mark: RawMark,
  nextX: number,
  canFlag: boolean,
): LaneMark {
  const room = nextX - mark.x0 - 2;
  const height = Math.min(MOST_FLAG_PX, lane.heightPx - 26);
  const top = lane.topPx + FLAG_TOP_PX;
  switch (mark.kind) {
    case 'packet': {
      const form = canFlag ? formFor(model, mark, room) : 'arrow';
      const width = form === 'arrow' ? mark.x1 - mark.x0 : widthOf(model, form, height);
      const x = stickyX(view, mark, width, nextX);
      return { ...mark, kind: 'packet', form, rect: { x, y: top, width, height } };
    }
    case 'plate': {
      const size = plateSize(model.tape.resets[mark.index], height);
      const isSmall = mark.x1 - mark.x0 < FLAG_FROM_PX || room < size.width;
      const rect = isSmall
        ? { x: mark.x0, y: top, width: SMALL_PLATE.width, height: SMALL_PLATE.height }
        : { x: stickyX(view, mark, size.width, nextX), y: top, width: size.width, height };
      return { ...mark, kind: 'plate', isSmall, rect };
    }
    case 'incident': {
      const hasFrame = canFlag && room >= INCIDENT_PX;
      const x = hasFrame ? stickyX(view, mark, INCIDENT_PX, nextX) : mark.x0;
      const width = hasFrame ? INCIDENT_PX : mark.x1 - mark.x0;
      return { ...mark, kind: 'incident', hasFrame, rect: { x, y: top, width, height } };
    }
  }
}

function formFor(model: TapeModel, mark: Mark, room: number): PacketForm {
  if (mark.x1 - mark.x0 < FLAG_FROM_PX - 1) return 'arrow';
  const full = model.tape.packets.hasWheel ? FLAG_PX.wheel : FLAG_PX.plain;
  if (room >= full) return 'flag';
  return room >= FIGURES_PX ? 'figures' : 'ring';
}

function widthOf(model: TapeModel, form: PacketForm, heightPx: number): number {
  if (form === 'flag') return model.tape.packets.hasWheel ? FLAG_PX.wheel : FLAG_PX.plain;
  return form === 'figures' ? FIGURES_PX : heightPx + 10;
}

/** A flag whose packet began left of the window stays at its left edge while enough of the packet shows. */
function stickyX(view: TapeView, mark: Mark, widthPx: number, nextX: number): number {
  const sticky = view.gutterPx + STICKY_PX;
  if (mark.x0 >= sticky) return mark.x0;
  const shows = Math.min(mark.x1, nextX) - view.gutterPx;
  if (mark.x0 >= view.gutterPx || shows < Math.max(STICKY_FROM_PX, widthPx + 2)) return mark.x0;
  return sticky;
}

function smallPlates(model: TapeModel, view: TapeView, lane: LaneLayout): PlateMark[] {
  const marks: PlateMark[] = [];
  let takenTo = -Infinity;
  for (const mark of platesIn(model, view)) {
    const x = Math.max(mark.x0 - 1, view.gutterPx + 2);
    if (mark.x0 < view.gutterPx - 1 || mark.x0 > view.widthPx || x < takenTo) continue;
    takenTo = x + SMALL_PLATE.apart;
    const rect = { x, y: lane.topPx + 8, width: SMALL_PLATE.width, height: SMALL_PLATE.height };
    marks.push({ ...mark, kind: 'plate', isSmall: true, rect });
  }
  return marks;
}
