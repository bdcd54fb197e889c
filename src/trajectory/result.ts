/** Answer of `trajectory`. */
export interface TrajectoryResult {
  readonly torwend: string;
  readonly walk: string;
  readonly positions: readonly {
    readonly step: number;
    /** Each coordinate to the nearest decimal of `digits` places, within 10^-digits of the truth on the circle. */
    readonly point: readonly string[];
    /** From a rational start: the position itself. */
    readonly fractions?: readonly string[];
  }[];
  /**
   * Binary digits of the start, a coordinate, beyond those shown that position `steps`
   * needs: log2 of the largest row sum of |A_n ... A_1|, rounded up.
   */
  readonly bitsConsumed: number;
  /** `exact`: of the product multiplied out; `bound`: at most so many (long walks). */
  readonly bitsConsumedKind: "exact" | "bound";
  /** Bits with which each coordinate of the start was held; absent where the walk ran on fractions. */
  readonly bitsHeld?: number;
  /** `exact`: `fractions` are the positions themselves. `enclosed`: every digit shown is proved. */
  readonly standing: "exact" | "enclosed";
  readonly digits: number;
  readonly method: string;
  /** Where `--out` wrote all positions. */
  readonly written?: { readonly file: string; readonly rows: number };
}
