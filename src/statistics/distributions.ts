/** Quantiles and distribution functions that the intervals need (of @stdlib, plain JavaScript: same bits everywhere). */
import cdf from "@stdlib/stats-base-dists-normal-cdf";
import quantile from "@stdlib/stats-base-dists-normal-quantile";
import studentQuantile from "@stdlib/stats-base-dists-t-quantile";

/** Distribution function of the standard normal law. */
export function normalCdf(x: number): number {
  return cdf(x, 0, 1);
}

/** The x with normalCdf(x) = p, 0 < p < 1, as far as 2p - 1 tells p: right to about 1e-16 in p. */
export function normalQuantile(p: number): number {
  return quantile(p, 0, 1);
}

/** The p-quantile of Student's t law with `freedom` > 0 degrees of freedom, 0 < p < 1. */
export function tQuantile(p: number, freedom: number): number {
  return studentQuantile(p, freedom);
}

/** (1 + level) / 2, kept below 1, so that every level has a finite quantile. */
function upper(level: number): number {
  return Math.min((1 + level) / 2, 1 - 2 ** -53);
}

/** z with P(|Z| <= z) = level for a standard normal Z: 1.96 for 0.95. */
export function twoSidedNormal(level: number): number {
  return normalQuantile(upper(level));
}

/** t with P(|T| <= t) = level for Student's T with `freedom` degrees of freedom. */
export function twoSidedT(level: number, freedom: number): number {
  return tQuantile(upper(level), freedom);
}
