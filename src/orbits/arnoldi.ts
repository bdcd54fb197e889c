/**
 * The eigenvalue of largest modulus of an average that need not be symmetric: Arnoldi's
 * method on functions of mean zero, restarted with an orthonormal basis of the invariant
 * subspace of the small matrix that belongs to its largest eigenvalues (Stewart 2001,
 * a Krylov-Schur restart up to the choice of basis).
 */
import { EigenvalueDecomposition, Matrix, QrDecomposition } from "ml-matrix";
import type { OrbitOperator } from "../kernel/finite.js";
import type { Found } from "./lanczos.js";

interface Pair {
  readonly re: number;
  readonly im: number;
  /** Columns of the real eigenvector matrix: real part, and imaginary part for a complex pair. */
  readonly columns: readonly number[];
}

/** Eigenvalues of a small matrix, largest modulus first, one of each complex pair. */
function spectrum(small: Matrix): { pairs: Pair[]; vectors: Matrix } {
  const found = new EigenvalueDecomposition(small, { assumeSymmetric: false });
  const pairs: Pair[] = [];
  for (let i = 0; i < small.rows; i++) {
    const [re, im] = [found.realEigenvalues[i] as number, found.imaginaryEigenvalues[i] as number];
    if (im > 0) pairs.push({ re, im, columns: [i, i + 1] });
    else if (im === 0) pairs.push({ re, im, columns: [i] });
  }
  pairs.sort((a, b) => b.re ** 2 + b.im ** 2 - (a.re ** 2 + a.im ** 2) || b.re - a.re);
  return { pairs, vectors: found.eigenvectorMatrix };
}

/** The residual of a Ritz pair, computed outright with vectors `at`, ..., `at` + 3. */
function residualOf(operator: OrbitOperator, count: number, pair: Pair, vectors: Matrix, at: number): number {
  const part = (column: number | undefined, to: number) => {
    operator.clear(to);
    if (column !== undefined) for (let j = 0; j < count; j++) operator.add(to, vectors.get(j, column), j);
    return operator.centre(to);
  };
  const [x, y] = [at, at + 1];
  const a = part(pair.columns[0], x);
  const b = part(pair.columns[1], y);
  operator.apply(x, at + 2);
  operator.apply(y, at + 3);
  // P(x + i y) - (re + i im)(x + i y)
  operator.add(at + 2, -pair.re, x);
  operator.add(at + 2, pair.im, y);
  operator.add(at + 3, -pair.re, y);
  operator.add(at + 3, -pair.im, x);
  const [u, v] = [operator.centre(at + 2), operator.centre(at + 3)];
  return Math.sqrt((u * u + v * v) / (a * a + b * b));
}

/** Vectors beyond the basis that `arnoldi` needs. */
export const ARNOLDI_SPARE = 5;

/** @param room size of the basis, at least 6 and below the orbit's size */
export function arnoldi(operator: OrbitOperator, seed: bigint, tolerance: number, most: number, room: number): Found {
  let small = Matrix.zeros(room, room);
  operator.random(0, seed);
  let count = 0;
  let products = 0;
  while (true) {
    let length = 1;
    // Vector `count` is the next of the basis; the column of `small` that it makes is filled in.
    while (count < room && products < most) {
      operator.apply(count, count + 1);
      products++;
      const before = operator.centre(count + 1);
      const { coefficients, length: rest } = operator.orthogonalise(count + 1, count + 1, before);
      for (let j = 0; j <= count; j++) small.set(j, count, coefficients[j] as number);
      count++;
      length = rest;
      if (rest < 1e-13) break;
      operator.scale(count, 1 / rest);
      if (count < room) small.set(count, count - 1, rest);
    }
    const square = small.subMatrix(0, count - 1, 0, count - 1);
    const { pairs, vectors } = spectrum(square);
    const top = pairs[0] as Pair;
    let norm = 0;
    for (let j = 0; j < count; j++) for (const c of top.columns) norm += vectors.get(j, c) ** 2;
    const tail = top.columns.reduce((s, c) => s + vectors.get(count - 1, c) ** 2, 0);
    if (length * Math.sqrt(tail / norm) <= tolerance || length < 1e-13 || products >= most) {
      const residual = residualOf(operator, count, top, vectors, room + 1);
      return { re: top.re, im: top.im, residual, products };
    }
    const columns: number[] = [];
    for (const pair of pairs) if (columns.length < room / 3) columns.push(...pair.columns);
    const wanted = vectors.subMatrixColumn(columns);
    const basis = new QrDecomposition(wanted).orthogonalMatrix;
    const kept = columns.length;
    const inner = basis.transpose().mmul(square).mmul(basis);
    const ends = basis.getRow(count - 1);
    operator.rotate(count, basis.to2DArray(), kept);
    operator.copy(count, kept);
    small = Matrix.zeros(room, room);
    small.setSubMatrix(inner, 0, 0);
    // The row that ties the kept basis to the next vector.
    for (let j = 0; j < kept; j++) small.set(kept, j, length * (ends[j] as number));
    count = kept;
  }
}
