/** A line of the host that feeds the device: an open-circuit voltage behind a resistance, through a diode. */
export interface HostLine {
  readonly name: string;
  readonly openV: number;
  readonly resistanceOhm: number;
  /** Drop of the diode that joins the line to the bus. */
  readonly diodeV: number;
}

/** A voltage at a load, as measured. */
export interface MeasuredPoint {
  readonly volts: number;
  readonly amperes: number;
}

/**
 * Open-circuit voltage and resistance from two measured points.
 * Source: protocol-facts.md 7, R = (V_a − V_b)/(I_b − I_a), V_oc = V_a + I_a·R (textbook, from memory).
 * @throws RangeError where the two points have the same current, or more current at more voltage
 */
export function lineFromPoints(a: MeasuredPoint, b: MeasuredPoint): { openV: number; resistanceOhm: number } {
  const resistanceOhm = (a.volts - b.volts) / (b.amperes - a.amperes);
  if (!Number.isFinite(resistanceOhm) || resistanceOhm <= 0)
    throw new RangeError('two points of one load line differ: less voltage at more current');
  return { openV: a.volts + a.amperes * resistanceOhm, resistanceOhm };
}

/** Volts at a current from a point measured at a load resistor. */
export function pointAtLoad(volts: number, loadOhm: number): MeasuredPoint {
  return { volts, amperes: volts / loadOhm };
}
