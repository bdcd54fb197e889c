/**
 * Logarithm, exponential and cosine as balls at any precision. Each works with some bits
 * more than asked for; the errors are counted beside the code, in units of the working
 * precision, and the count is what the radius is made of.
 */
import { type Ball, TooCoarse } from "./ball.js";
import { piBall } from "./constants.js";
import { bitLength } from "./rational.js";

/** An approximation in units of 2^-p, and by how many units it may be wrong. */
interface Approximation {
  readonly value: bigint;
  readonly error: bigint;
}

/** Drops `bits` digits: what is dropped is below one unit, and the error shrinks with them. */
function dropped({ value, error }: Approximation, bits: number): Ball {
  return { mid: value >> BigInt(bits), rad: (error >> BigInt(bits)) + 2n };
}

/** The best precision so far is kept for each argument, and cut where less is asked for. */
function kept(compute: (n: number, p: number) => Approximation): (n: number, p: number) => Approximation {
  const best = new Map<number, { p: number; found: Approximation }>();
  return (n, p) => {
    let known = best.get(n);
    if (known === undefined || known.p < p) {
      known = { p, found: compute(n, p) };
      best.set(n, known);
    }
    if (known.p === p) return known.found;
    const { mid, rad } = dropped(known.found, known.p - p);
    return { value: mid, error: rad };
  };
}

/**
 * atanh(n / d) = sum (n/d)^(2j+1) / (2j+1) for |n/d| <= 1/5. Each power is within 2 units
 * (one for its own rounding, the ones before it shrink by 25), each quotient one more; the
 * series stops where the power is 0 or -1, a power below 2 units, and the tail is less than
 * that again.
 */
function atanhOfFraction(n: bigint, d: bigint, p: number): Approximation {
  let power = (n << BigInt(p)) / d;
  let value = 0n;
  let error = 4n;
  for (let j = 1n; power !== 0n; j += 2n) {
    value += power / j;
    error += 3n;
    power = (power * n * n) / (d * d);
  }
  return { value, error };
}

/** log 2 = 18 atanh(1/26) - 2 atanh(1/4801) + 8 atanh(1/8749). */
const logTwo = kept((_, p) => {
  const parts = [
    [18n, 26n],
    [-2n, 4801n],
    [8n, 8749n],
  ] as const;
  let value = 0n;
  let error = 0n;
  for (const [factor, d] of parts) {
    const part = atanhOfFraction(1n, d, p + 24);
    value += factor * part.value;
    error += (factor < 0n ? -factor : factor) * part.error;
  }
  const { mid, rad } = dropped({ value, error }, 24);
  return { value: mid, error: rad };
});

/** log(c / 64) for c from 48 to 96: 2 atanh((c - 64) / (c + 64)), the fraction at most 1/5. */
const logSixtyFourths = kept((c, p) => {
  const { value, error } = atanhOfFraction(BigInt(c - 64), BigInt(c + 64), p);
  return { value: 2n * value, error: 2n * error };
});

/**
 * log of m 2^-p, m > 0: m 2^-p = y 2^k with y in [3/4, 3/2), log y = log c + 2 atanh z with
 * c the nearest 64th and z = (y - c) / (y + c), |z| < 2^-7.
 */
function logOfMiddle(m: bigint, p: number): Ball {
  const q = p + 16;
  let k = bitLength(m) - p;
  const shift = q - bitLength(m);
  // At most one unit below y; the logarithm's slope is at most 4/3.
  let y = shift >= 0 ? m << BigInt(shift) : m >> BigInt(-shift);
  if (y < 3n << BigInt(q - 2)) {
    y *= 2n; // the unit becomes two
    k--;
  }
  const c = (y + (1n << BigInt(q - 7))) >> BigInt(q - 6);
  const at = c << BigInt(q - 6);
  const z = ((y - at) << BigInt(q)) / (y + at);
  const square = (z * z) >> BigInt(q);
  let sum = 0n;
  // z is within one unit and the slope of atanh near 1; the last power below 2 and its tail.
  let error = 6n;
  let power = z;
  for (let j = 1n; power !== 0n && power !== -1n; j += 2n) {
    sum += power / j;
    error += 3n; // the power within two units, the quotient one
    power = (power * square) >> BigInt(q);
  }
  const table = logSixtyFourths(Number(c), q);
  const two = logTwo(2, q);
  const size = BigInt(Math.abs(k));
  return dropped(
    {
      value: 2n * sum + table.value + BigInt(k) * two.value,
      error: 2n * error + table.error + size * two.error + 3n,
    },
    16,
  );
}

