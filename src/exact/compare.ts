/** Exact comparison of exact numbers. */
import type { ExactNumber } from "./number.js";
import { bitsBelowSeparation, multiplyPolynomials, type Polynomial, squareFreePart } from "./polynomial.js";

/** Where no proof of equality is possible, comparisons stop here. */
const UNPROVED_BITS = 4096;

function annihilator(x: ExactNumber): Polynomial | undefined {
  return x.rational === undefined ? x.polynomial : [-x.rational.num, x.rational.den];
}

/**
 * -1, 0 or 1 as x < y, x = y, x > y, proved; undefined where a number of unproved kind is
 * within 2^-4096 of the other. Two algebraic numbers are equal once they are closer than
 * different roots of their polynomials can be.
 */
export function compareExact(x: ExactNumber, y: ExactNumber): -1 | 0 | 1 | undefined {
  if (x.rational !== undefined && y.rational !== undefined) return x.rational.compare(y.rational);
  const [f, g] = [annihilator(x), annihilator(y)];
  const proved = f !== undefined && g !== undefined;
  const enough = proved ? bitsBelowSeparation(squareFreePart(multiplyPolynomials(f, g))) + 3 : UNPROVED_BITS;
  for (let bits = Math.min(64, enough); ; bits = Math.min(2 * bits, enough)) {
    const difference = x.toFixed(bits) - y.toFixed(bits);
    if (difference > 2n) return 1;
    if (difference < -2n) return -1;
    if (bits === enough) return proved ? 0 : undefined;
  }
}
