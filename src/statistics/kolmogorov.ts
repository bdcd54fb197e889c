/** Kolmogorov's test of a sample against a law that was fixed beforehand. */
import type { Real } from "../kernel/real.js";
import { sorted } from "./moments.js";

const { PI } = Math;
const SQRT_TWO_PI = 2.5066282746310002;

/**
 * P(K > x) for Kolmogorov's limit law: 2 sum_{k>=1} (-1)^(k-1) exp(-2 k^2 x^2); below 1 by
 * the theta function's other form, sqrt(2 pi)/x sum exp(-(2k-1)^2 pi^2 / (8 x^2)) for 1 - P.
 * Either series is cut where its next term is below 2^-53.
 */
export function kolmogorovTail(x: number, real: Real): number {
  if (!(x > 0.04)) return 1;
  let total = 0;
  if (x < 1) {
    for (let k = 1; k <= 4; k++) {
      const odd = 2 * k - 1;
      total += real.exp((-odd * odd * PI * PI) / (8 * x * x));
    }
    return 1 - (SQRT_TWO_PI / x) * total;
  }
  for (let k = 1; k <= 5; k++) total += (k % 2 === 1 ? 2 : -2) * real.exp(-2 * k * k * x * x);
  return Math.max(0, total);
}

/** sup |F_n - F| of the sample's distribution function and `cdf`. */
export function kolmogorovDistance(x: ArrayLike<number>, cdf: (x: number) => number): number {
  const s = sorted(x);
  const n = s.length;
  let d = 0;
  for (let i = 0; i < n; i++) {
    const f = cdf(s[i] as number);
    d = Math.max(d, f - i / n, (i + 1) / n - f);
  }
  return d;
}

/**
 * p-value of a distance over n independent values, with Stephens' correction for small n
 * (JRSS B 1970): K = D (sqrt n + 0.12 + 0.11 / sqrt n). Holds where no parameter of the law
 * was estimated from the same values; conservative for laws with atoms.
 */
export function kolmogorovPValue(distance: number, n: number, real: Real): number {
  const root = Math.sqrt(n);
  return kolmogorovTail(distance * (root + 0.12 + 0.11 / root), real);
}
