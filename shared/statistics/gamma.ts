/** Coefficients of Lanczos's approximation, g = 7, nine terms. Source: Lanczos 1964 in the form of Godfrey 2001, from memory. */
const LANCZOS = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059,
  12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
];

/** ln Γ(x) for x > 0, to about 15 digits. */
export function logGamma(x: number): number {
  if (x < 0.5) return Math.log(Math.PI / Math.sin(Math.PI * x)) - logGamma(1 - x);
  const t = x + 6.5;
  let sum = LANCZOS[0];
  for (let i = 1; i < LANCZOS.length; i++) sum += LANCZOS[i] / (x - 1 + i);
  return 0.5 * Math.log(2 * Math.PI) + (x - 0.5) * Math.log(t) - t + Math.log(sum);
}

/**
 * Regularised lower incomplete gamma function P(a, x): share of a gamma distribution of shape `a` below `x`. Series below
 * x = a + 1, continued fraction above. Source: Abramowitz and Stegun 6.5.29 and 6.5.31, from memory.
 */
export function lowerGammaShare(a: number, x: number): number {
  if (x <= 0) return 0;
  const front = Math.exp(a * Math.log(x) - x - logGamma(a));
  return x < a + 1 ? front * series(a, x) : 1 - front * fraction(a, x);
}

/** ln(1 − P(a, x)) for x ≥ a + 1: keeps its digits far out in the tail, where 1 − P has none left. */
export function logUpperGammaShare(a: number, x: number): number {
  return a * Math.log(x) - x - logGamma(a) + Math.log(fraction(a, x));
}

function series(a: number, x: number): number {
  let term = 1 / a;
  let sum = term;
  for (let n = 1; n < 100_000 && term > sum * 1e-17; n++) {
    term *= x / (a + n);
    sum += term;
  }
  return sum;
}

/** By the modified rule of Lentz. */
function fraction(a: number, x: number): number {
  const tiny = 1e-300;
  let b = x + 1 - a;
  let c = 1 / tiny;
  let d = 1 / b;
  let result = d;
  for (let i = 1; i < 100_000; i++) {
    const an = -i * (i - a);
    b += 2;
    d = 1 / (Math.abs(an * d + b) < tiny ? tiny : an * d + b);
    c = Math.abs(b + an / c) < tiny ? tiny : b + an / c;
    result *= d * c;
    if (Math.abs(d * c - 1) < 1e-16) break;
  }
  return result;
}

/** The value below which the share `p` of a gamma distribution of shape `a` lies. By bisection; 0 ≤ p < 1. */
export function gammaQuantile(a: number, p: number): number {
  if (p <= 0) return 0;
  let low = 0;
  let high = Math.max(1, a);
  while (lowerGammaShare(a, high) < p) high *= 2;
  for (let i = 0; i < 200 && high - low > 1e-13 * high; i++) {
    const middle = (low + high) / 2;
    if (lowerGammaShare(a, middle) < p) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
