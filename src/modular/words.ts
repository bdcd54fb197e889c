/**
 * Matrices of GL_2(Z) up to sign as words: PSL_2(Z) is the free product of <u> of order 2
 * and <v> of order 3, u = [[0,-1],[1,0]], v = [[0,1],[-1,-1]]; determinant -1 adds the
 * swap s = [[0,1],[1,0]], which commutes with u (up to sign) and exchanges v and V = v^2.
 * Every matrix is +-w or +-w s with one reduced word w (letters u and v or V in turn).
 */

/** Row-major 2 x 2. */
export type Matrix2 = readonly [bigint, bigint, bigint, bigint];

export type Letter = "u" | "v" | "V";

export interface Word {
  readonly letters: readonly Letter[];
  /** Whether the swap follows: determinant -1. */
  readonly swap: boolean;
  /** The matrix is sign x (letters) x (swap). */
  readonly sign: 1 | -1;
}

export const MATRIX_OF: Readonly<Record<Letter, Matrix2>> = {
  u: [0n, -1n, 1n, 0n],
  v: [0n, 1n, -1n, -1n],
  V: [-1n, -1n, 1n, 0n],
};
export const SWAP: Matrix2 = [0n, 1n, 1n, 0n];

export function multiply2(a: Matrix2, b: Matrix2): Matrix2 {
  return [a[0] * b[0] + a[1] * b[2], a[0] * b[1] + a[1] * b[3], a[2] * b[0] + a[3] * b[2], a[2] * b[1] + a[3] * b[3]];
}

export function determinant2(a: Matrix2): bigint {
  return a[0] * a[3] - a[1] * a[2];
}

/** The inverse; the determinant is 1 or -1. */
export function inverse2(a: Matrix2): Matrix2 {
  const d = determinant2(a);
  return [a[3] * d, -a[1] * d, -a[2] * d, a[0] * d];
}

export function productOf(letters: readonly Letter[]): Matrix2 {
  return letters.reduce<Matrix2>((m, x) => multiply2(m, MATRIX_OF[x]), [1n, 0n, 0n, 1n]);
}

/** The letter that the swap turns it into. */
export function swapped(x: Letter): Letter {
  return x === "u" ? "u" : x === "v" ? "V" : "v";
}

/** Reduces modulo u u = 1, v v = V, V V = v, v V = V v = 1. */
export function reduceWord(letters: Iterable<Letter>): Letter[] {
  const out: Letter[] = [];
  for (const x of letters) {
    const last = out.at(-1);
    if (last === undefined || (last === "u") !== (x === "u")) out.push(x);
    else {
      out.pop();
      if (x !== "u" && last === x) out.push(swapped(x));
    }
  }
  return out;
}

/** The longest word that a matrix may have here: its length is about twice the sum of its continued fraction. */
export const LONGEST_WORD = 100_000;

/**
 * The word of a matrix of determinant 1 or -1, by the Euclidean algorithm on its first column.
 * @throws RangeError where the word would be longer than LONGEST_WORD
 */
export function wordOf(matrix: Matrix2): Word {
  const swap = determinant2(matrix) === -1n;
  let [a, b, c, d] = swap ? multiply2(matrix, SWAP) : matrix;
  const letters: Letter[] = [];
  // u v = [[1, 1], [0, 1]] up to sign, and V u its inverse.
  const translate = (q: bigint) => {
    const times = q < 0n ? -q : q;
    if (letters.length + 2 * Number(times) > LONGEST_WORD) {
      throw new RangeError(`the word of [[${matrix[0]}, ${matrix[1]}], [${matrix[2]}, ${matrix[3]}]] is too long`);
    }
    for (let i = 0n; i < times; i++) {
      if (q > 0n) letters.push("u", "v");
      else letters.push("V", "u");
    }
  };
  while (c !== 0n) {
    let q = a / c;
    if (a % c !== 0n && a < 0n !== c < 0n) q -= 1n;
    translate(q);
    letters.push("u");
    // matrix = [[1, q], [0, 1]] u rest, so rest = u^-1 [[1, -q], [0, 1]] matrix
    [a, b, c, d] = [c, d, -(a - q * c), -(b - q * d)];
  }
  translate(b * d);
  const reduced = reduceWord(letters);
  let product = productOf(reduced);
  if (swap) product = multiply2(product, SWAP);
  const sign = product.every((x, i) => x === matrix[i]) ? 1 : -1;
  return { letters: reduced, swap, sign };
}
