/**
 * Non-negative matrices and vectors with proved bounds. All entries are at least 0, so a
 * sum of products computed in doubles is within a relative (length + 8) 2^-52 of its exact
 * value (underflow apart, which the upper side covers by TINY): rounding in a direction is
 * one multiplication.
 */

/** Covers what underflow can lose in a sum of products of numbers that matter. */
const TINY = 1e-280;

export type Side = "low" | "high";

/** Row-major n x n. */
export type Dense = Float64Array;

export function roundingFactor(length: number, side: Side): number {
  const e = (length + 8) * 2 ** -52;
  return side === "low" ? 1 - e : 1 + e;
}

/** a b, rounded to a side; rows of `a` are often sparse, so zeros are passed over. */
export function multiplyBound(a: Dense, b: Dense, n: number, side: Side): Dense {
  const out = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < n; k++) {
      const x = a[i * n + k]!;
      if (x === 0) continue;
      const from = k * n;
      const to = i * n;
      for (let j = 0; j < n; j++) out[to + j]! += x * b[from + j]!;
    }
  }
  const f = roundingFactor(n, side);
  const tiny = side === "low" ? 0 : TINY;
  for (let i = 0; i < out.length; i++) out[i] = out[i]! * f + tiny;
  return out;
}

/** The sum of matrices, rounded to a side. */
export function addBound(side: Side, ...terms: readonly Dense[]): Dense {
  const out = new Float64Array(terms[0]!.length);
  for (const t of terms) for (let i = 0; i < out.length; i++) out[i]! += t[i]!;
  const f = roundingFactor(terms.length, side);
  for (let i = 0; i < out.length; i++) out[i] = out[i]! * f;
  return out;
}

/** a x, rounded to a side. */
export function applyBound(a: Dense, x: Float64Array, side: Side): Float64Array {
  const n = x.length;
  const out = new Float64Array(n);
  const f = roundingFactor(n, side);
  const tiny = side === "low" ? 0 : TINY;
  for (let i = 0; i < n; i++) {
    let sum = 0;
    for (let j = 0; j < n; j++) sum += a[i * n + j]! * x[j]!;
    out[i] = sum * f + tiny;
  }
  return out;
}

/** The scalar product, rounded to a side. */
export function dotBound(a: Float64Array, x: Float64Array, side: Side): number {
  let sum = 0;
  for (let i = 0; i < x.length; i++) sum += a[i]! * x[i]!;
  return sum * roundingFactor(x.length, side) + (side === "low" ? 0 : TINY);
}
