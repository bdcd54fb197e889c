/** The second eigenvalue on one kind of orbit: exactly where that is easy, else numerically. */
import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { OrbitOperator } from "../kernel/finite.js";
import type { Kernel } from "../kernel/kernel.js";
import { ARNOLDI_SPARE, arnoldi } from "./arnoldi.js";
import { type Found, LANCZOS_VECTORS, lanczos } from "./lanczos.js";

/** Up to so many points all eigenvalues are computed, from the matrix written out. */
export const DENSE = 120;
/** From so many points on, longer bases cost more than the restarts that they save. */
const LARGE = 20_000;
/** Bytes that a basis may take; a smaller memory limit takes less. */
const BASIS_BYTES = 2 ** 28;

export interface SecondRequest {
  readonly table: Uint32Array;
  readonly weights: readonly number[];
  readonly symmetric: boolean;
  readonly seed: bigint;
  readonly tolerance: number;
  /** Products with the operator that may be spent. */
  readonly most: number;
}

export interface Second extends Found {
  readonly modulus: number;
  readonly method: string;
}

function dense(table: Uint32Array, weights: readonly number[], symmetric: boolean): Second {
  const moves = weights.length;
  const size = table.length / moves;
  const matrix = Matrix.zeros(size, size);
  // Less 1/size everywhere: the constant's eigenvalue becomes 0, the others stay.
  for (let i = 0; i < size; i++) {
    for (let m = 0; m < moves; m++) {
      const j = table[i * moves + m] as number;
      matrix.set(i, j, matrix.get(i, j) + (weights[m] as number));
    }
  }
  matrix.sub(1 / size);
  if (symmetric) matrix.add(matrix.transpose()).mul(0.5);
  const found = new EigenvalueDecomposition(matrix, { assumeSymmetric: symmetric });
  let [re, im, modulus, column] = [0, 0, -1, 0];
  for (let i = 0; i < size; i++) {
    const [a, b] = [found.realEigenvalues[i] as number, found.imaginaryEigenvalues[i] as number];
    const here = Math.sqrt(a * a + b * b);
    if (here > modulus && b >= 0) [re, im, modulus, column] = [a, b, here, i];
  }
  // |M z - lambda z| / |z| of z = x + i y, outright.
  const x = found.eigenvectorMatrix.getColumnVector(column);
  const y = im === 0 ? Matrix.zeros(size, 1) : found.eigenvectorMatrix.getColumnVector(column + 1);
  const square = (v: Matrix) => v.dot(v);
  const u = matrix.mmul(x).sub(Matrix.mul(x, re)).add(Matrix.mul(y, im));
  const v = matrix.mmul(y).sub(Matrix.mul(y, re)).sub(Matrix.mul(x, im));
  const residual = Math.sqrt((square(u) + square(v)) / (square(x) + square(y)));
  return { re, im, modulus, residual, products: 0, method: "all eigenvalues of the orbit's matrix" };
}

/**
 * The eigenvalue of largest modulus on functions of mean zero, of an orbit of 2 points or
 * more. Estimated: the residual bounds the distance to SOME eigenvalue where the operator
 * is symmetric, and not even that otherwise; that it is the second is not proved.
 * @throws LimitError where the vectors do not fit in memory
 */
export function secondEigenvalue(kernel: Kernel, request: SecondRequest): Second {
  const { table, weights, symmetric, seed, tolerance, most } = request;
  const size = table.length / weights.length;
  if (size <= DENSE) return dense(table, weights, symmetric);
  const found = kernel.scoped(() => {
    if (symmetric) {
      return lanczos(new OrbitOperator(kernel, table, weights, LANCZOS_VECTORS), seed, tolerance, most);
    }
    const bytes = Math.min(BASIS_BYTES, 0.9 * kernel.memoryLimit - table.byteLength);
    const room = Math.max(
      12,
      Math.min(size < LARGE ? 60 : 40, size - 1, Math.floor(bytes / (8 * size)) - ARNOLDI_SPARE),
    );
    const operator = new OrbitOperator(kernel, table, weights, room + ARNOLDI_SPARE);
    return arnoldi(operator, seed, tolerance, most, room);
  });
  const modulus = Math.sqrt(found.re * found.re + found.im * found.im);
  const converged = found.residual <= 2 * tolerance ? "" : `, not converged after ${found.products} products`;
  return { ...found, modulus, method: `${symmetric ? "Lanczos" : "Arnoldi"}${converged}` };
}
