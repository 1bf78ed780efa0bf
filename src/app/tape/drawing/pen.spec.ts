import { describe, expect, it } from 'vitest';
import { groupsWidth, Pen } from './pen';
import { RecordingContext } from './testing/recording-context';
import { textRuns, textWidth } from './text-measure';

const MONO = { face: 'mono', sizePx: 10, weight: 400 } as const;

describe('straight lines', () => {
  it('are one px wide on whole px, at least one device px at any ratio', () => {
    const plain = new RecordingContext();
    new Pen(plain.ctx).down(100.3, 10, 20, 'ink');
    expect(plain.rects('ink')).toEqual([[100, 10, 1, 10]]);
    const fine = new RecordingContext(2);
    new Pen(fine.ctx).across(0, 50, 10, 'ink', 0.2);
    expect(fine.rects('ink')[0][3]).toBe(0.5);
  });

  it('frame a box with their outside on its edge', () => {
    const recording = new RecordingContext();
    new Pen(recording.ctx).frame({ x: 10, y: 20, width: 30, height: 40 }, 'ink', 2);
    expect(recording.rects('ink')).toEqual([
      [10, 20, 30, 2],
      [10, 58, 30, 2],
      [10, 22, 2, 36],
      [38, 22, 2, 36],
    ]);
  });
});

describe('hatch', () => {
  it('stays inside its box', () => {
    const recording = new RecordingContext();
    new Pen(recording.ctx).hatch([{ x: 10, y: 20, width: 8, height: 24 }], 'ink');
    const points = [...recording.of('moveTo'), ...recording.of('lineTo')].map(
      (call) => call.args as number[],
    );
    expect(points.length).toBeGreaterThan(10);
    for (const [x, y] of points) {
      expect(x).toBeGreaterThanOrEqual(10);
      expect(x).toBeLessThanOrEqual(18);
      expect(y).toBeGreaterThanOrEqual(20);
      expect(y).toBeLessThanOrEqual(44);
    }
  });
});

describe('text', () => {
  it('aligns at the left, the middle or the right', () => {
    const recording = new RecordingContext();
    const pen = new Pen(recording.ctx);
    for (const align of ['left', 'center', 'right'] as const)
      pen.text('1234', 100, 50, { ...MONO, colour: 'ink', align });
    expect(recording.texts().map((text) => text.x)).toEqual([100, 88, 76]);
  });

  it('sets Δ, µ, ± and the minus in JetBrains Mono, also inside words', () => {
    expect(textRuns('3.1 ± 2.4 %', 'sans').map((run) => [run.text, run.face])).toEqual([
      ['3.1 ', 'sans'],
      ['±', 'mono'],
      [' 2.4 %', 'sans'],
    ]);
    const recording = new RecordingContext();
    new Pen(recording.ctx).text('Δx', 0, 0, { face: 'sans', sizePx: 11, weight: 400, colour: 'ink' });
    expect(recording.texts().map((text) => /JetBrains Mono"/.test(text.font.split(',')[0]))).toEqual([
      true,
      false,
    ]);
  });

  it('leaves a thin gap between groups of figures', () => {
    const width = groupsWidth(['0.417', '220'], MONO);
    expect(width).toBeGreaterThan(textWidth('0.417220', MONO));
    expect(width).toBeLessThan(textWidth('0.417 220', MONO));
  });
});
