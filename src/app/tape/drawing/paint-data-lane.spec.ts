import { describe, expect, it } from 'vitest';
import { layOutLanes } from './lanes';
import { dataRows } from './paint-data-lane';
import { composeModel, LATE_REPLY, viewOf, WHEEL } from './testing/composed-tape';
import { paintAll } from './testing/painted-tape';
import { timeScaleOf } from './view';
import { windowAtScale } from './zoom';

const model = composeModel(LATE_REPLY);
const reply = model.tape.resets[1].replyTicks ?? 0;
const at = (pxPerBit: number): ReturnType<typeof viewOf> => ({
  ...viewOf(model, 0, 1),
  window: windowAtScale(model.tape, 948, pxPerBit, reply + 8000),
});

function rowsOf(view: ReturnType<typeof viewOf>): ReturnType<typeof dataRows> {
  const lane = layOutLanes(model, view).find((item) => item.id === 'data');
  if (lane === undefined) throw new Error('there is a Data lane');
  return dataRows(lane);
}

describe('the ribbon', () => {
  it('is filled while the line is at space, as measured: start and the two zeros of 4D', () => {
    const view = at(10);
    const { data } = paintAll(model, view);
    const rows = rowsOf(view);
    const line = model.lines.data;
    const first = line?.ticks.findIndex((ticks) => ticks === reply) ?? -1;
    const scale = timeScaleOf(view);
    const x = scale.xOf(line?.ticks[first] ?? 0);
    const width = scale.xOf(line?.ticks[first + 1] ?? 0) - x;
    const piece = data
      .of('fillRect')
      .find((call) => Math.abs((call.args[0] as number) - x) < 1e-6 && call.args[1] === rows.ribbonTop);
    expect(piece?.args[2]).toBeCloseTo(width, 6);
    expect(piece?.args[3]).toBe(18);
    expect(width).toBeCloseTo(10, 0);
  });
});

describe('cells', () => {
  it('carry the bits in the order sent and the value below, with its letter in an identification', () => {
    const { data } = paintAll(model, at(10));
    const texts = data.texts();
    const start = texts.findIndex((text) => text.text === '4D');
    expect(start).toBeGreaterThan(0);
    expect(texts[start + 1].text).toBe('M');
    // 4D is 100 1101: sent 1 0 1 1 0 0 1.
    const digits = texts.filter((text) => /^[01]$/.test(text.text) && Math.abs(text.x - texts[start].x) < 60);
    expect(
      digits
        .slice(0, 7)
        .map((text) => text.text)
        .join(''),
    ).toBe('1011001');
  });

  it('have no digits below 8 px a bit, the value inside below 6, nothing inside below 1.9', () => {
    const digitsAt = (pxPerBit: number): number =>
      paintAll(model, at(pxPerBit))
        .data.texts()
        .filter((text) => /^[01]$/.test(text.text) && text.font.startsWith('500 10px')).length;
    expect(digitsAt(8)).toBeGreaterThan(0);
    expect(digitsAt(7)).toBe(0);
    const hexAt = (pxPerBit: number): number | undefined =>
      paintAll(model, at(pxPerBit))
        .data.texts()
        .find((text) => text.text === '4D')?.y;
    const inside = at(5);
    expect(hexAt(5)).toBeLessThan(rowsOf(inside).cellBottom);
    expect(hexAt(7)).toBe(rowsOf(at(7)).hexBase);
    expect(hexAt(1.5)).toBeUndefined();
  });

  it('show a stop element at space filled', () => {
    const broken = composeModel({
      ...WHEEL,
      steps: [
        { do: 'wait', ms: 50 },
        { do: 'reset', widthMs: 104.2, latencyMs: 11 },
        ...Array.from({ length: 12 }, () => ({ do: 'move', dx: 3, dy: 1 }) as const),
        { do: 'move', dx: 5, dy: 5, fault: { kind: 'stop', character: 1 } },
        { do: 'wait', ms: 50 },
        { do: 'move', dx: 5, dy: 5 },
        { do: 'wait', ms: 100 },
      ],
    });
    const c = broken.tape.characters.errors.findIndex((error) => error !== 0);
    expect(c).toBeGreaterThan(0);
    const view = {
      ...viewOf(broken, 0, 1),
      window: windowAtScale(broken.tape, 948, 10, broken.tape.characters.startTicks[c]),
    };
    const stopX = timeScaleOf(view).xOf(broken.tape.characters.startTicks[c] + 8 * broken.nominalBitTicks);
    const filled = paintAll(broken, view)
      .data.of('fillRect')
      .filter((call) => Math.abs((call.args[0] as number) - stopX) < 0.01 && call.args[3] === 24);
    expect(filled.length).toBeGreaterThan(0);
  });

  it('frame the selected one in ink-blue', () => {
    const index = model.tape.resets[1].identification[0];
    const { data } = paintAll(model, { ...at(10), selection: { kind: 'character', index } });
    expect(data.rects('primary').length).toBe(4);
  });
});

describe('density', () => {
  it('stands on a base line and is as tall as the share of the line in use', () => {
    const view = viewOf(model, 0, 12);
    const { data } = paintAll(model, view);
    const bottomOf = (call: { args: readonly unknown[] }): number =>
      (call.args[1] as number) + (call.args[3] as number);
    const ribbons = data.of('fillRect').filter((call) => call.fillStyle === 'ribbon');
    const tallest = ribbons.reduce((a, b) => ((b.args[3] as number) > (a.args[3] as number) ? b : a));
    // The control lines are ribbons too; the density stands on one base line.
    const columns = ribbons.filter((call) => Math.abs(bottomOf(call) - bottomOf(tallest)) < 0.01);
    const heights = columns.map((call) => call.args[3] as number);
    expect(Math.max(...heights)).toBeLessThanOrEqual(36.01);
    expect(Math.max(...heights)).toBeGreaterThan(25);
    const used = model.usedBefore[model.tape.characters.count] / timeScaleOf(view).ticksPerPx;
    const drawn = columns.reduce(
      (sum, call) => sum + ((call.args[2] as number) * (call.args[3] as number)) / 36,
      0,
    );
    expect(drawn).toBeGreaterThan(used * 0.9);
    expect(drawn).toBeLessThan(used * 1.15);
  });
});

describe('the raw ribbon', () => {
  it('is shaded by the share of space where a px holds several edges', () => {
    const long = composeModel({
      ...LATE_REPLY,
      steps: [...LATE_REPLY.steps, { do: 'draw', figure: 'circle', size: 900, packets: 400 }],
    });
    const window = windowAtScale(long.tape, 948, 0.15, 5 / long.tape.tickS);
    const { data } = paintAll(long, { ...viewOf(long, 0, 1), window });
    const shades = new Set(
      data
        .of('fillRect')
        .filter((call) => call.fillStyle === 'ink')
        .map((call) => call.alpha),
    );
    expect(shades.size).toBeGreaterThan(2);
  });
});
