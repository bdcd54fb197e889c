/** The moves' probabilities over one common denominator. */
import { gcdBig } from "../exact/rational.js";
import type { Move } from "./walk.js";

/** What products of a walk's moves depend on. */
export interface WeightedMoves {
  readonly dimension: number;
  readonly moves: readonly Pick<Move, "matrix" | "determinant" | "probability">[];
}

export interface IntegerWeights {
  readonly weights: readonly bigint[];
  readonly total: bigint;
}

export function integerWeights(walk: Pick<WeightedMoves, "moves">): IntegerWeights {
  const total = walk.moves.reduce((c, { probability: { den } }) => (c / gcdBig(c, den)) * den, 1n);
  return { weights: walk.moves.map(({ probability: { num, den } }) => num * (total / den)), total };
}
