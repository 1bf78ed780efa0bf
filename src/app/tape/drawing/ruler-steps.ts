/** Steps of the ruler and the grid, in seconds. */
export interface RulerSteps {
  readonly majorS: number;
  /** A tenth of the major. */
  readonly minorS: number;
  /** Decimals a label needs. */
  readonly decimals: number;
}

/** Least distance of two labels, px. Source: design 8. */
const LEAST_MAJOR_PX = 92;

/** 1, 2 or 5 times a power of ten, at least `least`. */
export function roundStep(least: number): number {
  const power = Math.floor(Math.log10(least));
  for (const [digit, exponent] of [
    [1, power],
    [2, power],
    [5, power],
    [1, power + 1],
  ]) {
    const step = Number(`${digit}e${exponent}`);
    if (step >= least * (1 - 1e-12)) return step;
  }
  return Number(`2e${power + 1}`);
}

export function rulerSteps(secondsPerPx: number, leastMajorPx = LEAST_MAJOR_PX): RulerSteps {
  const majorS = roundStep(secondsPerPx * leastMajorPx);
  return { majorS, minorS: majorS / 10, decimals: Math.max(0, -Math.floor(Math.log10(majorS) + 1e-9)) };
}
