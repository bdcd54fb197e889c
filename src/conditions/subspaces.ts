/** Rational subspaces that the moves keep or permute, looked for exactly. */
import { apply, type IntegerMatrix } from "../dual/matrix.js";
import type { Move } from "../walk/walk.js";
import { nullSpace, Span, spanOf } from "./elimination.js";
import { combine, identity, matrixKey } from "./matrix.js";

/** Most members of a finite union that is looked for. */
const MOST_MEMBERS = 64;

/**
 * Proper subspaces spanned by coordinate vectors whose images under products of moves are
 * finitely many: bases of all images, or undefined where no coordinate subspace has that.
 */
export function permutedSubspaces(moves: readonly Move[]): bigint[][][] | undefined {
  const d = moves[0].matrix.length;
  const unit = identity(d);
  for (let size = 1; size < d; size++) {
    for (let subset = 1; subset < 1 << d; subset++) {
      const chosen = unit.filter((_, i) => (subset >> i) & 1);
      if (chosen.length !== size) continue;
      const orbit = orbitOf(chosen, moves);
      if (orbit !== undefined) return orbit;
    }
  }
  return undefined;
}

function orbitOf(start: readonly (readonly bigint[])[], moves: readonly Move[]): bigint[][][] | undefined {
  const members: bigint[][][] = [spanOf(start).basis()];
  const seen = new Set([matrixKey(members[0])]);
  for (let next = 0; next < members.length; next++) {
    for (const { matrix } of moves) {
      const image = spanOf(members[next].map((v) => apply(matrix, v))).basis();
      const key = matrixKey(image);
      if (seen.has(key)) continue;
      if (members.length === MOST_MEMBERS) return undefined;
      seen.add(key);
      members.push(image);
    }
  }
  return members;
}

/**
 * Whether some basis makes every move triangular with diagonal entries 1 or -1, one after
 * the other: a chain of common eigenvectors (signs may differ from move to move). Then
 * every product has only the eigenvalues 1 and -1.
 */
export function signedFlag(moves: readonly Move[]): bigint[][] | undefined {
  const d = moves[0].matrix.length;
  const flag: bigint[][] = [];
  while (flag.length < d) {
    const next = commonEigenvector(moves, flag);
    if (next === undefined) return undefined;
    flag.push(next);
  }
  return flag;
}

/** A vector outside `flag` that every move maps to itself or its negative, modulo the span of `flag`. */
function commonEigenvector(moves: readonly Move[], flag: readonly bigint[][]): bigint[] | undefined {
  const d = moves[0].matrix.length;
  // Functionals that vanish on the flag: x is zero modulo the flag exactly if they all vanish at x.
  const functionals = flag.length === 0 ? identity(d) : nullSpace(flag, d);
  const equations = (matrix: IntegerMatrix, sign: bigint) => {
    const difference = combine(1n, matrix, -sign, identity(d));
    return functionals.map((f) => difference[0].map((_, j) => f.reduce((sum, x, i) => sum + x * difference[i][j], 0n)));
  };
  const within = (spaces: readonly bigint[][], index: number): bigint[] | undefined => {
    const candidates = nullSpace(spaces, d);
    const held = spanOf(flag);
    const outside = candidates.find((v) => !held.has(v));
    if (outside === undefined || index === moves.length) return outside;
    for (const sign of [1n, -1n]) {
      const found = within([...spaces, ...equations(moves[index].matrix, sign)], index + 1);
      if (found !== undefined) return found;
    }
    return undefined;
  };
  return within([], 0);
}

/** The smallest subspace that holds v and that every move keeps. */
export function spun(v: readonly bigint[], moves: readonly Move[]): bigint[][] {
  const span = new Span();
  const vectors: (readonly bigint[])[] = [];
  const add = (u: readonly bigint[]) => {
    if (span.add(u)) vectors.push(u);
  };
  add(v);
  for (let next = 0; next < vectors.length; next++) {
    for (const { matrix } of moves) add(apply(matrix, vectors[next]));
  }
  return span.basis();
}
