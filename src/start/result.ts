import type { Quantity, Verdict } from "../quantity/quantity.js";

/** A rational point near the start, around whose finite orbit the walk stays for a while. */
export interface Trap {
  readonly denominator: number;
  readonly numerators: readonly number[];
  /** Euclidean distance on the torus. */
  readonly distance: Quantity;
  /** Distance within which the walk counts as beside the orbit: half of 1 / (denominator of the orbit's points). */
  readonly room?: string;
  /** Predicted number of moves for which the walk stays beside the orbit. */
  readonly hold: Quantity;
  /** Moves after which exact walks left the orbit's neighbourhood: quantiles over replicates. */
  readonly sampledHold?: {
    readonly replicates: number;
    readonly low: number;
    readonly median: number;
    readonly high: number;
  };
}

export type StartKind = "rational" | "algebraic" | "unproved" | "uniform" | "density";

/** Answer of `start`. */
export interface StartResult {
  readonly torwend: string;
  readonly walk: string;
  readonly kind: StartKind;
  /** Does the walk equidistribute from this start? */
  readonly verdict: Verdict;
  /** Ranked by predicted hold, longest first. */
  readonly traps: readonly Trap[];
  /** How traps were looked for, and why there are none where there are none. */
  readonly search?: string;
  /** For a rational start: its denominator and the size of its orbit. */
  readonly orbit?: { readonly denominator: string; readonly size: Quantity };
}
