/**
 * Matrices over the field of p elements, p below 2^13, in doubles: a row of 64 products
 * stays far below 2^53, so every sum is exact before its one reduction. Row-major.
 */

/** Full rank modulo any one prime proves full rank over Q; these are tried in turn. */
export const PRIMES: readonly number[] = [8191, 7919, 6007];

export interface Field {
  readonly p: number;
  readonly inverse: (a: number) => number;
}

export function fieldOf(p: number): Field {
  const table = new Int32Array(p);
  table[1] = 1;
  // p = q a + r gives 1/a = -q / r.
  for (let a = 2; a < p; a++) table[a] = ((p - Math.floor(p / a)) * table[p % a]) % p;
  return { p, inverse: (a) => table[a] };
}

export type ModularMatrix = Float64Array;

export function multiplyModular(a: ModularMatrix, b: ModularMatrix, n: number, p: number): ModularMatrix {
  const c = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < n; k++) {
      const x = a[i * n + k];
      if (x === 0) continue;
      for (let j = 0; j < n; j++) c[i * n + j] += x * b[k * n + j];
    }
  }
  for (let i = 0; i < c.length; i++) c[i] %= p;
  return c;
}

export function transposeModular(a: ModularMatrix, n: number): ModularMatrix {
  return a.map((_, i) => a[(i % n) * n + Math.floor(i / n)]);
}

export function applyModular(a: ModularMatrix, v: Float64Array, n: number, p: number): Float64Array {
  return v.map((_, i) => {
    let sum = 0;
    for (let j = 0; j < n; j++) sum += a[i * n + j] * v[j];
    return sum % p;
  });
}

/** Reduces rows in place to reduced echelon form; the pivots' columns in order. */
export function echelon(rows: Float64Array[], { p, inverse }: Field): number[] {
  const pivots: number[] = [];
  const n = rows[0].length;
  for (let column = 0; column < n && pivots.length < rows.length; column++) {
    const at = rows.findIndex((row, i) => i >= pivots.length && row[column] !== 0);
    if (at < 0) continue;
    const top = pivots.length;
    [rows[top], rows[at]] = [rows[at], rows[top]];
    const pivot = rows[top];
    const by = inverse(pivot[column]);
    for (let j = column; j < n; j++) pivot[j] = (pivot[j] * by) % p;
    for (const [i, row] of rows.entries()) {
      const x = row[column];
      if (i === top || x === 0) continue;
      for (let j = column; j < n; j++) row[j] = (row[j] + (p - x) * pivot[j]) % p;
    }
    pivots.push(column);
  }
  return pivots;
}

/** The dimension of the null space of a, and a vector that spans it where that is 1. */
export function nullVector(a: ModularMatrix, n: number, field: Field): { nullity: number; vector?: Float64Array } {
  const rows = Array.from({ length: n }, (_, i) => a.slice(i * n, (i + 1) * n));
  const pivots = echelon(rows, field);
  const nullity = n - pivots.length;
  if (nullity !== 1) return { nullity };
  const vector = new Float64Array(n);
  const free = vector.findIndex((_, j) => !pivots.includes(j));
  vector[free] = 1;
  pivots.forEach((column, i) => {
    vector[column] = (field.p - rows[i][free]) % field.p;
  });
  return { nullity, vector };
}

/** The dimension of the smallest subspace that holds v and that the matrices keep. */
export function spinDimension(
  v: Float64Array,
  matrices: readonly ModularMatrix[],
  n: number,
  { p, inverse }: Field,
): number {
  const rows: Float64Array[] = [];
  const pivots: number[] = [];
  const add = (u: Float64Array): void => {
    for (const [i, row] of rows.entries()) {
      const x = u[pivots[i]];
      if (x !== 0) for (let j = 0; j < n; j++) u[j] = (u[j] + (p - x) * row[j]) % p;
    }
    const pivot = u.findIndex((x) => x !== 0);
    if (pivot < 0) return;
    const by = inverse(u[pivot]);
    rows.push(u.map((x) => (x * by) % p));
    pivots.push(pivot);
  };
  add(v.slice());
  for (let next = 0; next < rows.length && rows.length < n; next++) {
    for (const m of matrices) add(applyModular(m, rows[next], n, p));
  }
  return rows.length;
}

/** An eigenvalue of a in the field, or undefined: the roots of its characteristic polynomial, by Hessenberg form. */
export function eigenvalue(a: ModularMatrix, n: number, field: Field): number | undefined {
  const { p, inverse } = field;
  const h = Array.from({ length: n }, (_, i) => a.slice(i * n, (i + 1) * n));
  for (let k = 0; k < n - 2; k++) {
    const at = h.findIndex((row, i) => i > k && row[k] !== 0);
    if (at < 0) continue;
    [h[k + 1], h[at]] = [h[at], h[k + 1]];
    for (const row of h) [row[k + 1], row[at]] = [row[at], row[k + 1]];
    const by = inverse(h[k + 1][k]);
    for (let i = k + 2; i < n; i++) {
      const factor = (h[i][k] * by) % p;
      if (factor === 0) continue;
      for (let j = 0; j < n; j++) h[i][j] = (h[i][j] + (p - factor) * h[k + 1][j]) % p;
      for (const row of h) row[k + 1] = (row[k + 1] + factor * row[i]) % p;
    }
  }
  // det(x - leading k x k block), for k = 0, 1, ..., by expansion along the last column.
  const polynomials: number[][] = [[1]];
  for (let k = 1; k <= n; k++) {
    const before = polynomials[k - 1];
    const next = [0, ...before];
    const subtract = (factor: number, f: readonly number[]) => {
      f.forEach((x, i) => {
        next[i] = (next[i] + (p - factor) * x) % p;
      });
    };
    subtract(h[k - 1][k - 1], before);
    let product = 1;
    for (let m = 1; m < k; m++) {
      product = (product * h[k - m][k - m - 1]) % p;
      subtract((product * h[k - m - 1][k - 1]) % p, polynomials[k - m - 1]);
    }
    polynomials.push(next);
  }
  const f = polynomials[n];
  for (let x = 0; x < p; x++) {
    let value = 0;
    for (let i = n; i >= 0; i--) value = (value * x + f[i]) % p;
    if (value === 0) return x;
  }
  return undefined;
}
