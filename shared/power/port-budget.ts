import type { HostLine } from './host-line';
import { currentAt, feedV, solveBus } from './solve-bus';

/** A state of the device: what it draws, and which lines are ON then. */
export interface DeviceState {
  readonly name: string;
  readonly loadA: number;
  /** Names of the lines that feed it. */
  readonly fedBy: readonly string[];
}

/** The sheet of a build: host lines, loads and margins. Typical figures, not guaranteed; measure your port. */
export interface PortBudget {
  readonly lines: readonly HostLine[];
  readonly states: readonly DeviceState[];
  /** The regulator stops below this. */
  readonly brownOutV: number;
  readonly reservoirF: number;
  /** From enough voltage to ready. */
  readonly bootS: number;
}

export interface StateBudget {
  readonly state: DeviceState;
  readonly busV: number;
  /** Bus above the brown-out, volts. */
  readonly headroomV: number;
  readonly amperes: readonly { readonly line: string; readonly amperes: number }[];
  /** Load ÷ what the lines carry at the brown-out; Infinity where they carry nothing. */
  readonly share: number;
}

export interface BudgetResult {
  readonly states: readonly StateBudget[];
  /** PWR-1: the worst share of all states; null without a state. */
  readonly worst: StateBudget | null;
  /** PWR-3: from port power to ready, seconds; null where the brown-out voltage is never reached. */
  readonly readyS: number | null;
}

/**
 * Solves a sheet for every state.
 * Source: rules.md 10, PWR-1 and PWR-3; protocol-facts.md 7.
 */
export function solveBudget(budget: PortBudget): BudgetResult {
  const states = budget.states.map((state) => solveState(budget, state));
  const worst = states.reduce<StateBudget | null>(
    (most, state) => (most === null || state.share > most.share ? state : most),
    null,
  );
  return { states, worst, readyS: timeToReady(budget) };
}

function solveState({ lines, brownOutV }: PortBudget, state: DeviceState): StateBudget {
  const feeding = lines.filter(({ name }) => state.fedBy.includes(name));
  const { busV, amperes } = solveBus(feeding, state.loadA);
  const carried = currentAt(feeding, brownOutV);
  return {
    state,
    busV: feeding.length === 0 ? 0 : busV,
    headroomV: (feeding.length === 0 ? 0 : busV) - brownOutV,
    amperes: feeding.map(({ name }, i) => ({ line: name, amperes: amperes[i] })),
    share: carried > 0 ? state.loadA / carried : state.loadA === 0 ? 0 : Infinity,
  };
}

/** Charging the reservoir through all lines at no load, R·C·ln(V_oc/(V_oc − V_min)), and the boot time. */
function timeToReady({ lines, brownOutV, reservoirF, bootS }: PortBudget): number | null {
  const open = solveBus(lines, 0).busV;
  if (!(open > brownOutV)) return null;
  const conducting = lines.filter((line) => feedV(line) > brownOutV);
  const resistance = 1 / conducting.reduce((sum, { resistanceOhm }) => sum + 1 / resistanceOhm, 0);
  return resistance * reservoirF * Math.log(open / (open - brownOutV)) + bootS;
}
