import type { Quantity } from "../quantity/quantity.js";

/** Answer of `law`: E exp(2 pi i k.x_n). */
export interface LawResult {
  readonly torwend: string;
  readonly walk: string;
  readonly frequency: readonly string[];
  readonly coefficients: readonly { readonly step: number; readonly real: Quantity; readonly imag: Quantity }[];
  /** Present where the budget ended before the steps asked for. */
  readonly stoppedAt?: { readonly step: number; readonly reason: string };
}
