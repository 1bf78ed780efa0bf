import { describe, expect, it } from 'vitest';
import { layOutHeads } from './finding-heads';
import { hitTest, snapToEdge, stepToEdge } from './hit-test';
import type { TapeHit } from './hit-test';
import { layOutLanes } from './lanes';
import type { LaneId, LaneLayout } from './lanes';
import { dataRows } from './paint-data-lane';
import { layOutPackets } from './packet-marks';
import { composeModel, LATE_REPLY, viewOf } from './testing/composed-tape';
import type { TapeView } from './view';
import { timeScaleOf } from './view';

const model = composeModel(LATE_REPLY);
const reply = (model.tape.resets[1].replyTicks ?? 0) * model.tape.tickS;
const view = viewOf(model, reply - 0.03, reply + 0.05);

function laneOf(of: TapeView, id: LaneId): LaneLayout {
  const lane = layOutLanes(model, of).find((item) => item.id === id);
  if (lane === undefined) throw new Error(`there is a lane ${id}`);
  return lane;
}

const hit = (x: number, y: number, of = view): TapeHit | null =>
  hitTest(model, of, layOutLanes(model, of), x, y);
const middle = (id: LaneId, of = view): number => laneOf(of, id).topPx + laneOf(of, id).heightPx / 2;

describe('a click', () => {
  it('takes the head of a finding, also a few px beside it', () => {
    const [head] = layOutHeads(model, view, laneOf(view, 'findings'));
    expect(hit(head.x, head.y)).toMatchObject({ kind: 'finding', index: head.lead });
    expect(hit(head.box.x - 5, head.y)).toMatchObject({ kind: 'finding', index: head.lead });
    expect(hit(head.box.x - 12, head.y)).toBeNull();
  });

  it('takes the nameplate of a reset and the flag of a packet', () => {
    for (const mark of layOutPackets(model, view, laneOf(view, 'packets'))) {
      if (mark.kind === 'incident' || mark.rect.x > 1000) continue;
      const kind = mark.kind === 'plate' ? 'reset' : 'packet';
      expect(hit(mark.rect.x + 5, mark.rect.y + 5)).toEqual({ kind, index: mark.index });
    }
  });

  it('takes the character under it', () => {
    const scale = timeScaleOf(view);
    const c = model.tape.resets[1].identification[0];
    const rows = dataRows(laneOf(view, 'data'));
    expect(hit(scale.xOf(model.tape.characters.startTicks[c]) + 20, rows.cellTop + 4)).toEqual({
      kind: 'character',
      index: c,
    });
  });

  it('takes the latency where the dimension is', () => {
    const x = timeScaleOf(view).xOf(model.tape.resets[1].onTicks) + 40;
    expect(hit(x, middle('reply'))).toMatchObject({ kind: 'finding', index: model.replies[1].finding });
  });

  it('takes the nearest packet in the survey', () => {
    const survey = viewOf(model, 0, 12);
    const x = timeScaleOf(survey).xOf(model.packetStarts[0]);
    expect(hit(x + 1, middle('packets', survey), survey)).toMatchObject({ kind: 'packet' });
    expect(hit(900, middle('packets', survey), survey)).toBeNull();
  });

  it('takes the ruler, the gutter, and nothing below the lanes', () => {
    expect(hit(96, 5)).toEqual({ kind: 'ruler', ticks: view.window.startTicks });
    expect(hit(10, middle('rts'))).toEqual({ kind: 'gutter', lane: 'rts' });
    expect(hit(500, 470)).toBeNull();
  });

  it('takes a blade also beside what is drawn of it, and the line below', () => {
    const scale = timeScaleOf(view);
    const divided = { ...view, dividers: { a: scale.ticksAt(400), b: scale.ticksAt(600) } };
    const y = middle('dividers');
    expect(hit(388, y, divided)).toEqual({ kind: 'divider', divider: 'a' });
    expect(hit(376, y, divided)).toEqual({ kind: 'divider', divider: 'a' });
    expect(hit(412, y, divided)).not.toMatchObject({ kind: 'divider' });
    expect(hit(618, y, divided)).toEqual({ kind: 'divider', divider: 'b' });
    expect(hit(403, middle('rts'), divided)).toEqual({ kind: 'divider', divider: 'a' });
  });

  it('follows the note of an empty lane', () => {
    const late = viewOf(model, 0.8, 0.9);
    expect(hit(110, middle('reply', late), late)).toEqual({
      kind: 'go-to',
      lane: 'reply',
      ticks: model.replies[1].onTicks,
    });
  });

  it('switches the rate of the Edges lane in its gutter', () => {
    const close = viewOf(model, reply, reply + 0.026);
    const edges = laneOf(close, 'edges');
    expect(hit(40, edges.topPx + 90, close)).toEqual({ kind: 'edge-reference' });
    expect(hit(40, edges.topPx + 20, close)).toEqual({ kind: 'gutter', lane: 'edges' });
  });
});

describe('snapping', () => {
  const scale = timeScaleOf(view);

  it('takes the nearest edge of data or RTS within 8 px and lets go beyond', () => {
    const { onTicks } = model.tape.resets[1];
    expect(snapToEdge(model, onTicks + 7 * scale.ticksPerPx, view)).toBe(onTicks);
    const free = onTicks + 9 * scale.ticksPerPx;
    expect(snapToEdge(model, free, view)).toBe(free);
  });

  it('goes from edge to edge', () => {
    const { onTicks, replyTicks } = model.tape.resets[1];
    expect(stepToEdge(model, onTicks, 1)).toBe(replyTicks);
    expect(stepToEdge(model, replyTicks ?? 0, -1)).toBe(onTicks);
    expect(stepToEdge(model, model.tape.endTicks, 1)).toBe(model.tape.endTicks);
  });
});
