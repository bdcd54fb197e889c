import type { Quantity, Verdict } from "../quantity/quantity.js";

/** What exact walks showed of one observable. */
export interface SampledAverage {
  readonly replicates: number;
  readonly moves: number;
  /** Mean over replicates of the time average, with its interval. */
  readonly mean: Quantity;
  /** n Var of the time average, over replicates and by batch means. */
  readonly variance: Quantity;
  readonly batchMeansVariance: Quantity;
  /** Distance of the standardised averages to the normal law (Kolmogorov), and its p-value. */
  readonly normalDistance: { readonly statistic: number; readonly pValue: number };
  /** Share of replicates whose interval covers the limit, against the level. */
  readonly coverage: Quantity;
  /** Largest |S_n - n m| / sqrt(2 n v log log n) met over n in the second half, over replicates. */
  readonly iteratedLogarithm: { readonly largest: number; readonly median: number };
  /** For plots: standardised averages, one a replicate. */
  readonly standardised: readonly number[];
  /** For plots: one replicate's running average at growing n. */
  readonly running: readonly {
    readonly moves: number;
    readonly average: number;
    readonly low: number;
    readonly high: number;
    readonly envelope: number;
  }[];
}

export interface ObservableResult {
  readonly label: string;
  readonly mean: Quantity;
  /** lim n Var(time average over n moves). */
  readonly variance: Quantity;
  /** Is the variance 0 (f = g - P g with g invariant under every A_i A_j^-1)? */
  readonly degenerate: Verdict;
  /** <f, P^n f> of the centred observable, n = 0, 1, ... */
  readonly correlations: readonly Quantity[];
  /** Moves after which the interval at `level` has this half-width. */
  readonly stepsFor: readonly { readonly halfWidth: number; readonly steps: Quantity }[];
  readonly sampled: SampledAverage;
}

/** Answer of `averages`. */
export interface AveragesResult {
  readonly torwend: string;
  readonly walk: string;
  readonly observables: readonly ObservableResult[];
  readonly warnings: readonly string[];
}
