/**
 * When is the orbit of a point x finite, translations included? If no finite set of
 * rational vectors but {0} is kept by the A_i (as under strong irreducibility), exactly if
 * every displacement (A_i - I) x + b_i is rational. For in the rational vector space
 * (R/Q)^d the affine moves then have a finite orbit of x, hence a common fixed point, its
 * barycentre c; the orbit of x - c under the A_i is finite, so x = c there. Conversely x and
 * its images then lie in x + (1/q) Z^d modulo Z^d for some q.
 */
import { ExactFault } from "../exact/fault.js";
import type { ExactNumber } from "../exact/number.js";
import { exactFromText } from "../exact/read.js";
import type { Move } from "../walk/walk.js";

export type DisplacementKind = "rational" | "irrational" | "unproved";

function kindOfSum(terms: readonly { readonly factor: bigint; readonly number: ExactNumber }[]): DisplacementKind {
  const irrational = terms.filter(({ number }) => number.rational === undefined);
  if (irrational.length === 0) return "rational";
  if (irrational.length === 1 && irrational[0].number.kind === "algebraic") return "irrational";
  try {
    const text = irrational.map(({ factor, number }) => `(${factor})*(${number.text})`).join("+");
    const { kind } = exactFromText(text);
    return kind === "rational" ? "rational" : kind === "algebraic" ? "irrational" : "unproved";
  } catch (error) {
    // Roots of polynomials have no expression to add up.
    if (error instanceof ExactFault) return "unproved";
    throw error;
  }
}

/** The kind of (A - I) x + b: irrational where one coordinate is proved to be. */
export function displacementKind({ matrix, translation }: Move, x: readonly ExactNumber[]): DisplacementKind {
  const kinds = matrix.map((row, i) => {
    const terms = row.flatMap((a, j) => {
      const factor = i === j ? a - 1n : a;
      return factor === 0n ? [] : [{ factor, number: x[j] }];
    });
    const b = translation?.[i];
    return kindOfSum(b === undefined ? terms : [...terms, { factor: 1n, number: b }]);
  });
  return kinds.includes("irrational") ? "irrational" : kinds.includes("unproved") ? "unproved" : "rational";
}

/** Whether the moves take x to finitely many points, under strong irreducibility; undefined where not proved. */
export function isTrapped(moves: readonly Move[], x: readonly ExactNumber[]): boolean | undefined {
  const translations = moves.flatMap((move) => move.translation ?? []);
  const rationalMoves = translations.every((b) => b.rational !== undefined);
  // With rational translations only rational points have rational displacements.
  if (rationalMoves && x.some((c) => c.kind === "algebraic")) return false;
  const kinds = moves.map((move) => displacementKind(move, x));
  if (kinds.includes("irrational")) return false;
  return kinds.includes("unproved") ? undefined : true;
}
