/** BigInt to limbs and back: two's complement, 64-bit, least significant first. */

/** The `limbs` limbs of x modulo 2^(64 limbs), written into `into`. */
export function writeLimbs(into: BigUint64Array, x: bigint): void {
  const n = into.length;
  const hex = BigInt.asUintN(64 * n, x)
    .toString(16)
    .padStart(16 * n, "0");
  for (let i = 0; i < n; i++) into[i] = BigInt(`0x${hex.slice(16 * (n - 1 - i), 16 * (n - i))}`);
}

/** The signed integer that the limbs are the two's complement of. */
export function readLimbs(from: BigUint64Array): bigint {
  let hex = "0x";
  for (let i = from.length - 1; i >= 0; i--) hex += (from[i] as bigint).toString(16).padStart(16, "0");
  return BigInt.asIntN(64 * from.length, BigInt(hex));
}
