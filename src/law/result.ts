import type { Quantity } from "../quantity/quantity.js";

export interface LawCoefficient {
  readonly step: number;
  readonly real: Quantity;
  readonly imag: Quantity;
  /** Frequencies that carry the coefficient at this step; 0 where none had to be followed. */
  readonly frequencies: number;
}

/** Answer of `law`: E exp(2 pi i k.x_n). */
export interface LawResult {
  readonly torwend: string;
  readonly walk: string;
  readonly frequency: readonly string[];
  readonly coefficients: readonly LawCoefficient[];
  /** The last step reached, and why it is the last. */
  readonly reached: { readonly step: number; readonly reason: string };
  /** Present where the budget ended before the steps asked for. */
  readonly stoppedAt?: { readonly step: number; readonly reason: string };
}
