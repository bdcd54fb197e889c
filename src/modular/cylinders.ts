/**
 * The stationary measure on directions, in pieces on which the growth of one move is a
 * logarithm of linear forms.
 *
 * A walk of right products A_1 A_2 ... tends to a random direction, whose law nu satisfies
 * nu = sum p_i A_i nu. Read as a reduced word in u, v, V, a direction that begins with u lies
 * in the cone C of directions with coordinates of one sign: u v = a = [[1,1],[0,1]] and
 * u V = b = [[1,0],[1,1]] up to sign, and such a word is a product of a's and b's. Words that
 * begin with v or V lie in v C and V C; the three make up all directions.
 *
 * Let m_j be the law on C of the limit word, from the states j of the expanded walk (see
 * passage.ts), as far as it begins with u. Then m = P_a a m + P_b b m with P_a = F_u F_v and
 * P_b = F_u F_V, and nu is a sum of pieces c m, moved by a matrix P: row vectors c. A piece is
 * cut into c P_a m moved by P a and c P_b m moved by P b as long as some axis, or some move's
 * preimage of an axis, is inside P C. Then on the piece, with the norm |v| = |v_1| + |v_2|,
 * |A_i P (t, 1)| = alpha_i t + beta_i for each move, and alpha, beta are integers from 1 on.
 */
import { applyBound, type Dense, multiplyBound } from "./bounds.js";
import type { Passage } from "./passage.js";
import type { MatrixBounds, VectorBounds } from "./solve.js";
import { inverse2, MATRIX_OF, type Matrix2, multiply2 } from "./words.js";

export interface Form {
  readonly alpha: number;
  readonly beta: number;
}

export interface Cylinder {
  readonly weights: VectorBounds;
  /** Of P (t, 1) itself. */
  readonly base: Form;
  /** Of A_i P (t, 1), a move each. */
  readonly moved: readonly Form[];
}

export interface Directions {
  readonly states: number;
  /** P_a and P_b. */
  readonly steps: { readonly a: MatrixBounds; readonly b: MatrixBounds };
  readonly cylinders: readonly Cylinder[];
}

const A: Matrix2 = [1n, 1n, 0n, 1n];
const B: Matrix2 = [1n, 0n, 1n, 1n];
/** Integers below this are doubles, and so are sums of two. */
const LARGEST = 1n << 52n;

const transposed = (m: Dense, n: number): Dense => Float64Array.from(m, (_, i) => m[(i % n) * n + Math.floor(i / n)]!);

/** Row vector times matrix, to both sides; the matrix is given transposed. */
export function rowTimes(c: VectorBounds, transposedMatrix: MatrixBounds): VectorBounds {
  return {
    low: applyBound(transposedMatrix.low, c.low, "low"),
    high: applyBound(transposedMatrix.high, c.high, "high"),
  };
}

export function transpose(m: MatrixBounds, n: number): MatrixBounds {
  return { low: transposed(m.low, n), high: transposed(m.high, n) };
}

export function multiplyBounds(x: MatrixBounds, y: MatrixBounds, n: number): MatrixBounds {
  return { low: multiplyBound(x.low, y.low, n, "low"), high: multiplyBound(x.high, y.high, n, "high") };
}

/** |.|_1 of M's columns: the linear form that |M (t, 1)|_1 is where both lie in one quadrant. */
function formOf(m: Matrix2): Form | undefined {
  const abs = (x: bigint) => (x < 0n ? -x : x);
  const [alpha, beta] = [abs(m[0]) + abs(m[2]), abs(m[1]) + abs(m[3])];
  return alpha < LARGEST && beta < LARGEST ? { alpha: Number(alpha), beta: Number(beta) } : undefined;
}

/** @returns undefined where pieces would be more than `most`, or their entries too large for doubles */
export function directionsOf(walk: Passage, matrices: readonly Matrix2[], most: number): Directions | undefined {
  const n = walk.states;
  const { u, v, V } = walk.first;
  const a = multiplyBounds(u, v, n);
  const b = multiplyBounds(u, V, n);
  const [at, bt] = [transpose(a, n), transpose(b, n)];
  const identity: Matrix2 = [1n, 0n, 0n, 1n];
  const breaks = [identity, ...matrices.map(inverse2)].flatMap(([p, q, r, s]) => [[p, r] as const, [q, s] as const]);
  /** Whether direction d is inside P C: both coordinates of P^-1 d of one sign. */
  const cuts = (p: Matrix2) => {
    const [w, x, y, z] = inverse2(p);
    return breaks.some(([d, e]) => (w * d + x * e) * (y * d + z * e) > 0n);
  };
  const pieces: { weights: VectorBounds; matrix: Matrix2 }[] = [
    { weights: walk.initial, matrix: identity },
    { weights: rowTimes(walk.initial, transpose(v, n)), matrix: MATRIX_OF.v },
    { weights: rowTimes(walk.initial, transpose(V, n)), matrix: MATRIX_OF.V },
  ];
  const cylinders: Cylinder[] = [];
  for (let piece = pieces.pop(); piece !== undefined; piece = pieces.pop()) {
    const { weights, matrix } = piece;
    if (weights.high.every((x) => x === 0)) continue;
    if (cuts(matrix)) {
      pieces.push({ weights: rowTimes(weights, at), matrix: multiply2(matrix, A) });
      pieces.push({ weights: rowTimes(weights, bt), matrix: multiply2(matrix, B) });
      if (pieces.length + cylinders.length > most) return undefined;
      continue;
    }
    const base = formOf(matrix);
    const moved = matrices.map((m) => formOf(multiply2(m, matrix)));
    if (base === undefined || moved.some((form) => form === undefined)) return undefined;
    cylinders.push({ weights, base, moved: moved as Form[] });
  }
  return { states: n, steps: { a, b }, cylinders };
}
