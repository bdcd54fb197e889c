/** What a matrix does to spaces built from vectors, as integer matrices. */
import { type IntegerMatrix, inverse, multiply } from "../dual/matrix.js";

function matrixOfColumns(columns: readonly (readonly bigint[])[]): bigint[][] {
  return columns[0].map((_, i) => columns.map((column) => column[i]));
}

/**
 * X -> A X A^-1 on matrices of trace 0, in the basis of the E_ij (i not j) and the
 * E_ii - E_{i+1,i+1}; of size d^2 - 1.
 */
export function adjoint(a: IntegerMatrix): bigint[][] {
  const d = a.length;
  const back = inverse(a);
  const image = (x: IntegerMatrix) => {
    const y = multiply(multiply(a, x), back);
    let sum = 0n;
    const diagonal = y.slice(0, d - 1).map((row, i) => {
      sum += row[i];
      return sum;
    });
    return [...y.flatMap((row, i) => row.filter((_, j) => j !== i)), ...diagonal];
  };
  const unit = (entries: readonly (readonly [number, number, bigint])[]) => {
    const x = a.map((row) => row.map(() => 0n));
    for (const [i, j, value] of entries) x[i][j] = value;
    return x;
  };
  const columns: bigint[][] = [];
  for (let i = 0; i < d; i++) for (let j = 0; j < d; j++) if (i !== j) columns.push(image(unit([[i, j, 1n]])));
  for (let i = 0; i + 1 < d; i++)
    columns.push(
      image(
        unit([
          [i, i, 1n],
          [i + 1, i + 1, -1n],
        ]),
      ),
    );
  return matrixOfColumns(columns);
}

/** The symmetric (sign 1: e_i e_j, i <= j) or alternating (-1: e_i ^ e_j, i < j) square of A. */
export function square(a: IntegerMatrix, sign: 1n | -1n): bigint[][] {
  const d = a.length;
  const pairs: [number, number][] = [];
  for (let i = 0; i < d; i++) for (let j = sign === 1n ? i : i + 1; j < d; j++) pairs.push([i, j]);
  // (A e_i)(A e_j) = sum over k, l of A_ki A_lj e_k e_l, gathered by pairs.
  const columns = pairs.map(([i, j]) =>
    pairs.map(([k, l]) => a[k][i] * a[l][j] + (k === l ? 0n : sign * a[l][i] * a[k][j])),
  );
  return matrixOfColumns(columns);
}
