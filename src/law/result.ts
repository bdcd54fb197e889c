import type { Quantity } from "../quantity/quantity.js";

export interface LawCoefficient {
  readonly step: number;
  readonly real: Quantity;
  readonly imag: Quantity;
  /** Frequencies that carry the coefficient at this step; 0 where none had to be followed. */
  readonly frequencies: number;
}

/** How one coefficient shrinks. */
export interface Decay {
  /** -d log|coefficient| / dn, natural logarithm per move; fitted. */
  readonly rate: Quantity;
  /** Steps that the fit used, first and last. */
  readonly from: number;
  readonly to: number;
  /** Root mean square of the fit's residuals, in natural logarithms. */
  readonly residual: number;
}

/** What the averaging operator on mean-zero functions guarantees of the decay. */
export interface NormBound {
  readonly spectralRadius: Quantity;
  /** -log of the spectral radius's upper bound: the rate that is guaranteed in the long run. */
  readonly rate: Quantity;
  /** For which starts it is guaranteed. */
  readonly reading: string;
}

export interface DistanceToUniform {
  /** K: coefficients with |k_j| <= K for every j are looked at. */
  readonly cutoff: number;
  /** Their number, up to sign, without k = 0. */
  readonly frequencies: number;
  /** n = 0, 1, ..., up to 100 at most. */
  readonly steps: readonly {
    readonly step: number;
    /** Largest |E exp(2 pi i k.x_n)| over 0 < |k| <= K, and where it is attained as computed. */
    readonly largest: Quantity;
    readonly frequency: readonly number[];
    /** Wasserstein-1 distance to the uniform law, Euclidean on the torus. */
    readonly wasserstein: Quantity;
  }[];
}

/** Answer of `law`: E exp(2 pi i k.x_n). */
export interface LawResult {
  readonly torwend: string;
  readonly walk: string;
  readonly frequency: readonly string[];
  readonly coefficients: readonly LawCoefficient[];
  /** Absent where too few coefficients are told from 0. */
  readonly decay?: Decay;
  readonly normBound?: NormBound;
  /** Absent for a uniform start, and in dimension 8, where too many frequencies would have to be followed. */
  readonly distance?: DistanceToUniform;
  /** The last step reached, and why it is the last. */
  readonly reached: { readonly step: number; readonly reason: string };
  /** Present where the budget ended before the steps asked for. */
  readonly stoppedAt?: { readonly step: number; readonly reason: string };
}
