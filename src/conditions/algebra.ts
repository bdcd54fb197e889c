/**
 * The algebra spanned by the products of the moves (equally, by the group that they
 * generate, since an inverse is a polynomial in the matrix), exactly over Q.
 */
import { type IntegerMatrix, multiply } from "../dual/matrix.js";
import type { Move } from "../walk/walk.js";
import { nullSpace, Span } from "./elimination.js";
import { combine, identity, trace } from "./matrix.js";
import { followed, letters, type Word } from "./words.js";

/** Products that form a basis of the algebra; the empty product is not among them. */
export function algebraBasis(moves: readonly Move[]): Word[] {
  const alphabet = letters(moves);
  const span = new Span();
  const basis: Word[] = [];
  const add = (word: Word) => {
    if (span.add(word.matrix.flat())) basis.push(word);
  };
  alphabet.forEach(add);
  // A product of basis words with a letter lies in the span once it was tried: closed under all products.
  for (let next = 0; next < basis.length && basis.length < moves[0].matrix.length ** 2; next++) {
    for (const letter of alphabet) add(followed(basis[next], letter));
  }
  return basis;
}

function combination(coefficients: readonly bigint[], matrices: readonly IntegerMatrix[]): bigint[][] {
  const d = matrices[0].length;
  let sum = identity(d).map((row) => row.map(() => 0n));
  coefficients.forEach((c, i) => {
    if (c !== 0n) sum = combine(1n, sum, c, matrices[i]);
  });
  return sum;
}

/**
 * A basis of the radical: the x of the algebra with tr(x y) = 0 for every y of it. (In
 * characteristic 0 that form's kernel is the radical, since every simple module of the
 * algebra occurs in Q^d.)
 */
export function radical(basis: readonly Word[]): bigint[][][] {
  const matrices = basis.map((word) => word.matrix);
  const gram = matrices.map((x) => matrices.map((y) => trace(multiply(x, y))));
  return nullSpace(gram, basis.length).map((c) => combination(c, matrices));
}

/** The images of all columns of the matrices: for a radical not 0, an invariant proper subspace that is not 0. */
export function imageOf(matrices: readonly IntegerMatrix[]): bigint[][] {
  const span = new Span();
  for (const m of matrices) for (const j of m.keys()) span.add(m.map((row) => row[j]));
  return span.basis();
}

/** d x d unknowns X with L(X) = 0, L given on the matrix units. */
function solveMatrices(d: number, equations: (unit: IntegerMatrix) => bigint[]): bigint[][][] {
  const columns: bigint[][] = [];
  for (let i = 0; i < d; i++) {
    for (let j = 0; j < d; j++) {
      columns.push(equations(identity(d).map((row, k) => row.map((_, l) => (k === i && l === j ? 1n : 0n)))));
    }
  }
  const rows = columns[0].map((_, r) => columns.map((column) => column[r]));
  return nullSpace(rows, d * d).map((x) => Array.from({ length: d }, (_, i) => x.slice(d * i, d * (i + 1))));
}

/** A basis of the matrices that commute with every move. */
export function commutant(moves: readonly Move[]): bigint[][][] {
  return solveMatrices(moves[0].matrix.length, (x) =>
    moves.flatMap(({ matrix }) => combine(1n, multiply(matrix, x), -1n, multiply(x, matrix)).flat()),
  );
}

/** A basis of the bilinear forms S with A^T S A = S for every move A, symmetric (sign 1) or alternating (-1). */
export function invariantForms(moves: readonly Move[], sign: 1n | -1n): bigint[][][] {
  const d = moves[0].matrix.length;
  return solveMatrices(d, (s) => {
    const symmetry = combine(
      1n,
      s,
      -sign,
      s.map((_, j) => s.map((row) => row[j])),
    );
    const invariance = moves.flatMap(({ matrix }) => {
      const transposed = matrix.map((_, j) => matrix.map((row) => row[j]));
      return combine(1n, multiply(multiply(transposed, s), matrix), -1n, s).flat();
    });
    return [...symmetry.flat(), ...invariance];
  });
}

/** Whether a symmetric matrix or its negative is positive definite: leading principal minors (Sylvester). */
export function isDefinite(s: IntegerMatrix): boolean {
  // Bareiss' elimination without exchanges: the pivots are the leading principal minors.
  const m = s.map((row) => [...row]);
  const sign = m[0][0] < 0n ? -1n : 1n;
  let before = 1n;
  for (let k = 0; k < m.length; k++) {
    const minor = m[k][k];
    const expected = sign < 0n && k % 2 === 0 ? -minor : minor;
    if (expected <= 0n) return false;
    for (let i = k + 1; i < m.length; i++) {
      for (let j = k + 1; j < m.length; j++) m[i][j] = (m[i][j] * minor - m[i][k] * m[k][j]) / before;
    }
    before = minor;
  }
  return true;
}

/** A positive definite form that every move keeps, looked for among small combinations of a basis of the forms. */
export function definiteForm(moves: readonly Move[]): bigint[][] | undefined {
  const forms = invariantForms(moves, 1n);
  const candidates = forms.flatMap((f, i) =>
    forms.slice(i).flatMap((g, j) => (j === 0 ? [f] : [combine(1n, f, 1n, g), combine(1n, f, -1n, g)])),
  );
  const sum = forms.slice(1).reduce((total, f) => combine(1n, total, 1n, f), forms[0] ?? []);
  return [...candidates, ...(forms.length > 0 ? [sum] : [])].find(isDefinite);
}
