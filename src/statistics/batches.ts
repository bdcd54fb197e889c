/** Batch means: the asymptotic variance of a time average from one path. */
import { twoSidedT } from "./distributions.js";
import { mean, sum } from "./moments.js";

export interface BatchMeans {
  /** Average over the whole path. */
  readonly average: number;
  /** Estimate of lim n Var(average). */
  readonly variance: number;
  /** Half-width of the path's own interval for the limit mean: Student's t with (batches - 1) degrees. */
  readonly halfWidth: number;
}

/** Ends of `batches` consecutive batches of n steps whose lengths differ by at most 1; the last is n. */
export function batchEnds(n: number, batches: number): number[] {
  return Array.from({ length: batches }, (_, j) => Math.floor((n * (j + 1)) / batches));
}

/**
 * The number of batches for n steps, n >= 2: 32, so that Student's factor is near the normal
 * one and each batch is as long as can be; for short paths about sqrt n, 2 at least.
 */
export function batchCount(n: number): number {
  return Math.max(2, Math.min(32, Math.floor(Math.sqrt(n))));
}

/**
 * From the sums over consecutive batches: v = 1/(b - 1) sum_j (S_j - l_j average)^2 / l_j.
 * The limit variance's estimate where batches are long against the correlations; for
 * batches of length l its bias is of order 1/l.
 */
export function batchMeans(sums: ArrayLike<number>, lengths: ArrayLike<number>, level: number): BatchMeans {
  const b = sums.length;
  if (b < 2) throw new RangeError(`batchMeans: found ${b} batches; accepted: 2 or more`);
  const n = sum(lengths);
  const average = sum(sums) / n;
  const variance =
    (mean(
      Array.from(sums, (s, j) => {
        const l = lengths[j] as number;
        const d = s - l * average;
        return (d * d) / l;
      }),
    ) *
      b) /
    (b - 1);
  return { average, variance, halfWidth: twoSidedT(level, b - 1) * Math.sqrt(variance / n) };
}
