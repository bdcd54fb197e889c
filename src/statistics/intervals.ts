/**
 * Confidence intervals of independent samples. `level` is the wanted probability of
 * covering, in (0, 1); each docstring says what that probability rests on.
 */
import type { Real } from "../kernel/real.js";
import type { Interval } from "../quantity/quantity.js";
import { twoSidedNormal, twoSidedT } from "./distributions.js";
import { mean, variance } from "./moments.js";

export interface Estimate {
  readonly value: number;
  /** Absent where the sample does not allow one. */
  readonly interval?: Interval;
}

/** Student's interval of a mean: exact for normal samples, asymptotic otherwise. Needs 2 values or more. */
export function meanEstimate(x: ArrayLike<number>, level: number): Estimate {
  const value = mean(x);
  const half = twoSidedT(level, x.length - 1) * Math.sqrt(variance(x) / x.length);
  return { value, interval: { low: value - half, high: value + half } };
}

/**
 * Variance with Miller's interval (Biometrika 1974, The jackknife: a review): Student's
 * interval of the jackknife pseudo-values of log s^2. Does not rest on normality, as the
 * chi-square interval does. Each leave-one-out variance comes from
 *
 *     (n - 2) s_(-i)^2 = (n - 1) s^2 - n / (n - 1) (x_i - mean)^2.
 *
 * No interval where fewer than 3 values are given, or where all but one agree. The reported
 * value is s^2 itself, not the jackknife's; the interval is widened to hold it.
 */
export function varianceEstimate(x: ArrayLike<number>, level: number, real: Real): Estimate {
  const n = x.length;
  const value = variance(x);
  if (n < 3 || !(value > 0)) return { value };
  const m = mean(x);
  const full = real.log(value);
  const pseudo = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const d = (x[i] as number) - m;
    const without = ((n - 1) * value - (n / (n - 1)) * d * d) / (n - 2);
    if (!(without > 0)) return { value };
    pseudo[i] = n * full - (n - 1) * real.log(without);
  }
  const interval = meanEstimate(pseudo, level).interval as Interval;
  const low = real.exp(interval.low);
  const high = real.exp(interval.high);
  if (!Number.isFinite(high)) return { value };
  return { value, interval: { low: Math.min(low, value), high: Math.max(high, value) } };
}

/** Wilson's score interval of a proportion (JASA 1927) from `hits` of `trials` independent trials. */
export function proportionEstimate(hits: number, trials: number, level: number): Estimate {
  if (!(trials > 0)) throw new RangeError(`proportionEstimate: found ${trials} trials; accepted: 1 or more`);
  const z = twoSidedNormal(level);
  const p = hits / trials;
  const w = (z * z) / trials;
  const centre = (p + w / 2) / (1 + w);
  const half = (z * Math.sqrt((p * (1 - p)) / trials + w / (4 * trials))) / (1 + w);
  // The ends are 0 or 1 exactly where hits is 0 or all; rounding must not leave [0, 1] or lose p.
  return {
    value: p,
    interval: { low: Math.max(0, Math.min(p, centre - half)), high: Math.min(1, Math.max(p, centre + half)) },
  };
}
