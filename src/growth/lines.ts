/**
 * Dimension 2, exactly: sets that are finite or keep a finite union of lines.
 *
 * Their group is finite or fixes one line or two, so that a binary quadratic form Q, not 0,
 * is preserved up to sign by every move: a definite form averaged over the finite group; the
 * square of a linear form; the product of two. Conversely such a Q of discriminant D shows:
 * - D < 0: the group preserves a definite form and is discrete, so finite;
 * - D = 0 or D a square: the lines Q = 0 are rational, eigenvalues on them are +-1, and
 *   products grow at most linearly;
 * - D > 0 otherwise: two conjugate lines, kept or exchanged by each move; log of the norm is
 *   within a bound of |S|, S the sum of l_i = log |eigenvalue on the first line|, signs
 *   turning over at each exchange.
 * Q is found as a common eigenvector of the moves' actions on forms, for the eigenvalues +-1.
 */
import { gcdBig } from "../exact/rational.js";
import type { Walk } from "../walk/walk.js";

type Vector = readonly bigint[];
type Matrix = readonly (readonly bigint[])[];

export type PlanarGroup =
  | { readonly kind: "finite" | "rational line"; readonly form: Vector }
  | {
      readonly kind: "two lines";
      readonly form: Vector;
      /** For each move: whether it exchanges the lines, and which of them it expands (0: neither). */
      readonly actions: readonly { readonly exchanges: boolean; readonly sign: -1 | 0 | 1 }[];
    };

/** The matrix of Q -> Q o A on coefficients (a, b, c) of a x^2 + b x y + c y^2. */
function onForms(m: Matrix): bigint[][] {
  const [[p, q], [r, s]] = m as [[bigint, bigint], [bigint, bigint]];
  return [
    [p * p, p * r, r * r],
    [2n * p * q, p * s + q * r, 2n * r * s],
    [q * q, q * s, s * s],
  ];
}

/** A basis, in integers, of the vectors x with M x = 0 (rows of M given). */
function kernel(rows: Matrix, columns: number): bigint[][] {
  const m = rows.map((row) => [...row]);
  const pivots: number[] = [];
  let rank = 0;
  for (let c = 0; c < columns; c++) {
    const at = m.findIndex((row, i) => i >= rank && row[c] !== 0n);
    if (at < 0) continue;
    [m[rank], m[at]] = [m[at] as bigint[], m[rank] as bigint[]];
    const pivot = m[rank] as bigint[];
    for (const [i, row] of m.entries()) {
      const x = row[c] as bigint;
      if (i !== rank && x !== 0n) m[i] = row.map((y, j) => y * (pivot[c] as bigint) - x * (pivot[j] as bigint));
    }
    pivots.push(c);
    rank++;
  }
  const free = Array.from({ length: columns }, (_, c) => c).filter((c) => !pivots.includes(c));
  return free.map((f) => {
    // x_f = product of the pivots makes every other coordinate an integer.
    const scale = pivots.reduce((s, c, i) => s * (m[i]?.[c] as bigint), 1n);
    const x = new Array<bigint>(columns).fill(0n);
    x[f] = scale;
    for (const [i, c] of pivots.entries()) x[c] = (-scale * (m[i]?.[f] as bigint)) / (m[i]?.[c] as bigint);
    return primitive(x);
  });
}

function primitive(x: readonly bigint[]): bigint[] {
  const g = x.reduce(gcdBig, 0n);
  return g === 0n ? [...x] : x.map((c) => c / g);
}

/** A form that every move preserves up to sign, or undefined: then the set is strongly irreducible and infinite. */
function invariantForm(walk: Walk): bigint[] | undefined {
  // Spaces of forms that all moves so far preserve up to sign; their dimensions add up to 3 at most.
  let spaces: bigint[][][] = [
    [
      [1n, 0n, 0n],
      [0n, 1n, 0n],
      [0n, 0n, 1n],
    ],
  ];
  for (const { matrix } of walk.moves) {
    const t = onForms(matrix);
    spaces = spaces.flatMap((basis) =>
      [1n, -1n].map((sign) => {
        const images = basis.map((f) => t.map((row, i) => dot(row, f) - sign * (f[i] as bigint)));
        const rows = [0, 1, 2].map((i) => images.map((image) => image[i] as bigint));
        return kernel(rows, basis.length).map((x) =>
          primitive([0, 1, 2].map((i) => basis.reduce((s, f, k) => s + (x[k] as bigint) * (f[i] as bigint), 0n))),
        );
      }),
    );
    spaces = spaces.filter((basis) => basis.length > 0);
    if (spaces.length === 0) return undefined;
  }
  return spaces[0]?.[0];
}

function dot(a: Vector, b: Vector): bigint {
  return a.reduce((s, x, i) => s + x * (b[i] as bigint), 0n);
}

function isSquare(n: bigint): boolean {
  if (n < 2n) return n >= 0n;
  let x = 1n << BigInt((n.toString(2).length + 1) >> 1);
  for (;;) {
    const y = (x + n / x) >> 1n;
    if (y >= x) return x * x === n;
    x = y;
  }
}

/** What the group of a walk in dimension 2 is, where it is not strongly irreducible and infinite. */
export function planarGroup(walk: Walk): PlanarGroup | undefined {
  const form = invariantForm(walk);
  if (form === undefined) return undefined;
  const [a, b, c] = form as [bigint, bigint, bigint];
  const discriminant = b * b - 4n * a * c;
  if (discriminant < 0n) return { kind: "finite", form };
  if (isSquare(discriminant)) return { kind: "rational line", form };
  // The first line is spanned by (-b + sqrt D, 2a): a is not 0, or D were a square.
  const actions = walk.moves.map(({ matrix }) => {
    const [[p, q], [r, s]] = matrix as unknown as [[bigint, bigint], [bigint, bigint]];
    // The cross product of A v and v, split into its rational part and its part with sqrt D.
    const rational = (-p * b + 2n * a * q) * 2n * a - (-r * b + 2n * a * s) * -b - r * discriminant;
    const irrational = 2n * a * p - (-r * b + 2n * a * s) + r * b;
    const exchanges = rational !== 0n || irrational !== 0n;
    // The factor along v is X + Y with X = (2as - rb)/2a, Y = r sqrt D/2a; its conjugate is X - Y.
    const sign = (2n * a * s - r * b) * r;
    return { exchanges, sign: sign > 0n ? 1 : sign < 0n ? -1 : 0 } as const;
  });
  return { kind: "two lines", form, actions };
}
