/** What is proved of a walk's growth, where a proof is at hand: each part may be missing. */
import type { Quantity } from "../quantity/quantity.js";
import type { RateRow } from "./rate.js";

export interface GrowthProof {
  /** Largest first, as many as the dimension; undefined where an exponent is not proved. The first one is. */
  readonly exponents: readonly (Quantity | undefined)[];
  readonly variance: Quantity | undefined;
  /** Lambda(s) at the s that were asked for. */
  readonly pressure: (s: number) => Quantity | undefined;
  /** Rows of the rate function. */
  readonly rates: readonly RateRow[] | undefined;
  readonly warnings: readonly string[];
}
