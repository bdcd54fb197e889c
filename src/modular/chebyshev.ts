/** Chebyshev polynomials on [0, 1] in doubles, with bounds of what is rounded. */
import type { Real } from "../kernel/real.js";

/**
 * Roots of T_count on [0, 1], within 2^-49: the angle rounds by 3 units of 2^-53 at most pi times
 * each, the cosine by one of 2^-52, the rest by one more.
 */
export function roots(count: number, real: Real): Float64Array {
  return Float64Array.from({ length: count }, (_, j) => (1 + real.cos((Math.PI * (2 * j + 1)) / (2 * count))) / 2);
}

/** T_0(y), ..., T_(count-1)(y), y = 2 x - 1. */
export function chebyshev(x: number, count: number, into: Float64Array): Float64Array {
  const y = 2 * x - 1;
  into[0] = 1;
  into[1] = y;
  for (let j = 2; j < count; j++) into[j] = 2 * y * into[j - 1]! - into[j - 2]!;
  return into;
}

export function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = a.length - 1; i >= 0; i--) sum += a[i]! * b[i]!;
  return sum;
}

/**
 * Bound of the error of a polynomial's value at a point given within 2 units of 1/(l + x):
 * the recurrence's roundings, each 4 u at most, act through U_j, |U_j| <= j + 1, and the
 * argument's 6 u through T_j', at most j^2; the products and their sum round 2 (J + 1) u more.
 */
export function roundingOf(c: Float64Array): number {
  let sum = 0;
  for (let j = 0; j < c.length; j++) sum += Math.abs(c[j]!) * (2 * (j + 1) * (j + 2) + 6 * j * j + 2 * c.length + 2);
  return sum * 2 ** -53 * (1 + 2 ** -40);
}

/** Values at the roots to coefficients. */
export function coefficients(values: Float64Array, table: readonly Float64Array[]): Float64Array {
  const count = values.length;
  const out = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const row = table[i]!;
    for (let j = 0; j < count; j++) out[j]! += ((j === 0 ? 1 : 2) / count) * values[i]! * row[j]!;
  }
  return out;
}

/** sum |c_j| r^j: a bound on the ellipse of parameter r. */
export function onEllipse(c: Float64Array, r: number): number {
  let sum = 0;
  let power = 1;
  for (const x of c) {
    sum += Math.abs(x) * power;
    power *= r;
  }
  return sum * (1 + 2 ** -30);
}
