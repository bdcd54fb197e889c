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
  /**
   * Moves by which the prediction exceeds that for a point at distance sqrt(d) q^(-1 - 1/d), below which
   * every irrational start has infinitely many (Dirichlet): what makes this point a trap beyond the usual.
   */
  readonly excess?: Quantity;
  /** Moves after which exact walks from the start left the orbit's neighbourhood, over replicates. */
  readonly sampledHold?: SampledHold;
}

export interface SampledHold {
  readonly replicates: number;
  /** Quantiles at the session's level. */
  readonly low: number;
  readonly median: number;
  readonly high: number;
  /** Mean number of moves, with its confidence interval. */
  readonly mean: Quantity;
  /** Walks still beside the orbit when they ended; counted there as if they had left. */
  readonly unfinished: number;
  /** The distribution: how many walks left at move `first`, `first` + 1, ... */
  readonly exits: { readonly first: number; readonly counts: readonly number[] };
}

/** What the trap that holds longest does to time averages from this start. */
export interface TrapCost {
  readonly denominator: number;
  readonly numerators: readonly number[];
  readonly orbitSize: number;
  /** Moves during which averages are those of the trap's orbit. */
  readonly moves: Quantity;
  readonly observables: readonly {
    readonly label: string;
    /** Expected sum of f - mean over all moves: over n moves the average is off by this over n. */
    readonly sum: Quantity;
  }[];
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
  /** For a start near a rational point whose orbit could be listed. */
  readonly cost?: TrapCost;
  /** How traps were looked for, and why there are none where there are none. */
  readonly search?: string;
  /** For a rational start: its denominator and the size of its orbit. */
  readonly orbit?: { readonly denominator: string; readonly size: Quantity };
}
