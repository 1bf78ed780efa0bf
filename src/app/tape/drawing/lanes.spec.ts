import { describe, expect, it } from 'vitest';
import { laneAt, lanesHeight, layOutLanes } from './lanes';
import type { LaneId, LaneLayout } from './lanes';
import { composeModel, LATE_REPLY, viewOf } from './testing/composed-tape';

const model = composeModel(LATE_REPLY);
const heights = (lanes: readonly LaneLayout[]): Partial<Record<LaneId, number>> =>
  Object.fromEntries(lanes.map((lane) => [lane.id, lane.heightPx]));

describe('the lanes', () => {
  it('have the heights of the close-up', () => {
    const lanes = layOutLanes(model, viewOf(model, 0.5, 0.58));
    expect(heights(lanes)).toEqual({
      time: 36,
      dividers: 24,
      rts: 38,
      dtr: 30,
      reply: 48,
      data: 104,
      packets: 92,
      held: 46,
      findings: 44,
    });
    expect(lanesHeight(lanes)).toBe(462);
  });

  it('have the heights of the survey, with line use', () => {
    const lanes = layOutLanes(model, viewOf(model, 0, 12));
    expect(heights(lanes)).toMatchObject({
      time: 28,
      rts: 30,
      data: 56,
      lineUse: 52,
      packets: 116,
      findings: 56,
    });
    expect(lanesHeight(lanes)).toBe(464);
  });

  it('show edges from 24 px a bit; where the canvas is low, Reply and Held give way', () => {
    const tall = layOutLanes(model, viewOf(model, 0.5, 0.526, { heightPx: 600 }));
    expect(heights(tall)).toMatchObject({ edges: 124, reply: 48, held: 46 });
    const low = heights(layOutLanes(model, viewOf(model, 0.5, 0.526)));
    expect(low.edges).toBe(124);
    expect(low.reply).toBeUndefined();
    expect(lanesHeight(layOutLanes(model, viewOf(model, 0.5, 0.526)))).toBe(462);
  });

  it('are few on a phone', () => {
    const lanes = layOutLanes(model, viewOf(model, 0.5, 0.55, { isPhone: true, widthPx: 390, gutterPx: 58 }));
    expect(lanes.map((lane) => lane.id)).toEqual(['time', 'rts', 'reply', 'data', 'packets', 'findings']);
    expect(lanesHeight(lanes)).toBe(300);
  });

  it('keep their heights while the window moves', () => {
    const here = heights(layOutLanes(model, viewOf(model, 0, 0.08)));
    for (const from of [0.2, 0.5, 0.9]) {
      expect(heights(layOutLanes(model, viewOf(model, from, from + 0.08)))).toEqual(here);
    }
  });

  it('can be hidden and put in another order', () => {
    const lanes = layOutLanes(
      model,
      viewOf(model, 0.5, 0.58, { hiddenLanes: ['dtr', 'held'], laneOrder: ['time', 'packets'] }),
    );
    expect(lanes.map((lane) => lane.id)).toEqual([
      'time',
      'packets',
      'dividers',
      'rts',
      'reply',
      'data',
      'findings',
    ]);
  });

  it('leave out lines that are not mapped, but never RTS', () => {
    const bare = composeModel({ ...LATE_REPLY, lines: ['data'] });
    const ids = layOutLanes(bare, viewOf(bare, 0.5, 0.58)).map((lane) => lane.id);
    expect(ids).toContain('rts');
    expect(ids).not.toContain('dtr');
  });

  it('say what the ring of the flags stands for', () => {
    const packets = (fromS: number, toS: number): string | undefined =>
      layOutLanes(model, viewOf(model, fromS, toS)).find((lane) => lane.id === 'packets')?.subName;
    expect(packets(0.3, 0.4)).toMatch(/^ring \d+ counts$/);
    expect(packets(0, 12)).toMatch(/^\d+ counts?$/);
  });

  it('are found by height', () => {
    const lanes = layOutLanes(model, viewOf(model, 0.5, 0.58));
    expect(laneAt(lanes, 61)?.id).toBe('rts');
    expect(laneAt(lanes, 461.5)?.id).toBe('findings');
    expect(laneAt(lanes, 462)).toBeUndefined();
  });
});
