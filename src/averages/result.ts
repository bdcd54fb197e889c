import type { Quantity, Verdict } from "../quantity/quantity.js";
import type { Gap } from "./gap.js";
import type { PoissonFinding } from "./limit-variance.js";
import type { StartCost } from "./start-cost.js";

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
  readonly normalDistance: {
    /** null, and so the p-value, where the variance is 0: there is nothing to standardise by. */
    readonly statistic: number | null;
    readonly pValue: number | null;
    /** What the averages were standardised by, and how the p-value was computed. */
    readonly method: string;
  };
  /** Share of replicates whose interval covers the limit, against the level. */
  readonly coverage: Quantity;
  /**
   * Largest |S_n - n m| / sqrt(2 n v log log n) met over n in the second half (n >= 16), over
   * replicates; null where the variance is 0 or no such n exists.
   */
  readonly iteratedLogarithm: { readonly largest: number | null; readonly median: number | null };
  /** Bound on |computed f - f| at every position, from 64-bit positions and rounding; for a box, 0 (see `resolution`). */
  readonly evaluationError: number;
  /** Positions are decided to this distance: a box's side may be misjudged only for points closer to it. */
  readonly resolution: number;
  /** For plots: standardised averages, one a replicate; empty where the variance is 0. */
  readonly standardised: readonly number[];
  /** For plots: the first replicate's running average at growing n, the limit's band and envelope (half-width). */
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
  /** lim n Var(time average over n moves) of the stationary walk: started from Haar measure, or uniformly on the start's finite orbit. */
  readonly variance: Quantity;
  /** Is the variance 0 (f = g - P g with g invariant under every A_i A_j^-1)? */
  readonly degenerate: Verdict;
  /** <f, P^n f> of the centred observable, n = 0, 1, ... */
  readonly correlations: readonly Quantity[];
  /** For a box, in dimension 2: proved bounds of its limit variance, where they are narrow enough to help. */
  readonly bracket?: Quantity;
  /** In dimension 3 and more: how well the Poisson equation behind the variance was solved. */
  readonly poisson?: PoissonFinding;
  /** Sums of z^n <f, P^n f> over n >= 0 (f centred), for each z asked for; under Haar measure only. */
  readonly generating?: readonly { readonly z: number; readonly value: Quantity }[];
  /** The last correlations that went into the variance; absent where it is no partial sum. */
  readonly lastTerms?: readonly { readonly step: number; readonly value: Quantity }[];
  /** The last n of the correlations, and why it is the last. */
  readonly reached?: { readonly step: number; readonly reason: string };
  /** What a reader must know about this observable's numbers. */
  readonly notes: readonly string[];
  /** For a start at one point: what the rational point near it that holds longest adds to sums of f - mean. */
  readonly startCost?: StartCost;
  /** Moves after which the interval at `level` has this half-width. */
  readonly stepsFor: readonly { readonly halfWidth: number; readonly steps: Quantity }[];
  readonly sampled: SampledAverage;
}

/** Answer of `averages`. */
export interface AveragesResult {
  readonly torwend: string;
  readonly walk: string;
  /** Present for a rational start whose finite orbit was listed: all findings are about the walk on it. */
  readonly orbit?: { readonly denominator: number; readonly size: number };
  /** In dimension 2, under Haar measure, where something below 1 was proved. */
  readonly gap?: Gap;
  readonly observables: readonly ObservableResult[];
  readonly warnings: readonly string[];
}
