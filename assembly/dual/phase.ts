/**
 * Phases exp(2 pi i k.b) for a 64-bit integer vector k and a real vector b that is held
 * as 128-bit fractions, each off by at most one unit of 2^-128.
 *
 * k.b mod 1 is summed in wrapping 128-bit arithmetic and cut to 64 bits, so it is off by
 * at most 2^-64 + d 2^63 2^-128 <= 5 * 2^-64 of a turn (d <= 8). The turn is split into a
 * quadrant and a rest r in [-1/8, 1/8); x = 2 pi r in double precision is off by at most
 * 3 u |x| <= 2.4 u (u = 2^-53). Taylor polynomials on |x| <= pi/4 are cut where the rest
 * is below 0.02 u (cosine, x^18/18!) and 0.001 u (sine, x^19/19!); evaluating them costs
 * at most 2.2 u and 1.3 u. So each part of the phase is off by less than 5 u, the phase
 * by less than 8 u. Dyadic b give quadrants exactly: r = 0 has no error.
 */
import { mulHigh } from "../random/choices";

/** The two parts of the last phase that `turn` made. */
export let turnCos: f64 = 1;
export let turnSin: f64 = 0;

const TWO_PI_OVER_2_64: f64 = 6.283185307179586476925286766559 / 18446744073709551616.0;

/** Top 64 bits of k.b mod 1; `key`: d components of 8 bytes, `b`: d fractions (low word, high word). */
export function fractionOf(key: usize, b: usize, dimension: u32): u64 {
  let low: u64 = 0;
  let high: u64 = 0;
  for (let j: u32 = 0; j < dimension; j++) {
    const k = load<i64>(key + ((<usize>j) << 3));
    const at = b + ((<usize>j) << 4);
    const bl = load<u64>(at);
    const part = <u64>k * bl;
    low += part;
    // A negative k reads as k + 2^64: take 2^64 * bl off again.
    high += mulHigh(<u64>k, bl) + <u64>k * load<u64>(at, 8) - (k < 0 ? bl : 0) + u64(low < part);
  }
  return high;
}

/** Sets turnCos, turnSin to the cosine and sine of 2 pi t / 2^64. */
export function turn(t: u64): void {
  const quadrant = (t + ((<u64>1) << 61)) >> 62;
  const x = <f64>(<i64>(t - (quadrant << 62))) * TWO_PI_OVER_2_64;
  const z = x * x;
  let s: f64 = 1.0 / 355687428096000.0;
  s = s * z - 1.0 / 1307674368000.0;
  s = s * z + 1.0 / 6227020800.0;
  s = s * z - 1.0 / 39916800.0;
  s = s * z + 1.0 / 362880.0;
  s = s * z - 1.0 / 5040.0;
  s = s * z + 1.0 / 120.0;
  s = s * z - 1.0 / 6.0;
  s = x + x * (z * s);
  let c: f64 = 1.0 / 20922789888000.0;
  c = c * z - 1.0 / 87178291200.0;
  c = c * z + 1.0 / 479001600.0;
  c = c * z - 1.0 / 3628800.0;
  c = c * z + 1.0 / 40320.0;
  c = c * z - 1.0 / 720.0;
  c = c * z + 1.0 / 24.0;
  c = 1.0 - z * (0.5 - z * c);
  if (quadrant & 1) {
    turnCos = quadrant & 2 ? s : 0 - s;
    turnSin = quadrant & 2 ? -c : c;
  } else {
    turnCos = quadrant & 2 ? -c : c;
    turnSin = quadrant & 2 ? 0 - s : s;
  }
}

/** For tests: one phase, written as two doubles at `out`. */
export function dualPhase(out: usize, key: usize, b: usize, dimension: u32): void {
  turn(fractionOf(key, b, dimension));
  store<f64>(out, turnCos);
  store<f64>(out, turnSin, 8);
}
