/** Rates a pointing device may use, the usual one first among equals. Source: protocol-facts 5.8 (1200 … 9600); 300, 600 and 19200 common practice. */
export const STANDARD_BIT_RATES = [1200, 2400, 4800, 9600, 600, 300, 19200] as const;

/** Longest run of equal elements inside a character and its neighbours that still tells the bit time. */
const LONGEST_RUN_BITS = 9.5;
/** A measured rate further from the standard one belongs to another rate (house; receivers fail near ±5 %). */
const LARGEST_RATE_ERROR = 0.12;
/** Share of pulses that must fit whole multiples of the bit time. */
const LEAST_FIT = 0.8;

export interface BitTimeEstimate {
  readonly nominalBitRate: number;
  readonly bitTicks: number;
  /** Share of the short pulses that are whole multiples of the bit, 0 … 1. */
  readonly fit: number;
  readonly pulses: number;
}

/**
 * The bit time that explains the widths of a line's pulses as whole multiples, or null. Of several the slowest rate that fits is
 * taken: at twice the true rate every pulse would be an even multiple.
 * @param ticks edges of the line, ascending
 */
export function estimateBitTime(ticks: Float64Array, ticksPerSecond: number): BitTimeEstimate | null {
  const ascending = [...STANDARD_BIT_RATES].sort((a, b) => a - b);
  let best: BitTimeEstimate | null = null;
  for (const nominalBitRate of ascending) {
    const estimate = fitBitTime(ticks, ticksPerSecond, nominalBitRate);
    if (estimate === null || estimate.fit < LEAST_FIT) continue;
    if (best === null || estimate.fit > best.fit + 0.1) best = estimate;
  }
  return best;
}

/** Fits the bit time near one standard rate by least squares over pulses of 1 … 9 bits; null without pulses to judge by. */
export function fitBitTime(
  ticks: Float64Array,
  ticksPerSecond: number,
  nominalBitRate: number,
): BitTimeEstimate | null {
  const nominal = ticksPerSecond / nominalBitRate;
  let bit = nominal;
  for (const longest of [1.5, 2.5, 4.5, LONGEST_RUN_BITS, LONGEST_RUN_BITS]) {
    const refined = refine(ticks, bit, longest);
    if (refined !== null) bit = refined;
  }
  if (Math.abs(bit / nominal - 1) > LARGEST_RATE_ERROR) return null;
  const { fitting, judged } = countFitting(ticks, bit);
  if (judged < 2) return null;
  return { nominalBitRate, bitTicks: bit, fit: fitting / judged, pulses: judged };
}

function refine(ticks: Float64Array, bit: number, longestBits: number): number | null {
  let numerator = 0;
  let denominator = 0;
  for (let i = 1; i < ticks.length; i++) {
    const width = (ticks[i] - ticks[i - 1]) / bit;
    if (width > longestBits || width < 0.6) continue;
    const n = Math.round(width);
    if (Math.abs(width - n) > 0.3) continue;
    numerator += n * width;
    denominator += n * n;
  }
  return denominator === 0 ? null : (bit * numerator) / denominator;
}

function countFitting(ticks: Float64Array, bit: number): { fitting: number; judged: number } {
  let fitting = 0;
  let judged = 0;
  for (let i = 1; i < ticks.length; i++) {
    const width = (ticks[i] - ticks[i - 1]) / bit;
    if (width > LONGEST_RUN_BITS) continue;
    judged += 1;
    const n = Math.round(width);
    if (n >= 1 && Math.abs(width - n) <= 0.3) fitting += 1;
  }
  return { fitting, judged };
}
