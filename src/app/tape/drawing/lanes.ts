import { paperWidth } from './view';
import type { TapeView } from './view';
import { hasFlags, ringCounts, stickPin, stickScale } from './packet-vectors';
import { FROM, scaleAt } from './scales';
import type { ScaleName } from './scales';
import type { TapeModel } from './tape-model';
import { pxPerBit } from './time-scale';

export type LaneId =
  | 'time'
  | 'dividers'
  | 'rts'
  | 'dtr'
  | 'txd'
  | 'dsr'
  | 'supply'
  | 'contact'
  | 'ready'
  | 'reply'
  | 'data'
  | 'edges'
  | 'lineUse'
  | 'packets'
  | 'held'
  | 'findings';

export interface LaneLayout {
  readonly id: LaneId;
  readonly topPx: number;
  readonly heightPx: number;
  readonly name: string;
  /** Empty where there is none. */
  readonly subName: string;
}

/** Order from top to bottom. */
export const LANE_ORDER: readonly LaneId[] = [
  'time',
  'dividers',
  'rts',
  'dtr',
  'txd',
  'dsr',
  'supply',
  'contact',
  'ready',
  'reply',
  'data',
  'edges',
  'lineUse',
  'packets',
  'held',
  'findings',
];

const NAMES: Readonly<Record<LaneId, string>> = {
  time: 'Time',
  dividers: 'Dividers',
  rts: 'RTS',
  dtr: 'DTR',
  txd: 'TXD',
  dsr: 'DSR',
  supply: 'Supply',
  contact: 'Contact',
  ready: 'Ready',
  reply: 'Reply',
  data: 'Data',
  edges: 'Edges',
  lineUse: 'Line use',
  packets: 'Packets',
  held: 'Held',
  findings: 'Findings',
};

type Heights = Partial<Record<LaneId, number>>;

const control = (height: number): Heights => ({
  dtr: height,
  txd: height,
  dsr: height,
  supply: height,
  contact: height,
  ready: height,
});

/** px. A lane without a height is not shown. Source: design 6 and 16.8; the lower sets from the pictures tape-edges and tape-narrow. */
const CLOSE_UP: Heights = {
  time: 36,
  dividers: 24,
  rts: 38,
  ...control(30),
  reply: 48,
  data: 104,
  packets: 92,
  held: 46,
  findings: 44,
};
const CLOSE_UP_LOW: Heights = {
  ...CLOSE_UP,
  rts: 36,
  ...control(26),
  reply: 46,
  data: 98,
  packets: 84,
  held: 42,
  findings: 38,
};
const EDGES: Heights = { ...CLOSE_UP, edges: 124 };
const EDGES_LOW: Heights = {
  time: 36,
  dividers: 24,
  rts: 28,
  ...control(26),
  data: 112,
  edges: 124,
  packets: 72,
  findings: 40,
};
const SURVEY: Heights = {
  time: 28,
  dividers: 24,
  rts: 30,
  ...control(24),
  reply: 28,
  data: 56,
  lineUse: 52,
  packets: 116,
  held: 50,
  findings: 56,
};
const SURVEY_LOW: Heights = { ...SURVEY, packets: 92, held: 46 };
const PHONE: Heights = { time: 34, rts: 34, reply: 46, data: 76, packets: 74, findings: 36 };

/** The lanes in view from top to bottom. Their heights depend on the scale and the canvas, never on where the window stands. */
export function layOutLanes(model: TapeModel, view: TapeView): readonly LaneLayout[] {
  const perBit = pxPerBit(model.tape, view.window, paperWidth(view));
  const scale = scaleAt(perBit);
  const ids = orderedLanes(view).filter((id) => !view.hiddenLanes.includes(id) && isMapped(model, id));
  const heights = chooseHeights(scale, view, ids);
  const lanes: LaneLayout[] = [];
  let topPx = 0;
  for (const id of ids) {
    const heightPx = heights[id];
    if (heightPx === undefined) continue;
    const subName = view.isPhone ? '' : subNameOf(id, model, view, perBit, heightPx);
    lanes.push({ id, topPx, heightPx, name: NAMES[id], subName });
    topPx += heightPx;
  }
  return lanes;
}

/** Height of all lanes together: what the canvas needs to show them whole. */
export function lanesHeight(lanes: readonly LaneLayout[]): number {
  return lanes.reduce((sum, lane) => sum + lane.heightPx, 0);
}

/** The lane at a height of the canvas. */
export function laneAt(lanes: readonly LaneLayout[], yPx: number): LaneLayout | undefined {
  return lanes.find((lane) => yPx >= lane.topPx && yPx < lane.topPx + lane.heightPx);
}

function orderedLanes(view: TapeView): readonly LaneId[] {
  if (view.laneOrder === undefined) return LANE_ORDER;
  const asked = view.laneOrder.filter((id) => LANE_ORDER.includes(id));
  return [...asked, ...LANE_ORDER.filter((id) => !asked.includes(id))];
}

/** RTS stands there even when it is missing, to say so: without it nothing can be said of the handshake. */
function isMapped(model: TapeModel, id: LaneId): boolean {
  switch (id) {
    case 'dtr':
    case 'txd':
    case 'dsr':
    case 'supply':
    case 'contact':
    case 'ready':
      return model.lines[id] !== undefined;
    default:
      return true;
  }
}

/** The first set that fits the canvas, else the lowest. */
function chooseHeights(scale: ScaleName, view: TapeView, ids: readonly LaneId[]): Heights {
  const sets = setsFor(scale, view);
  const sum = (set: Heights): number => ids.reduce((total, id) => total + (set[id] ?? 0), 0);
  return sets.find((set) => sum(set) <= view.heightPx) ?? sets[sets.length - 1];
}

function setsFor(scale: ScaleName, view: TapeView): readonly Heights[] {
  if (view.isPhone) return [PHONE];
  if (scale === 'survey') return [SURVEY, SURVEY_LOW];
  return scale === 'edges' ? [EDGES, EDGES_LOW] : [CLOSE_UP, CLOSE_UP_LOW];
}

function subNameOf(id: LaneId, model: TapeModel, view: TapeView, perBit: number, heightPx: number): string {
  switch (id) {
    case 'time':
      return perBit < FROM.bitRule || model.elements === 0 ? '' : 'bits';
    case 'data':
      return scaleAt(perBit) === 'survey' ? 'line in use' : 'from device';
    case 'txd':
      return 'to device';
    case 'edges':
      return '% of a bit';
    case 'lineUse':
      return 'in motion';
    case 'packets': {
      if (model.tape.packets.count === 0) return '';
      if (!hasFlags(model, perBit)) {
        const { counts } = stickPin(stickScale(model, view, perBit, heightPx));
        return counts === 1 ? '1 count' : `${counts} counts`;
      }
      const ring = `ring ${ringCounts(model, view)}`;
      return view.gutterPx < 90 || ring.length > 7 ? ring : `${ring} counts`;
    }
    default:
      return '';
  }
}
