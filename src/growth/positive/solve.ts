/**
 * Linear equations in fixed point: factorised once in doubles, refined with exact residuals.
 * What comes out is a candidate; whoever uses it proves what it is good for.
 */
import { bitLength } from "../../exact/rational.js";

/** m 2^-p as a double. */
export function toDouble(m: bigint, p: number): number {
  const drop = Math.max(0, bitLength(m) - 64);
  return Number(m >> BigInt(drop)) * 2 ** (drop - p);
}

/** All products of T_0, ..., T_{size-1} of the coordinates, in the order of a polynomial's coefficients. */
export function chebyshevRow(u: readonly number[], size: number): Float64Array {
  let row = Float64Array.of(1);
  for (const x of u) {
    const one = new Float64Array(size).fill(1);
    one[1] = x;
    for (let k = 2; k < size; k++) one[k] = 2 * x * one[k - 1] - one[k - 2];
    const next = new Float64Array(row.length * size);
    for (const [i, t] of row.entries()) for (let k = 0; k < size; k++) next[i * size + k] = t * one[k];
    row = next;
  }
  return row;
}

/** Bits that a residual is taken to beyond its own leading one: more than a double's, and guard. */
const BEYOND = 96;

/**
 * Unknowns, in units of 2^-p, that make all residuals small: starting from `unknowns`, the
 * correction solves `matrix` with the residuals as right-hand side, until that helps no more.
 * @param residuals in units of 2^-p, from arithmetic with `precision` bits, at most p: as many as
 * the residual at hand calls for
 */
export function refine(
  matrix: readonly (readonly number[])[],
  unknowns: bigint[],
  residuals: (unknowns: readonly bigint[], precision: number) => bigint[],
  p: number,
): bigint[] {
  const solve = factorise(matrix);
  let best = unknowns;
  let least = -1;
  let stalled = 0;
  let precision = Math.min(p, BEYOND);
  for (;;) {
    const r = residuals(unknowns, precision);
    let bits = 0;
    for (const x of r) bits = Math.max(bits, bitLength(x));
    if (precision === p) {
      if (least >= 0 && bits >= least - 3) {
        if (bits < least) best = unknowns;
        if (stalled++ > 0) return best;
      }
      if (least < 0 || bits < least) [best, least] = [unknowns, bits];
      if (bits <= 4) return best;
    }
    // The residuals over the largest one: doubles, whatever the precision.
    const drop = Math.max(0, bits - 60);
    const scaled = r.map((x) => Number(x >> BigInt(drop)) / 2 ** 60);
    const step = solve(scaled);
    if (!step.every(Number.isFinite)) return best;
    unknowns = unknowns.map((x, k) => x + shifted(step[k], drop + 60));
    precision = Math.min(p, Math.max(precision + 8, p - bits + BEYOND));
  }
}

/** Gaussian elimination with row pivoting, kept for many right-hand sides. */
function factorise(matrix: readonly (readonly number[])[]): (right: readonly number[]) => Float64Array {
  const n = matrix.length;
  const rows = matrix.map((row) => Float64Array.from(row));
  const order = rows.map((_, i) => i);
  for (let k = 0; k < n; k++) {
    let pivot = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(rows[i][k]) > Math.abs(rows[pivot][k])) pivot = i;
    [rows[k], rows[pivot]] = [rows[pivot], rows[k]];
    [order[k], order[pivot]] = [order[pivot], order[k]];
    const top = rows[k];
    for (let i = k + 1; i < n; i++) {
      const row = rows[i];
      const factor = row[k] / top[k];
      row[k] = factor;
      if (factor !== 0) for (let j = k + 1; j < n; j++) row[j] -= factor * top[j];
    }
  }
  return (right) => {
    const x = Float64Array.from(order, (i) => right[i]);
    for (let i = 0; i < n; i++) for (let j = 0; j < i; j++) x[i] -= rows[i][j] * x[j];
    for (let i = n - 1; i >= 0; i--) {
      for (let j = i + 1; j < n; j++) x[i] -= rows[i][j] * x[j];
      x[i] /= rows[i][i];
    }
    return x;
  };
}

/** x 2^bits, rounded towards 0. */
function shifted(x: number, bits: number): bigint {
  // 2^60 x is an integer up to what refinement repairs; |x| is small.
  const m = BigInt(Math.trunc(x * 2 ** 60));
  const shift = bits - 60;
  return shift >= 0 ? m << BigInt(shift) : m >> BigInt(-shift);
}
