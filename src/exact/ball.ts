/**
 * Ball arithmetic in fixed point: at precision p, the ball { mid, rad } stands for every
 * real number x with |x 2^p - mid| <= rad. Every operation returns a ball that contains
 * its result for all members of its operands; the bounds stand beside the code.
 */
import { integerCbrt, integerSqrt } from "./integer-roots.js";
import { floorDiv, type Rational } from "./rational.js";

export interface Ball {
  readonly mid: bigint;
  readonly rad: bigint;
}

/** The precision is too low to go on: a divisor's ball contains 0. */
export class TooCoarse extends Error {
  override readonly name = "TooCoarse";
}

const abs = (a: bigint) => (a < 0n ? -a : a);

export function ballOf(x: Rational, p: number): Ball {
  const scaled = x.num << BigInt(p);
  if (x.den === 1n) return { mid: scaled, rad: 0n };
  return { mid: floorDiv(scaled, x.den), rad: 1n };
}

export function addBalls(a: Ball, b: Ball): Ball {
  return { mid: a.mid + b.mid, rad: a.rad + b.rad };
}

export function negateBall(a: Ball): Ball {
  return { mid: -a.mid, rad: a.rad };
}

export function scaleBall(a: Ball, by: bigint): Ball {
  return { mid: a.mid * by, rad: a.rad * abs(by) };
}

/** |xy - mm'| <= |m| r' + |m'| r + r r'; one unit more for each of the two shifts. */
export function multiplyBalls(a: Ball, b: Ball, p: number): Ball {
  const shift = BigInt(p);
  const spread = abs(a.mid) * b.rad + abs(b.mid) * a.rad + a.rad * b.rad;
  return { mid: (a.mid * b.mid) >> shift, rad: (spread >> shift) + 2n };
}

/**
 * |x/y - m/m'| = |x m' - m y| / |y m'| <= (r |m'| + |m| r') / (|m'| (|m'| - r')).
 * @throws TooCoarse when the divisor's ball contains 0.
 */
export function divideBalls(a: Ball, b: Ball, p: number): Ball {
  const size = abs(b.mid);
  if (size <= b.rad) throw new TooCoarse();
  const shift = BigInt(p);
  const mid = floorDiv((b.mid < 0n ? -a.mid : a.mid) << shift, size);
  if (a.rad === 0n && b.rad === 0n) return { mid, rad: 1n };
  // The first order by short numbers: the quotient mid carries the long division already.
  const spread = ((a.rad << shift) + (abs(mid) + 1n) * b.rad) / (size - b.rad);
  return { mid, rad: spread + 2n };
}

/** x^n for n >= 0, by squaring. */
export function powerOfBall(a: Ball, n: number, p: number): Ball {
  let result: Ball = { mid: 1n << BigInt(p), rad: 0n };
  let square = a;
  for (let left = n; left > 0; left = Math.floor(left / 2)) {
    if (left % 2 === 1) result = multiplyBalls(result, square, p);
    if (left > 1) square = multiplyBalls(square, square, p);
  }
  return result;
}

/** sqrt(x) for x = num/den > 0: floor(sqrt(floor(y))) = floor(sqrt(y)), so one unit is enough. */
export function sqrtOfRational(x: Rational, p: number): Ball {
  return { mid: integerSqrt((x.num << BigInt(2 * p)) / x.den), rad: 1n };
}

/**
 * sqrt of the members that are not negative (the caller knows that x >= 0).
 * |sqrt x - sqrt m| = |x - m| / (sqrt x + sqrt m) <= |x - m| / sqrt m.
 */
export function sqrtOfBall(a: Ball, p: number): Ball {
  const shift = BigInt(p);
  const root = a.mid > 0n ? integerSqrt(a.mid << shift) : 0n;
  if (root === 0n) {
    const top = a.mid + a.rad;
    return { mid: 0n, rad: integerSqrt((top > 0n ? top : 0n) << shift) + 1n };
  }
  return { mid: root, rad: (a.rad << shift) / root + 2n };
}

/**
 * |cbrt x - cbrt m| <= |x - m| / (3/4 cbrt(m)^2), as s^2 + st + t^2 >= 3/4 max(s^2, t^2);
 * and |cbrt x - cbrt m|^3 <= 4 |x - m| where m is too near 0.
 */
export function cbrtOfBall(a: Ball, p: number): Ball {
  const twice = BigInt(2 * p);
  const root = integerCbrt(a.mid << twice);
  // |cbrt(m)| >= |root| - 1 for either sign of m, as root is rounded down.
  const least = abs(root) - 1n;
  if (least <= 0n) return { mid: 0n, rad: integerCbrt((4n * (abs(a.mid) + a.rad)) << twice) + 2n };
  return { mid: root, rad: ((a.rad << twice) * 4n) / (3n * least * least) + 2n };
}
