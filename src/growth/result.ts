import type { Quantity } from "../quantity/quantity.js";

/** (1/n) E log |A_n...A_1| for one n: at least lambda_1. */
export interface UpperBound {
  /** n */
  readonly moves: number;
  readonly value: Quantity;
}

/** Answer of `growth`. All rates in natural logarithms per move. */
export interface GrowthResult {
  readonly torwend: string;
  readonly walk: string;
  /** d exponents, largest first. */
  readonly exponents: readonly Quantity[];
  /** lim Var(log |A_n...A_1|) / n. */
  readonly logNormVariance: Quantity;
  /** Lambda(s) = lim 1/n log E |A_n...A_1|^s. */
  readonly pressure: readonly { readonly s: number; readonly value: Quantity }[];
  /** Large deviations of (1/n) log |A_n...A_1|: the rate at each speed. */
  readonly rate: readonly { readonly speed: number; readonly rate: Quantity }[];
  /** For plots: after `moves`, the mean of (1/n) log |A_n...A_1| over replicates and its interval. */
  readonly curve: readonly {
    readonly moves: number;
    readonly mean: number;
    readonly low: number;
    readonly high: number;
  }[];
  /** Where the top exponent is proved: what sampling alone says of it. */
  readonly sampled?: Quantity;
  /** A proved interval of the top exponent that is wider than the sampled one. */
  readonly enclosure?: Quantity;
  /** A proved upper bound of the top exponent where it is not enclosed; dimension 3 and more. */
  readonly upperBound?: UpperBound;
  readonly replicates: number;
  readonly moves: number;
  readonly warnings: readonly string[];
}
