/** What is found out about the group of the moves, handed on to the limit theorems. */
import type { Verdict } from "../quantity/quantity.js";

/** Why a group is not strongly irreducible, as far as the limit theorems tell the reasons apart. */
export type Obstruction =
  | { readonly type: "finite group" }
  /** The group permutes finitely many proper subspaces with rational bases. */
  | { readonly type: "rational subspaces" }
  /** Dimension 2: the group keeps or exchanges the eigenlines of a hyperbolic element. */
  | { readonly type: "irrational lines" }
  /** Dimension 3 and more: an invariant subspace that is not known to be rational. */
  | { readonly type: "real subspace" };

export interface GroupFinding {
  readonly stronglyIrreducible: Verdict;
  readonly proximal: Verdict;
  readonly obstruction?: Obstruction;
  /** Every eigenvalue of every product has modulus 1: norms grow at most like a power of the number of moves. */
  readonly slow: boolean;
}

export function holds(reason: string, evidence: Record<string, unknown>): Verdict {
  return { verdict: "holds", reason, evidence };
}

export function fails(reason: string, evidence: Record<string, unknown>): Verdict {
  return { verdict: "fails", reason, evidence };
}

export function undecided(reason: string, evidence: Record<string, unknown>): Verdict {
  return { verdict: "undecided", reason, evidence };
}
