/**
 * All m with 0 < m <= most for which m x lies within `radius` of a whole vector, by
 * enumeration (Fincke and Pohst 1985) of the lattice of the (m x - p, m), its last coordinate
 * scaled so that the cylinder sits in a ball; the basis is reduced first in exact integers.
 *
 * Nothing is lost to rounding: the exact Gram-Schmidt quotients are rounded to doubles, and
 * every interval is widened by a 2^-20th of the ball's radius and of itself, far more than
 * what coefficients below 2^24 can lose in doubles. More may be listed than asked for.
 */
import { bitLength, type Rational } from "../exact/rational.js";
import { type Reduced, reduce } from "./reduce.js";

const WIDER = 2 ** -20;
/** Coefficients beyond this are not enumerated. */
const MOST_COEFFICIENT = 2 ** 24;

/** The ratio of two positive integers of any size, to a few units in the last place. */
function ratio(a: bigint, b: bigint): number {
  const drop = (x: bigint) => Math.max(0, bitLength(x) - 64);
  const [da, db] = [drop(a), drop(b)];
  // Both parts are below 2^64; the power of two is split, so that no half of it over- or underflows.
  const power = da - db;
  const half = Math.trunc(power / 2);
  return (Number(a >> BigInt(da)) / Number(b >> BigInt(db))) * 2 ** half * 2 ** (power - half);
}

interface Cylinder {
  /** Fixed-point coordinates of x modulo 1, in units of 2^-bits, each off by at most `off` units. */
  readonly fixed: readonly bigint[];
  readonly bits: number;
  readonly off: bigint;
  readonly most: number;
  readonly radius: Rational;
}

/** Bits that leave the radius some 2^48 units beyond the error of m x. */
export function bitsFor(radius: Rational, most: number): number {
  return 48 + bitLength(radius.den) - bitLength(radius.num) + 1 + 2 * bitLength(BigInt(most));
}

/**
 * The m, in increasing order, each once.
 * @param work steps of the enumeration that may be made
 * @returns undefined where that does not suffice
 */
export function cylinderPoints({ fixed, bits, off, most, radius }: Cylinder, work: number): number[] | undefined {
  const d = fixed.length;
  const one = 1n << BigInt(bits);
  const m = BigInt(most);
  // The radius in units of 2^-bits, rounded up, and what x's error can add.
  const r = (radius.num << BigInt(bits)) / radius.den + 1n + BigInt(d) * off * m;
  const weight = r / m > 0n ? r / m : 1n;
  const unit = (j: number) => Array.from({ length: d + 1 }, (_, i) => (i === j ? one : 0n));
  const rows = [[...fixed, weight], ...Array.from({ length: d }, (_, j) => unit(j))];
  const reduced = reduce(rows);
  // |m x - p|^2 + (m weight)^2 <= r^2 + (most weight)^2 <= 2 r^2 (weight = 1 where most > r).
  const squared = r * r + (m * weight) ** 2n;
  return enumerate(reduced, squared, weight, m, work);
}

function enumerate(
  { basis, g, lambda }: Reduced,
  squared: bigint,
  weight: bigint,
  most: bigint,
  work: number,
): number[] | undefined {
  const n = basis.length;
  // |b*_i|^2 over the ball's squared radius.
  const norms = basis.map((_, i) => ratio(g[i + 1], g[i] * squared));
  const mu = lambda.map((row, i) =>
    row.slice(0, i).map((l, j) => (l < 0n ? -ratio(-l, g[j + 1]) : l === 0n ? 0 : ratio(l, g[j + 1]))),
  );
  const heights = basis.map((row) => row[n - 1] / weight);
  const x = new Float64Array(n);
  const found = new Set<bigint>();
  let left = work;
  const search = (i: number, room: number): boolean => {
    if (i < 0) {
      let height = heights.reduce((s, h, k) => s + h * BigInt(x[k]), 0n);
      if (height < 0n) height = -height;
      if (height > 0n && height <= most) found.add(height);
      return true;
    }
    let centre = 0;
    for (let k = i + 1; k < n; k++) centre -= x[k] * mu[k][i];
    const reach = Math.sqrt(Math.max(0, room) / norms[i]) * (1 + WIDER) + WIDER;
    if (!(Math.abs(centre) + reach < MOST_COEFFICIENT)) return false;
    for (let c = Math.ceil(centre - reach); c <= centre + reach; c++) {
      if (--left < 0) return false;
      x[i] = c;
      if (!search(i - 1, room - norms[i] * (c - centre) ** 2 + WIDER)) return false;
    }
    x[i] = 0;
    return true;
  };
  if (!search(n - 1, 1 + WIDER)) return undefined;
  return [...found].map(Number).sort((a, b) => a - b);
}
