/** Sums, means, variances and order statistics of a sample. */

/**
 * Sum with the rounding errors carried along (Ogita, Rump, Oishi: Accurate sum and dot
 * product, SIAM J. Sci. Comput. 2005, Sum2): as if computed in twice the precision.
 */
export function sum(x: ArrayLike<number>): number {
  let s = 0;
  let carried = 0;
  for (let i = 0; i < x.length; i++) {
    const v = x[i] as number;
    const t = s + v;
    const z = t - s;
    carried += s - (t - z) + (v - z);
    s = t;
  }
  return s + carried;
}

/** @throws RangeError for an empty sample. */
export function mean(x: ArrayLike<number>): number {
  if (x.length === 0) throw new RangeError("mean: the sample is empty");
  return sum(x) / x.length;
}

/** Unbiased variance (divisor n - 1), by deviations from the mean. @throws RangeError for fewer than 2 values. */
export function variance(x: ArrayLike<number>): number {
  if (x.length < 2) throw new RangeError(`variance: found ${x.length} values; accepted: 2 or more`);
  const m = mean(x);
  return sum(Array.from(x, (v) => (v - m) * (v - m))) / (x.length - 1);
}

/** A sorted copy. */
export function sorted(x: ArrayLike<number>): Float64Array<ArrayBuffer> {
  return Float64Array.from(x).sort();
}

/**
 * The p-quantile, 0 <= p <= 1, linear between order statistics (definition 7 of Hyndman
 * and Fan, The American Statistician 1996): the median is quantile(x, 1/2).
 */
export function quantile(x: ArrayLike<number>, p: number): number {
  if (x.length === 0 || !(p >= 0 && p <= 1)) throw new RangeError(`quantile: p = ${p} of ${x.length} values`);
  const s = sorted(x);
  const at = p * (s.length - 1);
  const below = Math.floor(at);
  const low = s[below] as number;
  const high = s[Math.min(below + 1, s.length - 1)] as number;
  return low + (at - below) * (high - low);
}
