/** What is proved of a walk's growth, where a proof is at hand: each part may be missing. */
import type { Quantity } from "../quantity/quantity.js";
import type { RateRow } from "./rate.js";

export interface GrowthProof {
  readonly exponent: Quantity;
  readonly variance: Quantity | undefined;
  /** Lambda(s). */
  readonly pressure: (s: number) => Quantity | undefined;
  /** Rows of the rate function; undefined where the pressure is not known. */
  readonly rates: () => RateRow[] | undefined;
  readonly warnings: readonly string[];
}
