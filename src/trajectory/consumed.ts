/** The bits of a start that a product of moves consumes: log2 of its size. */
import { bitLength } from "../exact/rational.js";
import type { Walk } from "../walk/walk.js";

type Matrix = readonly (readonly bigint[])[];

function absolute(x: bigint): bigint {
  return x < 0n ? -x : x;
}

/** Largest row sum of absolute entries. */
export function rowSumNorm(matrix: Matrix): bigint {
  let norm = 0n;
  for (const row of matrix) {
    const sum = row.reduce((s, x) => s + absolute(x), 0n);
    if (sum > norm) norm = sum;
  }
  return norm;
}

/** Smallest integer b with 2^b >= n, for n >= 1. */
function ceilLog2(n: bigint): number {
  return bitLength(n - 1n);
}

function times(a: Matrix, b: Matrix): Matrix {
  return a.map((row) => b.map((_, j) => row.reduce((s, x, k) => s + x * (b[k] as readonly bigint[])[j]!, 0n)));
}

/** A_to-1 ... A_from, by halves, so that the factors of a product are of like size. */
function product(matrices: readonly Matrix[], choices: ArrayLike<number>, from: number, to: number): Matrix {
  if (to - from === 1) return matrices[choices[from] as number] as Matrix;
  const middle = (from + to) >> 1;
  return times(product(matrices, choices, middle, to), product(matrices, choices, from, middle));
}

/** Work (multiplications) and bits up to which the product is multiplied out. */
const MOST_WORK = 2e6;
const MOST_BITS = 2e5;

export interface Consumed {
  /** Bits, rounded up. */
  readonly bits: number;
  /** `exact`: of the product multiplied out. `bound`: the product consumes at most so many. */
  readonly kind: "exact" | "bound";
}

/**
 * log2 of the largest row sum of |A_n ... A_1|, rounded up.
 * @param bound bits that the product consumes at most, from a plan of the walk; absent: from the moves' norms
 */
export function consumedBits(walk: Walk, choices: ArrayLike<number>, bound?: number): Consumed {
  const n = choices.length;
  if (n === 0) return { bits: 0, kind: "exact" };
  const logs = walk.moves.map((m) => ceilLog2(rowSumNorm(m.matrix)));
  let sum = 0;
  for (let i = 0; i < n; i++) sum += logs[choices[i] as number] as number;
  if (n * walk.dimension ** 3 <= MOST_WORK && sum <= MOST_BITS) {
    const matrices = walk.moves.map((m) => m.matrix);
    return { bits: ceilLog2(rowSumNorm(product(matrices, choices, 0, n))), kind: "exact" };
  }
  return { bits: Math.min(sum, Math.ceil(bound ?? sum)), kind: "bound" };
}
