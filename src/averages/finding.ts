import type { Quantity, Verdict } from "../quantity/quantity.js";
import type { GeneratingValue } from "./generating.js";
import type { PoissonFinding } from "./limit-variance.js";

/** What is known of one observable without sampling. */
export interface ExactFinding {
  readonly label: string;
  readonly mean: Quantity;
  /** Absent where only sampling tells. */
  readonly variance?: Quantity;
  readonly degenerate: Verdict;
  readonly correlations: readonly Quantity[];
  readonly lastTerms?: readonly { readonly step: number; readonly value: Quantity }[];
  readonly bracket?: Quantity;
  readonly poisson?: PoissonFinding;
  readonly generating?: readonly GeneratingValue[];
  readonly reached?: { readonly step: number; readonly reason: string };
  /** Where the variance is 0: |sum over n positions - n mean| is at most this. */
  readonly spread?: number;
  readonly notes: readonly string[];
}
