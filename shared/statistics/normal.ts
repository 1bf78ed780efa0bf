import { logUpperGammaShare, lowerGammaShare } from './gamma';

/** Quantile of the standard normal distribution for a two-sided 95 % interval. */
export const Z_95 = 1.959963984540054;

/** Share of the standard normal distribution below `z`: half of χ² with one degree of freedom. Source: definition. */
export function normalShare(z: number): number {
  const share = lowerGammaShare(0.5, (z * z) / 2);
  return z >= 0 ? 0.5 + share / 2 : 0.5 - share / 2;
}

/** ln(1 − share below `z`), without the loss of digits far out in the tail. */
export function logNormalTail(z: number): number {
  if (z < 2) return Math.log(normalShare(-z));
  return logUpperGammaShare(0.5, (z * z) / 2) - Math.LN2;
}

/** The value below which the share `p` of the standard normal distribution lies; 0 < p < 1. By bisection of `normalShare`. */
export function normalQuantile(p: number): number {
  let low = -40;
  let high = 40;
  for (let i = 0; i < 200 && high - low > 1e-14 * Math.max(1, Math.abs(low)); i++) {
    const middle = (low + high) / 2;
    if (normalShare(middle) < p) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
