/**
 * Non-negative matrices and vectors with proved bounds. All entries are at least 0, so a sum
 * of k products computed in doubles is within a relative (1 + 2^-53)^k of its exact value
 * (underflow apart, which the upper side covers by TINY): rounding in a direction is one
 * multiplication more. Single terms, and single entries 1, cost nothing.
 */

/** Covers what underflow can lose in a sum of products of numbers that matter. */
const TINY = 1e-280;

export type Side = "low" | "high";

/** Row-major n x n. */
export type Dense = Float64Array;

/** What a sum of `length` products is multiplied by to be on a side; 1 - m 2^-53 and 1 + 2 m 2^-53 are doubles. */
export function roundingFactor(length: number, side: Side): number {
  return side === "low" ? 1 - (length + 2) * 2 ** -53 : 1 + Math.ceil((length + 3) / 2) * 2 ** -52;
}

/** Below, what underflow may have added is taken off; numbers stay at least 0. */
function rounded(sum: number, factor: number, tiny: number): number {
  return Math.max(0, sum * factor + tiny);
}

/** Where the rows of a matrix are not 0: columns, row after row, and each row's end. */
function places(b: Dense, n: number): { readonly columns: Int32Array; readonly ends: Int32Array } {
  const columns = new Int32Array(n * n);
  const ends = new Int32Array(n + 1);
  let count = 0;
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) if (b[i * n + j] !== 0) columns[count++] = j;
    ends[i + 1] = count;
  }
  return { columns, ends };
}

/** a b, rounded to a side; both are often sparse, so zeros are passed over, and stay 0. */
export function multiplyBound(a: Dense, b: Dense, n: number, side: Side): Dense {
  const out = new Float64Array(n * n);
  const tiny = side === "low" ? -TINY : TINY;
  const { columns, ends } = places(b, n);
  const touched = new Uint8Array(n);
  for (let i = 0; i < n; i++) {
    const to = i * n;
    let terms = 0;
    let only = 0;
    touched.fill(0);
    for (let k = 0; k < n; k++) {
      const x = a[to + k]!;
      if (x === 0) continue;
      terms++;
      only = x;
      const from = k * n;
      for (let p = ends[k]!; p < ends[k + 1]!; p++) {
        const j = columns[p]!;
        touched[j] = 1;
        out[to + j]! += x * b[from + j]!;
      }
    }
    if (terms === 0 || (terms === 1 && only === 1)) continue;
    const f = roundingFactor(terms, side);
    for (let j = 0; j < n; j++) if (touched[j] === 1) out[to + j] = rounded(out[to + j]!, f, tiny);
  }
  return out;
}

/** The sum of matrices, rounded to a side. */
export function addBound(side: Side, ...terms: readonly Dense[]): Dense {
  const out = new Float64Array(terms[0]!.length);
  for (let i = 0; i < out.length; i++) {
    let sum = 0;
    let count = 0;
    for (const t of terms) {
      if (t[i] === 0) continue;
      sum += t[i]!;
      count++;
    }
    out[i] = count < 2 ? sum : sum * roundingFactor(count, side);
  }
  return out;
}

/** a x, rounded to a side. */
export function applyBound(a: Dense, x: Float64Array, side: Side): Float64Array {
  const n = x.length;
  const out = new Float64Array(n);
  const f = roundingFactor(n, side);
  const tiny = side === "low" ? -TINY : TINY;
  for (let i = 0; i < n; i++) {
    let sum = 0;
    for (let j = 0; j < n; j++) sum += a[i * n + j]! * x[j]!;
    out[i] = rounded(sum, f, tiny);
  }
  return out;
}

/** The scalar product, rounded to a side. */
export function dotBound(a: Float64Array, x: Float64Array, side: Side): number {
  let sum = 0;
  for (let i = 0; i < x.length; i++) sum += a[i]! * x[i]!;
  return rounded(sum, roundingFactor(x.length, side), side === "low" ? -TINY : TINY);
}
