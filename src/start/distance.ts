/** Distances on the torus from a start to rational points, enclosed. */
import { integerSqrt } from "../exact/integer-roots.js";
import type { ExactNumber } from "../exact/number.js";
import { floorDiv, Rational } from "../exact/rational.js";

/** Bits at which a start that is not known to be rational is given up as equal to the point. */
const MOST_BITS = 4096;

export interface Enclosure {
  readonly low: Rational;
  readonly high: Rational;
}

const absolute = (x: bigint) => (x < 0n ? -x : x);

/** The numerators, from 0 to q - 1, of the nearest point with denominator q. */
export function nearestNumerators(start: readonly ExactNumber[], q: number): number[] {
  const bits = 128;
  const half = 1n << BigInt(bits - 1);
  const by = BigInt(q);
  return start.map((x) => {
    // A tie within 2^-100 may fall to either side: both points are then equally near.
    const p = floorDiv(by * x.toFixed(bits) + half, 1n << BigInt(bits));
    return Number(p - floorDiv(p, by) * by);
  });
}

/**
 * The Euclidean distance on the torus from `start` to the point `numerators` / q, to about
 * 60 digits; undefined where both agree through 4096 bits, so that no positive lower end
 * can be given.
 */
export function torusDistance(
  start: readonly ExactNumber[],
  numerators: readonly number[],
  q: number,
): Enclosure | undefined {
  const by = BigInt(q);
  for (let bits = 256; bits <= MOST_BITS; bits *= 2) {
    const one = by << BigInt(bits);
    // Each q x_j - p_j, in units of 2^-bits, is off by at most q; taken modulo q to the nearest.
    const offsets = start.map((x, j) => {
      const offset = by * x.toFixed(bits) - (BigInt(numerators[j]) << BigInt(bits));
      const reduced = offset - floorDiv(offset, one) * one;
      return 2n * reduced > one ? one - reduced : reduced;
    });
    const error = start.map((x) => (x.rational !== undefined && isDyadic(x.rational, bits) ? 0n : by));
    const sum = (sign: bigint) =>
      offsets.reduce((total, offset, j) => {
        const end = offset + sign * error[j];
        return total + (end < 0n ? 0n : end) ** 2n;
      }, 0n);
    const low = integerSqrt(sum(-1n));
    const high = integerSqrt(sum(1n)) + 1n;
    // Narrow enough once the width is below 2^-60 of the value.
    if (low > 0n && absolute(high - low) << 60n < low)
      return { low: Rational.of(low, one), high: Rational.of(high, one) };
  }
  return undefined;
}

function isDyadic({ den }: Rational, bits: number): boolean {
  return (1n << BigInt(bits)) % den === 0n;
}

/** Whether the start is exactly the point with these numerators, proved. */
export function isPoint(start: readonly ExactNumber[], numerators: readonly number[], q: number): boolean {
  return start.every((x, j) => x.rational?.sub(Rational.of(numerators[j], q)).isInteger() ?? false);
}
