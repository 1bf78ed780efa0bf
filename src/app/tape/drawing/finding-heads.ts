import { countBefore, countUpTo } from '#shared/time/sorted-search';
import { leadsBefore, shortValue } from './finding-words';
import type { LaneLayout } from './lanes';
import type { Rect } from './pen';
import { scaleAt } from './scales';
import type { TapeModel } from './tape-model';
import type { TextStyle } from './text-measure';
import { textWidth } from './text-measure';
import { pxPerBit } from './time-scale';
import type { TapeView } from './view';
import { paperWidth, timeScaleOf } from './view';

/** A head on the Findings lane: one finding, or several that stand within a few px of each other. */
export interface FindingHead {
  /** The finding that leads: the selected one, else the worst, else the first. Index into the findings. */
  readonly lead: number;
  /** All of them, the lead included. */
  readonly members: readonly number[];
  readonly x: number;
  readonly y: number;
  readonly tier: number;
  readonly isSelected: boolean;
  /** Empty where there is no room for it. */
  readonly code: string;
  readonly value: string;
  /** Plate of the selected head; else the box of glyph and label. */
  readonly box: Rect;
}

export const HEAD_GLYPH_PX = 16;
export const HEAD_TEXT_PX = 13;
export const CODE_STYLE: TextStyle = { face: 'mono', sizePx: 11, weight: 600 };
export const VALUE_STYLE: TextStyle = { face: 'sans', sizePx: 11, weight: 400 };
export const VALUE_GAP_PX = 7;

const PLATE_PX = 22;
/** Pins this near join in the survey. Source: design 8. */
const JOIN_PX = 12;
/** Where one tier has to hold all heads they join as soon as they would touch. */
const TOUCH_PX = 18;
const APART_PX = 6;

interface Pin {
  /** Of the lead: the head stands on its stem. */
  x: number;
  /** Of the first member: the others are within reach of it. */
  readonly firstX: number;
  readonly members: number[];
  lead: number;
  isSelected: boolean;
}

/** The heads in view. Labels never overlap and are never cut: what does not fit is left out. */
export function layOutHeads(model: TapeModel, view: TapeView, lane: LaneLayout): FindingHead[] {
  const isSurvey = scaleAt(pxPerBit(model.tape, view.window, paperWidth(view))) === 'survey';
  const tiers = isSurvey && lane.heightPx >= 50 ? 2 : 1;
  const pins = joinPins(model, view, tiers > 1 ? JOIN_PX : TOUCH_PX);
  const placed: FindingHead[] = [];
  const order = [...pins.keys()].sort(
    (a, b) => Number(pins[b].isSelected) - Number(pins[a].isSelected) || a - b,
  );
  for (const index of order) {
    const head = placeHead(model, view, lane, tiers, pins, index, placed);
    if (head !== undefined) placed.push(head);
  }
  return placed;
}

function joinPins(model: TapeModel, view: TapeView, joinPx: number): Pin[] {
  const scale = timeScaleOf(view);
  const first = countBefore(model.findingTicks, view.window.startTicks);
  const end = countUpTo(model.findingTicks, view.window.endTicks);
  const pins: Pin[] = [];
  for (let i = first; i < end; i++) {
    const index = model.findingOrder[i];
    if (view.isPhone && model.findings[index].verdict === 'pass' && !isChosen(view, index)) continue;
    const x = scale.xOf(model.findingTicks[i]);
    const last = pins.at(-1);
    if (last === undefined || x - last.firstX >= joinPx) {
      pins.push({ x, firstX: x, members: [index], lead: index, isSelected: isChosen(view, index) });
      continue;
    }
    last.members.push(index);
    if (isChosen(view, index)) {
      last.lead = index;
      last.x = x;
      last.isSelected = true;
    } else if (!last.isSelected && leadsBefore(model.findings[index], model.findings[last.lead])) {
      last.lead = index;
      last.x = x;
    }
  }
  return pins;
}

function isChosen(view: TapeView, index: number): boolean {
  return view.selection?.kind === 'finding' && view.selection.index === index;
}

function placeHead(
  model: TapeModel,
  view: TapeView,
  lane: LaneLayout,
  tiers: number,
  pins: readonly Pin[],
  index: number,
  placed: readonly FindingHead[],
): FindingHead | undefined {
  const pin = pins[index];
  const finding = model.findings[pin.lead];
  const value =
    pin.members.length > 1 && !pin.isSelected ? `and ${pin.members.length - 1} more` : shortValue(finding);
  const tries: [string, string][] = [
    [finding.rule, value],
    [finding.rule, ''],
    ['', ''],
  ];
  // A label may reach under the next head only where that one still finds its own tier.
  const limit = (pins[index + tiers]?.x ?? Infinity) - HEAD_GLYPH_PX / 2 - APART_PX;
  for (const [code, text] of tries) {
    for (let tier = 0; tier < (pin.isSelected ? 1 : tiers); tier++) {
      const box = boxOf(pin, code, text, lane, tier, tiers);
      const isRoomy =
        box.x + box.width <= Math.min(view.widthPx - 2, code === '' ? Infinity : limit) ||
        (pin.isSelected && code !== '' && text === '');
      if (!isRoomy || placed.some((head) => overlaps(head.box, box))) continue;
      const y = box.y + box.height / 2;
      return {
        lead: pin.lead,
        members: pin.members,
        x: pin.x,
        y,
        tier,
        isSelected: pin.isSelected,
        code,
        value: text,
        box,
      };
    }
  }
  return undefined;
}

function boxOf(pin: Pin, code: string, value: string, lane: LaneLayout, tier: number, tiers: number): Rect {
  const y = lane.topPx + (tiers === 1 ? lane.heightPx / 2 : lane.heightPx * (tier === 0 ? 0.29 : 0.73));
  let width = HEAD_GLYPH_PX;
  if (code !== '') width = HEAD_GLYPH_PX / 2 + HEAD_TEXT_PX + textWidth(code, CODE_STYLE);
  if (value !== '') width += VALUE_GAP_PX + textWidth(value, VALUE_STYLE);
  const height = pin.isSelected ? PLATE_PX : HEAD_GLYPH_PX;
  const pad = pin.isSelected ? 3 : 0;
  return {
    x: pin.x - HEAD_GLYPH_PX / 2 - pad,
    y: y - height / 2,
    width: width + pad + (pin.isSelected ? (code === '' ? pad : 12) : 0),
    height,
  };
}

function overlaps(a: Rect, b: Rect): boolean {
  return (
    a.x < b.x + b.width + APART_PX &&
    b.x < a.x + a.width + APART_PX &&
    a.y < b.y + b.height &&
    b.y < a.y + a.height
  );
}
