/** From sums along replicates to what is reported of one observable. */
import type { Real } from "../kernel/real.js";
import { estimatedQuantity } from "../quantity/quantity.js";
import { type BatchMeans, batchMeans } from "../statistics/batches.js";
import { normalCdf, twoSidedNormal } from "../statistics/distributions.js";
import { meanEstimate, proportionEstimate, varianceEstimate } from "../statistics/intervals.js";
import { envelope } from "../statistics/iterated.js";
import { kolmogorovDistance, kolmogorovPValue } from "../statistics/kolmogorov.js";
import { quantile, sum } from "../statistics/moments.js";
import { RESOLUTION } from "./program.js";
import type { SampledAverage } from "./result.js";
import type { Segments } from "./segments.js";

export interface SummaryInput {
  readonly segments: Segments;
  /** One array of sums over the segments for each replicate; 2 replicates or more. */
  readonly replicates: readonly ArrayLike<number>[];
  /** The limit mean. */
  readonly mean: number;
  /** The limit variance, where known otherwise. */
  readonly variance: number | undefined;
  /** A bound on |f|. */
  readonly size: number;
  /** A bound on |f - its mean|, or 0 where f has no rounding (a box). */
  readonly swing: number;
  /** A bound on the error of each computed value of f. */
  readonly error: number;
  readonly level: number;
  /** From where the replicates start, in words. */
  readonly start: string;
}

/**
 * A variance at most this counts as 0, since rounding alone may have left it: in a limit
 * variance summed from correlations, a share of swing^2; in batch means of a constant, the
 * square of the sums' rounding over a batch's length.
 */
function negligible({ size, swing, segments }: SummaryInput): number {
  return 2 ** -40 * swing * swing + 2 ** -90 * size * size * segments.steps;
}

/** Sums up to each segment's end. */
function cumulative(sums: ArrayLike<number>): Float64Array {
  const out = new Float64Array(sums.length);
  let s = 0;
  let carried = 0;
  for (let i = 0; i < sums.length; i++) {
    const v = sums[i] as number;
    const t = s + v;
    const z = t - s;
    carried += s - (t - z) + (v - z);
    s = t;
    out[i] = s + carried;
  }
  return out;
}

function batchesOf(sums: ArrayLike<number>, { ends, batches }: Segments, level: number): BatchMeans {
  const all = Array.from(sums);
  const from = batches.map((_, j) => (j === 0 ? 0 : (batches[j - 1] as number) + 1));
  const parts = batches.map((end, j) => sum(all.slice(from[j], end + 1)));
  const lengths = batches.map((end, j) => (ends[end] as number) - (ends[(from[j] as number) - 1] ?? 0));
  return batchMeans(parts, lengths, level);
}

/** Exact walks' averages against the limit mean and variance. */
export function summarise(input: SummaryInput, real: Real): SampledAverage {
  const { segments, replicates, level, size } = input;
  const { steps, ends } = segments;
  const count = replicates.length;
  const paths = replicates.map(cumulative);
  const batches = replicates.map((sums) => batchesOf(sums, segments, level));
  const averages = paths.map((path) => (path[ends.length - 1] as number) / steps);
  const limit = input.mean;

  const centre = meanEstimate(averages, level);
  const spread = varianceEstimate(averages, level, real);
  const within = meanEstimate(
    batches.map((b) => b.variance),
    level,
  );
  // Rounding must not decide whether an interval of (nearly) no width holds the limit.
  const slack = input.error + 2 ** -48 * Math.max(size, Math.abs(limit));
  const hits = batches.filter((b) => Math.abs(b.average - limit) <= b.halfWidth + slack).length;
  const covered = proportionEstimate(hits, count, level);

  const variance = input.variance ?? within.value;
  const flat = !(variance > negligible(input));
  const standardised = flat ? [] : averages.map((a) => (a - limit) * Math.sqrt(steps / variance));
  const statistic = flat ? null : kolmogorovDistance(standardised, normalCdf);
  const peaks = flat || segments.envelope.length === 0 ? [] : paths.map((path) => peak(path, input, variance, real));

  return {
    replicates: count,
    moves: steps,
    mean: estimatedQuantity(
      centre.value,
      `mean of ${count} independent replicates' time averages over positions 0 to ${steps - 1}, started from ${input.start}; Student's interval`,
      centre.interval,
      level,
    ),
    variance: estimatedQuantity(
      steps * spread.value,
      `moves times the variance of ${count} replicates' averages; jackknife interval of its logarithm`,
      spread.interval && { low: steps * spread.interval.low, high: steps * spread.interval.high },
      level,
    ),
    batchMeansVariance: estimatedQuantity(
      within.value,
      `${segments.batches.length} batch means a replicate, averaged over ${count} replicates; Student's interval; bias of order 1/(batch length)`,
      within.interval && { low: Math.max(0, within.interval.low), high: within.interval.high },
      level,
    ),
    normalDistance: {
      statistic,
      pValue: statistic === null ? null : kolmogorovPValue(statistic, count, real),
      method: flat
        ? "not applicable: the variance is 0"
        : `Kolmogorov distance of ${count} averages, standardised by the limit mean and the ${
            input.variance === undefined
              ? "batch-means variance (taken within replicates, not from these averages)"
              : "limit variance as reported"
          }; Kolmogorov's law with Stephens' correction`,
    },
    coverage: estimatedQuantity(
      covered.value,
      `share of replicates whose own batch-means interval at level ${level} holds the limit mean; Wilson's interval`,
      covered.interval,
      level,
    ),
    iteratedLogarithm: {
      largest: peaks.length === 0 ? null : Math.max(...peaks),
      median: peaks.length === 0 ? null : quantile(peaks, 0.5),
    },
    evaluationError: input.error,
    resolution: RESOLUTION,
    standardised,
    running: running(paths[0] as Float64Array, input, flat ? 0 : variance, real),
  };
}

/** Largest |S_n - n m| against the envelope, over the checkpoints of the second half. */
function peak(path: Float64Array, { segments, mean: m }: SummaryInput, variance: number, real: Real): number {
  let most = 0;
  for (const i of segments.envelope) {
    const n = segments.ends[i] as number;
    most = Math.max(most, Math.abs((path[i] as number) - n * m) / envelope(n, variance, real));
  }
  return most;
}

function running(
  path: Float64Array,
  { segments, mean: m, level }: SummaryInput,
  variance: number,
  real: Real,
): SampledAverage["running"] {
  const z = twoSidedNormal(level);
  return segments.running.map((i) => {
    const moves = segments.ends[i] as number;
    const half = z * Math.sqrt(variance / moves);
    return {
      moves,
      average: (path[i] as number) / moves,
      low: m - half,
      high: m + half,
      envelope: envelope(moves, variance, real) / moves,
    };
  });
}
