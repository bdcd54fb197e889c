/**
 * From sampled logarithms to exponents and the variance of the log norm, with intervals.
 *
 * Replicates are independent, and counting starts after a warm-up, when the direction has
 * forgotten its start; so the replicates' rates are independent with the exponent as their
 * mean, up to what the warm-up left, and Student's interval applies. Two things widen it:
 * - rounding: each product errs by some units of 2^-53, which bounds how well a rate is known;
 * - drift: where the second half of the replicates grew at another rate than the first, beyond
 *   five standard errors, growth had not settled (polynomial growth, symmetric walks on one
 *   line), and twice the difference is added.
 */

import type { Real } from "../kernel/real.js";
import type { Interval } from "../quantity/quantity.js";
import { batchMeans } from "../statistics/batches.js";
import { meanEstimate, varianceEstimate } from "../statistics/intervals.js";
import { mean, variance } from "../statistics/moments.js";
import { type GrowthSamples, logAt } from "./sample.js";

export interface RateEstimate {
  readonly value: number;
  readonly halfWidth: number;
  /** The growth rate had not settled: see above. */
  readonly drift: boolean;
}

const range = (n: number) => Array.from({ length: n }, (_, i) => i);

/**
 * Rates of the exponents, largest first. In dimension d >= 3 the last is minus the sum of the
 * others (determinants are +-1); `residual` is the largest |sum of all d sampled rates|, which
 * rounding alone keeps from 0.
 */
export function exponentEstimates(
  samples: GrowthSamples,
  level: number,
): { estimates: RateEstimate[]; residual: number } {
  const { plan, replicates, exponents } = samples;
  const last = plan.checkpoints.length - 1;
  const halfway = plan.batches[plan.batches.length / 2 - 1] as number;
  const half = plan.checkpoints.indexOf(halfway);
  const dimension = exponents === 1 ? 2 : exponents;
  const followed = (r: number, c: number, j: number) => {
    if (exponents === 1 || j < exponents - 1) return logAt(samples, r, c, j);
    return -range(exponents - 1).reduce((s, i) => s + logAt(samples, r, c, i), 0);
  };
  const estimates = range(exponents).map((j): RateEstimate => {
    const rates = range(replicates).map((r) => followed(r, last, j) / plan.steps);
    const { value, interval } = meanEstimate(rates, level);
    const gaps = range(replicates).map((r) => {
      const first = followed(r, half, j);
      return first / halfway - (followed(r, last, j) - first) / (plan.steps - halfway);
    });
    const gap = Math.abs(mean(gaps));
    const error = Math.sqrt(variance(gaps) / replicates);
    const rounding = dimension * 2 ** -51;
    const drift = gap > 5 * error + rounding;
    const student = ((interval as Interval).high - (interval as Interval).low) / 2;
    return { value, halfWidth: student + rounding + (drift ? 2 * gap : 0), drift };
  });
  const residual =
    exponents === 1
      ? 0
      : Math.max(
          ...range(replicates).map((r) =>
            Math.abs(range(exponents).reduce((s, j) => s + logAt(samples, r, last, j), 0) / plan.steps),
          ),
        );
  return { estimates: estimates.sort((a, b) => b.value - a.value), residual };
}

export interface VarianceEstimate {
  readonly value: number;
  readonly interval?: Interval;
  readonly method: string;
  /** Batches and whole replicates disagree: no central limit theorem with the batches' variance. */
  readonly irregular: boolean;
}

/**
 * lim Var(log |A_n...A_1|) / n. Each replicate's batch means give one estimate; their mean
 * has Student's interval over replicates. Where the variance between whole replicates is off
 * by more than four of its standard errors, increments are not short-ranged and the variance
 * between replicates is reported instead (Miller's jackknife).
 */
export function logNormVariance(samples: GrowthSamples, level: number, real: Real): VarianceEstimate {
  const { plan, replicates } = samples;
  const places = plan.batches.map((n) => plan.checkpoints.indexOf(n));
  const lengths = plan.batches.map((n, j) => n - (j === 0 ? 0 : (plan.batches[j - 1] as number)));
  const within = range(replicates).map((r) => {
    const ends = places.map((c) => logAt(samples, r, c, 0));
    const sums = ends.map((x, j) => x - (j === 0 ? 0 : (ends[j - 1] as number)));
    return batchMeans(sums, lengths, level).variance;
  });
  const whole = range(replicates).map((r) => logAt(samples, r, plan.checkpoints.length - 1, 0) / Math.sqrt(plan.steps));
  const between = varianceEstimate(whole, level, real);
  const inBatches = mean(within);
  // A sample variance of R normal values has relative standard error sqrt(2 / (R - 1)).
  const allowed = 4 * Math.sqrt(2 / (replicates - 1)) * inBatches + 4 * Math.sqrt(variance(within) / replicates);
  if (Math.abs(between.value - inBatches) > allowed && between.value > 1e-12) {
    return { ...between, method: "variance between replicates, jackknife interval", irregular: true };
  }
  const { value, interval } = meanEstimate(within, level);
  const { low, high } = interval as Interval;
  return {
    value,
    interval: { low: Math.max(0, low), high },
    method: `batch means of ${plan.batches.length} batches in ${replicates} replicates, Student's interval`,
    irregular: false,
  };
}
