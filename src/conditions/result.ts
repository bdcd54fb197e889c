import type { Verdict } from "../quantity/quantity.js";

/** Answer of `conditions`. */
export interface ConditionsResult {
  readonly torwend: string;
  readonly walk: string;
  readonly stronglyIrreducible: Verdict;
  readonly proximal: Verdict;
  readonly exponentialMoment: Verdict;
  /** Equidistribution of x_n from every point that is not rational, drawn from the three above. */
  readonly equidistribution: Verdict;
  /** Central limit theorem and law of the iterated logarithm for log-norms and, from good starts, for time averages. */
  readonly centralLimit: Verdict;
}
