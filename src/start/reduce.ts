/**
 * Lattice reduction in exact integers (Lenstra, Lenstra, Lovász 1982; the integral form of
 * de Weger 1987: every quotient of Gram-Schmidt's is kept as an integer over a Gram
 * determinant). The parameter is 3/4.
 */

/** A basis with its exact Gram-Schmidt data, g[0] = 1. */
export interface Reduced {
  /** The reduced basis, rows. */
  readonly basis: bigint[][];
  /** g[i + 1]: Gram determinant of the first i + 1 vectors; |b*_i|^2 = g[i + 1] / g[i]. */
  readonly g: bigint[];
  /** mu_ij = lambda[i][j] / g[j + 1], j < i. */
  readonly lambda: bigint[][];
}

const dot = (a: readonly bigint[], b: readonly bigint[]) => a.reduce((s, x, i) => s + x * (b[i] as bigint), 0n);

/** The integer nearest to a / b, b > 0. */
function nearest(a: bigint, b: bigint): bigint {
  const twice = 2n * a + b;
  const q = twice / (2n * b);
  return twice < 0n && twice % (2n * b) !== 0n ? q - 1n : q;
}

/** @throws RangeError where the rows are linearly dependent */
function gramSchmidt(basis: readonly bigint[][]): { g: bigint[]; lambda: bigint[][] } {
  const n = basis.length;
  const g = [1n];
  const lambda = basis.map(() => new Array<bigint>(n).fill(0n));
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let u = dot(basis[i] as bigint[], basis[j] as bigint[]);
      for (let k = 0; k < j; k++) u = (g[k + 1] * u - lambda[i][k] * lambda[j][k]) / g[k];
      if (j < i) lambda[i][j] = u;
      else g.push(u);
    }
    if (g[i + 1] <= 0n) throw new RangeError("reduce: the vectors are linearly dependent");
  }
  return { g, lambda };
}

/** Reduces a basis; the rows given are left as they are. @throws RangeError for dependent rows */
export function reduce(given: readonly (readonly bigint[])[]): Reduced {
  const basis = given.map((row) => [...row]);
  const n = basis.length;
  const { g, lambda } = gramSchmidt(basis);
  const shorten = (k: number, l: number) => {
    const q = nearest(lambda[k][l], g[l + 1]);
    if (q === 0n) return;
    basis[k] = basis[k].map((x, i) => x - q * (basis[l][i] as bigint));
    for (let j = 0; j < l; j++) lambda[k][j] -= q * lambda[l][j];
    lambda[k][l] -= q * g[l + 1];
  };
  const swap = (k: number) => {
    [basis[k - 1], basis[k]] = [basis[k] as bigint[], basis[k - 1] as bigint[]];
    for (let j = 0; j < k - 1; j++) [lambda[k - 1][j], lambda[k][j]] = [lambda[k][j], lambda[k - 1][j]];
    const l = lambda[k][k - 1];
    const before = g[k];
    const fresh = (g[k - 1] * g[k + 1] + l * l) / before;
    for (let i = k + 1; i < n; i++) {
      const t = lambda[i][k];
      lambda[i][k] = (g[k + 1] * lambda[i][k - 1] - l * t) / before;
      lambda[i][k - 1] = (fresh * t + l * lambda[i][k]) / g[k + 1];
    }
    g[k] = fresh;
  };
  for (let k = 1; k < n; ) {
    shorten(k, k - 1);
    const l = lambda[k][k - 1];
    if (4n * (g[k + 1] * g[k - 1] + l * l) < 3n * g[k] * g[k]) {
      swap(k);
      k = Math.max(1, k - 1);
    } else {
      for (let j = k - 2; j >= 0; j--) shorten(k, j);
      k++;
    }
  }
  return { basis, g, lambda };
}
