import { logGamma } from './gamma';

/** Probability of at most `most` failures in n trials that each fail with `share`. Source: binomial distribution. */
export function binomialAtMost(most: number, n: number, share: number): number {
  if (most >= n || share <= 0) return 1;
  if (share >= 1) return 0;
  let sum = 0;
  for (let k = 0; k <= most; k++) {
    const ways = logGamma(n + 1) - logGamma(k + 1) - logGamma(n - k + 1);
    sum += Math.exp(ways + k * Math.log(share) + (n - k) * Math.log1p(-share));
  }
  return Math.min(1, sum);
}
