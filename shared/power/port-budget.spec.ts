import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { HostLine } from './host-line';
import { lineFromPoints, pointAtLoad } from './host-line';
import { solveBudget } from './port-budget';
import { mostPowerOf, solveBus } from './solve-bus';

const line = (name: string, openV: number, resistanceOhm = 1200): HostLine => ({
  name,
  openV,
  resistanceOhm,
  diodeV: 0.6,
});
const mA = (amperes: readonly number[]): number[] => amperes.map((a) => Number((a * 1e3).toFixed(2)));

/** Source of the worked table: protocol-facts.md, section 7. */
describe('parallel load lines', () => {
  it.each([
    ['DTR and RTS at 10 V, 5 mA', [line('dtr', 10), line('rts', 10)], 5e-3, 6.4, [2.5, 2.5]],
    ['only DTR at 10 V, 5 mA', [line('dtr', 10)], 5e-3, 3.4, [5]],
    ['DTR 10 V, RTS 7 V, 5 mA', [line('dtr', 10), line('rts', 7)], 5e-3, 4.9, [3.75, 1.25]],
    [
      'DTR 10 V, RTS 7 V, 2 mA: the weaker line gives nothing',
      [line('dtr', 10), line('rts', 7)],
      2e-3,
      7,
      [2, 0],
    ],
  ])('%s', (_, lines, loadA, busV, amperes) => {
    const point = solveBus(lines, loadA);
    expect(point.busV).toBeCloseTo(busV, 6);
    expect(mA(point.amperes)).toEqual(amperes);
  });

  it('gives at most 18.4 mW from one line of 10 V', () => {
    expect(mostPowerOf(line('dtr', 10)) * 1e3).toBeCloseTo(18.4, 1);
  });

  it('follows from two measured points: 9.0 V at 7 kΩ, 7.5 V at 3 kΩ', () => {
    const { openV, resistanceOhm } = lineFromPoints(pointAtLoad(9, 7000), pointAtLoad(7.5, 3000));
    expect(resistanceOhm).toBeCloseTo(1235, 0);
    expect(openV).toBeCloseTo(10.6, 1);
    expect(() => lineFromPoints({ volts: 9, amperes: 1e-3 }, { volts: 9.5, amperes: 2e-3 })).toThrow(
      RangeError,
    );
  });

  it('carries just the load, whatever the lines (property)', () => {
    const lines = fc.array(
      fc.record({
        name: fc.constant('x'),
        openV: fc.double({ min: 5, max: 15, noNaN: true }),
        resistanceOhm: fc.double({ min: 200, max: 5000, noNaN: true }),
        diodeV: fc.double({ min: 0, max: 1, noNaN: true }),
      }),
      { minLength: 1, maxLength: 4 },
    );
    fc.assert(
      fc.property(lines, fc.double({ min: 1e-5, max: 0.02, noNaN: true }), (some, loadA) => {
        const { amperes, busV } = solveBus(some, loadA);
        expect(amperes.reduce((sum, a) => sum + a, 0)).toBeCloseTo(loadA, 9);
        some.forEach(({ openV, diodeV }, i) => {
          if (openV - diodeV <= busV) expect(amperes[i]).toBe(0);
        });
      }),
    );
  });
});

describe('the sheet of a build', () => {
  const budget = {
    lines: [line('dtr', 10), line('rts', 10)],
    states: [
      { name: 'moving', loadA: 5e-3, fedBy: ['dtr', 'rts'] },
      { name: 'in reset', loadA: 5e-3, fedBy: ['dtr'] },
    ],
    brownOutV: 4.5,
    reservoirF: 100e-6,
    bootS: 0.01,
  };

  it('finds the brown-out of the reset pulse, when RTS gives nothing', () => {
    const { states, worst } = solveBudget(budget);
    expect(states[0].headroomV).toBeCloseTo(1.9, 6);
    expect(worst?.state.name).toBe('in reset');
    expect(worst?.busV).toBeCloseTo(3.4, 6);
    // 5 mA of (10 − 0.6 − 4.5)/1.2 kΩ = 4.08 mA.
    expect(worst?.share).toBeCloseTo(5 / 4.0833, 3);
  });

  it('adds charging and boot: R·C·ln(V/(V − V_min)) with both lines', () => {
    const chargeS = 600 * 100e-6 * Math.log(9.4 / (9.4 - 4.5));
    expect(solveBudget(budget).readyS).toBeCloseTo(chargeS + 0.01, 9);
  });

  it('is never ready where the brown-out is above every line', () => {
    expect(solveBudget({ ...budget, brownOutV: 12 }).readyS).toBeNull();
    expect(solveBudget({ ...budget, brownOutV: 12 }).worst?.share).toBe(Infinity);
  });

  it('has no bus where no line feeds a state', () => {
    const state = { name: 'off', loadA: 1e-3, fedBy: [] };
    expect(solveBudget({ ...budget, states: [state] }).states[0]).toMatchObject({ busV: 0, share: Infinity });
  });
});
