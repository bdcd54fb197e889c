/** The moves' probabilities over one common denominator. */
import { gcdBig } from "../exact/rational.js";
import type { Walk } from "./walk.js";

export interface IntegerWeights {
  readonly weights: readonly bigint[];
  readonly total: bigint;
}

export function integerWeights(walk: Walk): IntegerWeights {
  const total = walk.moves.reduce((c, { probability: { den } }) => (c / gcdBig(c, den)) * den, 1n);
  return { weights: walk.moves.map(({ probability: { num, den } }) => num * (total / den)), total };
}
