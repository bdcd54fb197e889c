/**
 * Polynomials in Chebyshev's basis, in fixed point, and what interpolation proves.
 *
 * A function f that is analytic and bounded by B in the ellipse with foci +-1 and half axes
 * (r +- 1/r) / 2 has coefficients |a_k| <= 2 B r^-k. At the roots of T_M each T_k, k >= M,
 * agrees with 0 or with plus or minus some T_j, j < M. So the interpolant at the M roots is
 * off by at most
 *     2 sum_{k >= M} |a_k| <= 4 B r^-M / (1 - 1/r)       on [-1, 1],
 * and its derivative by at most 4 B sum_{k >= M} k^2 r^-k, as |T_k'| <= k^2. The interpolant
 * itself is at most (1 + 2/pi log M) times the largest value at the roots (Rivlin 1974; in
 * Trefethen, Approximation Theory and Approximation Practice, theorem 15.2), its derivative at
 * most (M - 1)^2 times that (A. A. Markov). Finitely many values thus bound f everywhere.
 */
import type { Ball } from "../../exact/ball.js";
import { cosineOfTurn } from "../../exact/elementary.js";
import type { Real } from "../../kernel/real.js";

/** sum_k coefficients[k] T_k(x), coefficients times 2^p. */
export interface Polynomial {
  readonly coefficients: readonly bigint[];
  /** At least sum k^2 |c_k| in the same units: a bound of the derivative on [-1, 1]. */
  readonly slope: bigint;
  /** At least sum k^2 (k^2 - 1) / 3 |c_k|: a bound of the second derivative. */
  readonly bend: bigint;
}

const abs = (x: bigint) => (x < 0n ? -x : x);

export function polynomial(coefficients: readonly bigint[]): Polynomial {
  let slope = 0n;
  let bend = 0n;
  for (const [k, c] of coefficients.entries()) {
    const square = BigInt(k * k);
    slope += square * abs(c);
    bend += ((square * (square - 1n)) / 3n) * abs(c);
  }
  return { coefficients, slope, bend };
}

/**
 * Clenshaw's recursion at x, |x| <= 1 in units of 2^-p. Each step's rounding, at most a unit,
 * acts like a change of that coefficient, and |T_k| <= 1: together at most one unit a coefficient.
 */
export function clenshaw(coefficients: readonly bigint[], x: bigint, p: number): bigint {
  const half = BigInt(p - 1);
  let b1 = 0n;
  let b2 = 0n;
  for (let k = coefficients.length - 1; k > 0; k--) {
    const b = ((x * b1) >> half) - b2 + coefficients[k];
    b2 = b1;
    b1 = b;
  }
  return ((x * b1) >> BigInt(p)) - b2 + coefficients[0];
}

/** The polynomial's values on a ball of [-1, 1]. */
export function valueOnBall(h: Polynomial, x: Ball, p: number): Ball {
  return {
    mid: clenshaw(h.coefficients, x.mid, p),
    rad: BigInt(h.coefficients.length + 1) + ((h.slope * x.rad) >> BigInt(p)) + 1n,
  };
}

/** The roots of T_count, in decreasing order. */
export function chebyshevRoots(count: number, p: number): Ball[] {
  return Array.from({ length: count }, (_, j) => cosineOfTurn(2 * j + 1, 2 * count, p));
}

/** At least Lebesgue's constant 1 + 2/pi log M of interpolation at M roots: 2/pi log 2 < 0.4414. */
export function lebesgue(count: number): number {
  return 1 + 0.4414 * (32 - Math.clz32(count - 1));
}

/** Room in binary logarithms for the rounding of a few operations in doubles. */
const SLACK = 1e-6;

/** Binary logarithms of bounds of |f - interpolant| and of |f' - interpolant'| on [-1, 1]. */
export interface Tail {
  readonly value: number;
  readonly slope: number;
}

/** @param bound log2 B; @param r log2 r */
export function interpolationTail(bound: number, r: number, count: number, real: Real): Tail {
  const log2 = (x: number) => real.log(x) / Math.LN2;
  const q = real.exp(-r * Math.LN2);
  const left = 1 - q;
  // sum_{k >= M} k^2 q^k = q^M (M^2 / (1-q) + 2 M q / (1-q)^2 + q (1+q) / (1-q)^3).
  const squares = (count * count) / left + (2 * count * q) / (left * left) + (q * (1 + q)) / (left * left * left);
  const start = bound + 2 - count * r + SLACK;
  return { value: start - log2(left), slope: start + log2(squares) };
}

/** At least 2^(log2 + p), a bound in units of 2^-p. */
export function units(log2: number, p: number): bigint {
  return 1n << BigInt(Math.max(0, Math.ceil(log2 + p)));
}
