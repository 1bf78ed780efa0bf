import { describe, expect, it } from 'vitest';
import { buildTapeModel } from './tape-model';
import {
  composeModel,
  composeTape,
  LATE_REPLY,
  LIMITS,
  SILENT,
  viewOf,
  WHEEL,
} from './testing/composed-tape';
import { paintAll } from './testing/painted-tape';

const model = composeModel(LATE_REPLY);
const middle = 0.9;

describe('painting a tape', () => {
  it('works at every scale, for every kind of tape, with finite numbers only', () => {
    for (const tape of [model, composeModel(WHEEL), composeModel(SILENT)]) {
      for (const length of [0.005, 0.02, 0.05, 0.1, 0.3, 0.9, 6, 60]) {
        const view = viewOf(tape, middle - length / 2, middle + length / 2, {
          hover: { xPx: 400, yPx: 200 },
          selection: { kind: 'finding', index: 0 },
        });
        const { paper, data, overlay } = paintAll(tape, view);
        for (const { args } of [...paper.calls, ...data.calls, ...overlay.calls]) {
          for (const value of args) if (typeof value === 'number') expect(Number.isFinite(value)).toBe(true);
        }
      }
    }
  });

  it('leaves everything as it was in an empty tape', () => {
    const { tape } = composeTape(SILENT);
    const empty = buildTapeModel({ ...tape, lines: [], resets: [], endTicks: 0 }, [], LIMITS);
    const { data } = paintAll(empty, viewOf(empty, 0, 1));
    expect(data.saying()).toContain('No data line in this capture');
    expect(data.of('save').length).toBe(data.of('restore').length);
  });

  it('draws no more for a long tape than for a short one', () => {
    const long = composeModel({
      ...LATE_REPLY,
      steps: [...LATE_REPLY.steps, { do: 'draw', figure: 'circle', size: 900, packets: 800 }],
    });
    const callsAt = (length: number): number => {
      const { data } = paintAll(long, viewOf(long, 5, 5 + length));
      return data.calls.length;
    };
    expect(long.tape.lines.find((line) => line.role === 'data')?.ticks.length).toBeGreaterThan(8000);
    for (const length of [0.05, 0.5, 5, 20]) expect(callsAt(length)).toBeLessThan(4000);
  });

  it('keeps to whole device pixels for straight lines, also at a ratio of 1.5', () => {
    const { paper } = paintAll(model, viewOf(model, 0.45, 0.53), 1.5);
    const verticals = paper.rects('grid').filter(([, , width, height]) => height > width);
    expect(verticals.length).toBeGreaterThan(3);
    for (const [x, , width] of verticals) {
      expect(Math.abs(x * 1.5 - Math.round(x * 1.5))).toBeLessThan(1e-6);
      expect(Math.abs(width * 1.5 - Math.round(width * 1.5))).toBeLessThan(1e-6);
    }
  });

  it('names every lane in the gutter', () => {
    const { paper } = paintAll(model, viewOf(model, 0.45, 0.53));
    for (const name of [
      'Time',
      'Dividers',
      'RTS',
      'DTR',
      'Reply',
      'Data',
      'Packets',
      'Held',
      'Findings',
      'L',
      'M',
      'R',
    ]) {
      expect(paper.texts().map((text) => text.text)).toContain(name);
    }
  });

  it('labels the ruler in seconds of the file', () => {
    const { paper } = paintAll(model, viewOf(model, 0.45, 0.53));
    const labels = paper.texts().map((text) => text.text);
    expect(labels).toContain('0.47 s');
    expect(labels.filter((text) => / s$/.test(text)).length).toBeGreaterThan(5);
  });
});
