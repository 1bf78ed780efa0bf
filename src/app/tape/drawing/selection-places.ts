import { cellOf } from './characters-in-view';
import { layOutHeads } from './finding-heads';
import type { LaneId, LaneLayout } from './lanes';
import { layOutPackets } from './packet-marks';
import { dataRows } from './paint-data-lane';
import type { Rect } from './pen';
import { scaleAt } from './scales';
import type { TapeModel } from './tape-model';
import { pxPerBit } from './time-scale';
import type { TapeSelection, TapeView } from './view';
import { paperWidth, timeScaleOf } from './view';

/** The box of a thing on the canvas; null where it is not drawn in this view. */
export function placeOf(
  model: TapeModel,
  view: TapeView,
  lanes: readonly LaneLayout[],
  thing: TapeSelection,
): Rect | null {
  const lane = (id: LaneId): LaneLayout | undefined => lanes.find((candidate) => candidate.id === id);
  switch (thing.kind) {
    case 'finding': {
      const findings = lane('findings');
      if (findings === undefined) return null;
      const head = layOutHeads(model, view, findings).find((item) => item.members.includes(thing.index));
      return head?.box ?? null;
    }
    case 'packet':
    case 'reset': {
      const packets = lane('packets');
      if (packets === undefined) return null;
      const kind = thing.kind === 'packet' ? 'packet' : 'plate';
      const mark = layOutPackets(model, view, packets).find(
        (item) => item.kind === kind && item.index === thing.index,
      );
      return mark?.rect ?? null;
    }
    case 'character': {
      const data = lane('data');
      if (data === undefined || !hasCells(model, view)) return null;
      const rows = dataRows(data);
      const { x, width } = cellOf(model, timeScaleOf(view), thing.index);
      return { x, y: rows.cellTop, width, height: rows.cellBottom - rows.cellTop };
    }
  }
}

/** Whether the Data lane shows cells at this scale. */
export function hasCells(model: TapeModel, view: TapeView): boolean {
  const name = scaleAt(pxPerBit(model.tape, view.window, paperWidth(view)));
  return name !== 'survey' && name !== 'packets';
}

/** The stretch of time a thing takes, in ticks. */
export function spanOf(model: TapeModel, thing: TapeSelection): { startTicks: number; endTicks: number } {
  const { tape } = model;
  switch (thing.kind) {
    case 'finding': {
      const { startTicks, endTicks } = model.findings[thing.index];
      return { startTicks, endTicks };
    }
    case 'packet':
      return { startTicks: model.packetStarts[thing.index], endTicks: model.packetEnds[thing.index] };
    case 'character':
      return {
        startTicks: tape.characters.startTicks[thing.index],
        endTicks: tape.characters.endTicks[thing.index],
      };
    case 'reset': {
      const reset = tape.resets[thing.index];
      return {
        startTicks: reset.onTicks,
        endTicks: reset.identificationEndTicks ?? reset.replyTicks ?? reset.windowEndTicks,
      };
    }
  }
}