/**
 * log x for a ball of positive numbers: |log x - log m| <= r / (m - r).
 * @throws TooCoarse where the ball reaches 0
 */
export function logOfBall(a: Ball, p: number): Ball {
  if (a.mid <= a.rad) throw new TooCoarse();
  const { mid, rad } = logOfMiddle(a.mid, p);
  return { mid, rad: rad + (a.rad === 0n ? 0n : (a.rad << BigInt(p)) / (a.mid - a.rad) + 1n) };
}

/** Halvings of the reduced argument before the exponential series, undone by squaring. */
const HALVINGS = 8;

/**
 * exp x for a ball: m = k log 2 + r with |r| < 0.4, exp r by the series at r / 256 and eight
 * squarings. |e^x - e^m| <= e^m 2 rad for a radius of at most 1.
 * @throws TooCoarse where the radius is above 1
 */
export function expOfBall(a: Ball, p: number): Ball {
  if (a.rad > 1n << BigInt(p)) throw new TooCoarse();
  const rough = logTwo(2, p + 8).value;
  const k = Number(((a.mid << 9n) / rough + 1n) >> 1n);
  // A result of at least 1 has k bits before the point: as many more are needed after it.
  const q = p + Math.max(0, k) + 32;
  const two = logTwo(2, q);
  const r = ((a.mid << BigInt(q - p)) - BigInt(k) * two.value) >> BigInt(HALVINGS);
  let sum = 1n << BigInt(q);
  // The reduced argument: k errors of log 2 and one of the shift; slope of exp there below 1.01.
  let error = ((BigInt(Math.abs(k)) * two.error) >> BigInt(HALVINGS)) + 4n;
  let term = sum;
  for (let j = 1n; ; j++) {
    term = ((term * r) >> BigInt(q)) / j;
    if (term === 0n || term === -1n) break;
    sum += term;
    error += 3n; // the shift, the quotient, what the terms before pass on
  }
  error += 4n;
  // (s + e)^2 = s^2 + 2 s e + e^2, s < 1.5 and e far below 1: at most four times the error, and a shift.
  for (let j = 0; j < HALVINGS; j++) {
    sum = (sum * sum) >> BigInt(q);
    error = 4n * error + 1n;
  }
  const { mid, rad } = dropped({ value: sum, error }, q - p - k);
  return { mid, rad: rad + (a.rad === 0n ? 0n : ((2n * (mid + rad) * a.rad) >> BigInt(p)) + 1n) };
}

/** cos(pi n / d), 0 <= n <= d, by the series of the cosine or the sine at an angle of at most pi / 4. */
export function cosineOfTurn(n: number, d: number, p: number): Ball {
  if (2 * n > d) {
    const { mid, rad } = cosineOfTurn(d - n, d, p);
    return { mid: -mid, rad };
  }
  const q = p + 16;
  const sine = 4 * n > d;
  // cos(pi n/d) = sin(pi (d - 2n) / 2d): the angle, within one unit for the quotient and pi's own two.
  const angle = sine ? (piBall(q).mid * BigInt(d - 2 * n)) / BigInt(2 * d) : (piBall(q).mid * BigInt(n)) / BigInt(d);
  const square = (angle * angle) >> BigInt(q);
  let term = sine ? angle : 1n << BigInt(q);
  let sum = 0n;
  let error = 6n;
  for (let j = sine ? 1 : 0; term !== 0n && term !== -1n; j += 2) {
    sum += term;
    error += 4n; // the shift, the quotient, what the terms before pass on
    term = -((term * square) >> BigInt(q)) / BigInt((j + 1) * (j + 2));
  }
  return dropped({ value: sum, error: error + 2n }, 16);
}
