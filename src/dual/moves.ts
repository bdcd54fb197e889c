/** The dual walk of a walk: what its moves, and their inverses, do to frequencies. */
import type { ExactNumber } from "../exact/number.js";
import { floorDiv } from "../exact/rational.js";
import type { DualMove } from "../kernel/dual.js";
import { type IntegerMatrix, identityMatrix, inverseMatrix, transpose } from "../walk/integers.js";
import type { Walk } from "../walk/walk.js";

const BITS = 128;
const GUARD = 80;

/**
 * Coordinates of the combination sum_j rows_ij x_j modulo 1, in units of 2^-128, each off
 * by at most one unit, as integers from 0 to 2^128 - 1.
 */
function fractions(x: readonly ExactNumber[], rows: IntegerMatrix): bigint[] {
  const most = rows.flat().reduce((m, e) => (e < 0n ? m - e : m + e), 0n);
  // Each x_j is off by a unit of 2^-(128 + guard): the guard covers the entries' sum and the cut.
  const guard = GUARD + most.toString(2).length;
  const fixed = x.map((n) => n.toFixed(BITS + guard));
  return rows.map((row) => {
    const sum = row.reduce((s, e, j) => s + e * (fixed[j] as bigint), 0n);
    return BigInt.asUintN(BITS, floorDiv(sum, 1n << BigInt(guard)));
  });
}

/** A point of the torus in units of 2^-128, each coordinate off by at most one unit. */
export function pointFractions(point: readonly ExactNumber[]): bigint[] {
  return fractions(point, identityMatrix(point.length));
}

/** P: e_k goes to the sum of p_i exp(2 pi i k.b_i) e_{A_i^T k}. */
export function forwardMoves(walk: Walk): DualMove[] {
  return walk.moves.map((move) => ({
    matrix: transpose(move.matrix),
    weight: move.probability.toNumber(),
    ...(move.translation === undefined ? {} : { translation: pointFractions(move.translation) }),
  }));
}

/** P*, by the inverse moves x -> A_i^-1 (x - b_i): e_k goes to the sum of p_i exp(-2 pi i k.A_i^-1 b_i) e_{A_i^-T k}. */
export function adjointMoves(walk: Walk): DualMove[] {
  return walk.moves.map((move) => {
    const back = inverseMatrix(move.matrix);
    const minus = back.map((row) => row.map((e) => -e));
    return {
      matrix: transpose(back),
      weight: move.probability.toNumber(),
      ...(move.translation === undefined ? {} : { translation: fractions(move.translation, minus) }),
    };
  });
}
