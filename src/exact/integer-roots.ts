/** Integer square and cube roots of BigInt, rounded down, by Newton with doubling precision. */
import { bitLength } from "./rational.js";

/**
 * floor(sqrt(n)) for n >= 0.
 *
 * Each pass extends a root of the leading digits to twice as many digits with one division;
 * after every pass but the last correction (a - 1)^2 < leading part < (a + 1)^2, so that one
 * comparison at the end settles the last unit. The time is that of the last division.
 *
 * @throws RangeError when n < 0.
 */
export function integerSqrt(n: bigint): bigint {
  if (n < 0n) throw new RangeError(`integerSqrt: ${n} is negative`);
  if (n === 0n) return 0n;
  const half = Math.floor((bitLength(n) - 1) / 2);
  let root = 1n;
  let digits = 0;
  for (let s = 32 - Math.clz32(half) - 1; s >= 0; s--) {
    const before = digits;
    digits = half >>> s;
    root = (root << BigInt(digits - before - 1)) + (n >> BigInt(2 * half - before - digits + 1)) / root;
  }
  return root * root > n ? root - 1n : root;
}

/** The integer nearest to cbrt(n) towards minus infinity: floor(cbrt(n)), any sign of n. */
export function integerCbrt(n: bigint): bigint {
  if (n < 0n) {
    const root = integerCbrt(-n);
    return root * root * root === -n ? -root : -root - 1n;
  }
  if (n < 8n) return n === 0n ? 0n : 1n;
  // The root of the leading half of the digits, plus one, is above the root: Newton then
  // decreases to the floor, and stops when it no longer decreases.
  const cut = Math.floor((bitLength(n) - 1) / 6);
  let root =
    cut === 0 ? 1n << BigInt(Math.ceil(bitLength(n) / 3)) : (integerCbrt(n >> BigInt(3 * cut)) + 1n) << BigInt(cut);
  for (;;) {
    const next = (2n * root + n / (root * root)) / 3n;
    if (next >= root) return root;
    root = next;
  }
}

/** The exact square root of n >= 0, where n is a square. */
export function exactSqrt(n: bigint): bigint | undefined {
  const root = integerSqrt(n);
  return root * root === n ? root : undefined;
}

/** The exact cube root of n, where n is a cube. */
export function exactCbrt(n: bigint): bigint | undefined {
  const root = integerCbrt(n);
  return root * root * root === n ? root : undefined;
}
