/**
 * Polynomials in Chebyshev's basis, in fixed point, and what interpolation proves.
 *
 * One coordinate: a function f that is analytic and bounded by B in the ellipse with foci +-1
 * and half axes (r +- 1/r) / 2 has coefficients |a_k| <= 2 B r^-k. At the roots of T_M each T_k,
 * k >= M, agrees with 0 or with plus or minus some T_j, j < M. So the interpolant at the M roots
 * is off by at most
 *     2 sum_{k >= M} |a_k| <= 4 B r^-M / (1 - 1/r)       on [-1, 1].
 * The interpolant is at most L = 1 + 2/pi log M times the largest value at the roots (Rivlin
 * 1974; in Trefethen, Approximation Theory and Approximation Practice, theorem 15.2), its
 * derivative at most (M - 1)^2 times its own bound (A. A. Markov). Finitely many values thus
 * bound f everywhere.
 *
 * n coordinates, the same in each: interpolating one after the other adds up n such errors, the
 * later ones times L^(n-1) at most, and the interpolant is at most L^n times the largest value.
 * Coefficients are |a_k| <= 2^n B r^-(k_1 + ... + k_n); terms with a k_j >= M are replaced by one of
 * the same size, and |T_k'| <= k^2, so that each partial derivative is off by at most
 *     2^(n+1) B sum (largest k_j)^2 r^-(k_1 + ...) <= 2^(n+1) B n (1 - 1/r)^-(n-1) sum_{m >= M} m^2 r^-m.
 */
import type { Ball } from "../../exact/ball.js";
import { cosineOfTurn } from "../../exact/elementary.js";
import type { Real } from "../../kernel/real.js";

/**
 * sum over (k_1, ..., k_n), k_j < size, of c_k T_{k_1}(u_1) ... T_{k_n}(u_n): coefficients in
 * units of 2^-p, the last index fastest.
 */
export interface Polynomial {
  readonly size: number;
  readonly coefficients: readonly bigint[];
  /** At least sum |c_k| (k_1^2 + ... + k_n^2): the largest sum of absolute partial derivatives on the box. */
  readonly slope: bigint;
  /** At least sum |c_k| sum_j k_j^2 (k_j^2 - 1) / 3: the sum of bounds of the second derivatives. */
  readonly bend: bigint;
}

const abs = (x: bigint) => (x < 0n ? -x : x);

export function polynomial(coefficients: readonly bigint[], size: number): Polynomial {
  let slope = 0n;
  let bend = 0n;
  for (const [index, c] of coefficients.entries()) {
    for (let rest = index; rest > 0; rest = Math.floor(rest / size)) {
      const square = BigInt((rest % size) * (rest % size));
      slope += square * abs(c);
      bend += ((square * (square - 1n)) / 3n) * abs(c);
    }
  }
  return { size, coefficients, slope, bend };
}

/** The sum of a coefficient's indices. */
export function degreeOf(index: number, size: number): number {
  let degree = 0;
  for (let rest = index; rest > 0; rest = Math.floor(rest / size)) degree += rest % size;
  return degree;
}

/**
 * Coefficients of total degree `size` and more made 0: of functions analytic around the box
 * they are as small as what lies beyond the degree anyway, and what rounding left there would
 * be large away from the box.
 */
export function truncated(coefficients: readonly bigint[], size: number): bigint[] {
  return coefficients.map((c, index) => (degreeOf(index, size) < size ? c : 0n));
}

/**
 * Clenshaw's recursion at u, |u| <= 1 in units of 2^-p, on `size` coefficients from `from` on.
 * Each step's rounding, at most a unit, acts like a change of that coefficient, and |T_k| <= 1:
 * together at most one unit a coefficient.
 */
function clenshaw(coefficients: readonly bigint[], from: number, size: number, u: bigint, p: number): bigint {
  const half = BigInt(p - 1);
  let b1 = 0n;
  let b2 = 0n;
  let k = size - 1;
  while (k > 0 && coefficients[from + k] === 0n) k--;
  for (; k > 0; k--) {
    const b = ((u * b1) >> half) - b2 + coefficients[from + k];
    b2 = b1;
    b1 = b;
  }
  return ((u * b1) >> BigInt(p)) - b2 + coefficients[from];
}

/** The value at u, within (size + 1)^n units: coordinate by coordinate, the last first. */
export function valueAt(coefficients: readonly bigint[], size: number, u: readonly bigint[], p: number): bigint {
  let rest = coefficients;
  for (let j = u.length - 1; j > 0; j--) {
    const next: bigint[] = [];
    for (let from = 0; from < rest.length; from += size) next.push(clenshaw(rest, from, size, u[j], p));
    rest = next;
  }
  return clenshaw(rest, 0, size, u[0], p);
}

/** A bound of `valueAt`'s error in units. */
export const roundingOf = (size: number, coordinates: number) => BigInt(size + 1) ** BigInt(coordinates);

/** The polynomial's values on balls of [-1, 1]. */
export function valueOnBalls(h: Polynomial, u: readonly Ball[], p: number): Ball {
  let widest = 0n;
  for (const { rad } of u) if (rad > widest) widest = rad;
  return {
    mid: valueAt(
      h.coefficients,
      h.size,
      u.map((x) => x.mid),
      p,
    ),
    rad: roundingOf(h.size, u.length) + ((h.slope * widest) >> BigInt(p)) + 1n,
  };
}

/** The roots of T_count, in decreasing order. */
export function chebyshevRoots(count: number, p: number): Ball[] {
  return Array.from({ length: count }, (_, j) => cosineOfTurn(2 * j + 1, 2 * count, p));
}

/** At least Lebesgue's constant of interpolation at M roots in each coordinate: (1 + 2/pi log M)^n, 2/pi log 2 < 0.4414. */
export function lebesgue(count: number, coordinates: number): number {
  let constant = 1;
  for (let j = 0; j < coordinates; j++) constant *= 1 + 0.4414 * (32 - Math.clz32(count - 1));
  return constant;
}

/** Room in binary logarithms for the rounding of a few operations in doubles. */
const SLACK = 1e-6;

/** Binary logarithms of bounds of |f - interpolant| and of the sum of |partial derivatives| of the difference. */
export interface Tail {
  readonly value: number;
  readonly slope: number;
}

/** @param bound log2 B; @param r log2 r */
export function interpolationTail(bound: number, r: number, count: number, coordinates: number, real: Real): Tail {
  const log2 = (x: number) => real.log(x) / Math.LN2;
  const q = real.exp(-r * Math.LN2);
  const left = 1 - q;
  // sum_{k >= M} k^2 q^k = q^M (M^2 / (1-q) + 2 M q / (1-q)^2 + q (1+q) / (1-q)^3).
  const squares = (count * count) / left + (2 * count * q) / (left * left) + (q * (1 + q)) / (left * left * left);
  const start = bound - count * r + SLACK;
  const others = coordinates - 1;
  return {
    value: start + 2 - log2(left) + log2(coordinates * lebesgue(count, others)),
    slope: start + coordinates + 1 + log2(squares) + 2 * log2(coordinates) - others * log2(left),
  };
}

/** At least 2^(log2 + p), a bound in units of 2^-p. */
export function units(log2: number, p: number): bigint {
  return 1n << BigInt(Math.max(0, Math.ceil(log2 + p)));
}
