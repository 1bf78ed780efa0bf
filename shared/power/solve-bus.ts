import type { HostLine } from './host-line';

export interface BusPoint {
  /** Below 0 where the lines cannot carry the load at all. */
  readonly busV: number;
  /** Of each line, in their order; 0 where its diode blocks. */
  readonly amperes: readonly number[];
}

/**
 * Voltage of a bus that several lines feed through diodes, at a load. Lines whose diode would block are dropped, the highest stay.
 * Source: protocol-facts.md 7, parallel load lines (textbook, from memory).
 */
export function solveBus(lines: readonly HostLine[], loadA: number): BusPoint {
  const byHeight = [...lines.keys()].sort((a, b) => feedV(lines[b]) - feedV(lines[a]));
  let conductance = 0;
  let current = -loadA;
  let busV = -Infinity;
  // From the highest down: a line joins in as long as it stands above the bus the others make.
  for (const index of byHeight) {
    const line = lines[index];
    if (feedV(line) <= busV) break;
    conductance += 1 / line.resistanceOhm;
    current += feedV(line) / line.resistanceOhm;
    busV = current / conductance;
  }
  return {
    busV,
    amperes: lines.map((line) => Math.max(0, (feedV(line) - busV) / line.resistanceOhm)),
  };
}

/** What a line can give with what the diode takes gone, at no load. */
export function feedV({ openV, diodeV }: HostLine): number {
  return openV - diodeV;
}

/** Current that lines can carry with the bus at a voltage. */
export function currentAt(lines: readonly HostLine[], busV: number): number {
  return lines.reduce((sum, line) => sum + Math.max(0, (feedV(line) - busV) / line.resistanceOhm), 0);
}

/** Most power one line can give, at half its voltage, watts. */
export function mostPowerOf(line: HostLine): number {
  return feedV(line) ** 2 / (4 * line.resistanceOhm);
}
