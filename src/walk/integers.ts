/** Exact small helpers for integer matrices (rows of BigInt). */
import { LimitError } from "../errors.js";

export type IntegerMatrix = readonly (readonly bigint[])[];

/**
 * The determinant of a square matrix, by fraction-free elimination (Bareiss 1968): every
 * division is exact, and entries stay minors of the matrix.
 */
export function determinant(matrix: IntegerMatrix): bigint {
  const a = matrix.map((row) => [...row]);
  const n = a.length;
  let sign = 1n;
  let previous = 1n;
  for (let k = 0; k < n - 1; k++) {
    const pivot = a.findIndex((row, i) => i >= k && row[k] !== 0n);
    if (pivot < 0) return 0n;
    if (pivot !== k) {
      [a[k], a[pivot]] = [a[pivot], a[k]];
      sign = -sign;
    }
    for (let i = k + 1; i < n; i++) {
      for (let j = k + 1; j < n; j++) a[i][j] = (a[i][j] * a[k][k] - a[i][k] * a[k][j]) / previous;
    }
    previous = a[k][k];
  }
  return sign * a[n - 1][n - 1];
}

export function transpose(a: IntegerMatrix): bigint[][] {
  return a[0].map((_, j) => a.map((row) => row[j]));
}

/** The product a b. */
export function multiplyMatrices(a: IntegerMatrix, b: IntegerMatrix): bigint[][] {
  return a.map((row) => b[0].map((_, j) => row.reduce((sum, c, k) => sum + c * b[k][j], 0n)));
}

export function identityMatrix(d: number): bigint[][] {
  return Array.from({ length: d }, (_, i) => Array.from({ length: d }, (_, j) => (i === j ? 1n : 0n)));
}

/**
 * The integer inverse of a matrix of determinant 1 or -1: the adjugate over the determinant.
 * @throws RangeError for another determinant.
 */
export function inverseMatrix(a: IntegerMatrix): bigint[][] {
  const whole = determinant(a);
  if (whole !== 1n && whole !== -1n) {
    throw new RangeError(`inverseMatrix: determinant ${whole}; accepted: 1 or -1`);
  }
  const without = (i: number, j: number) => a.filter((_, r) => r !== i).map((row) => row.filter((_, c) => c !== j));
  return a.map((_, i) =>
    a.map((_, j) => {
      const minor = a.length === 1 ? 1n : determinant(without(j, i));
      return (i + j) % 2 === 0 ? whole * minor : -whole * minor;
    }),
  );
}

/**
 * The entries row by row as signed 64-bit integers, for kernels.
 * @throws LimitError where an entry does not fit.
 */
export function matrixAsI64(matrix: IntegerMatrix): BigInt64Array<ArrayBuffer> {
  const entries = matrix.flat();
  const large = entries.find((c) => c !== BigInt.asIntN(64, c));
  if (large !== undefined) {
    throw new LimitError(
      `the matrix entry ${large} is beyond 64 bits (-2^63 to 2^63 - 1), the limit of this computation`,
    );
  }
  return BigInt64Array.from(entries);
}
