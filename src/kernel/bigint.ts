/** BigInt to limbs and back: two's complement, 64-bit, least significant first. */

/** The value of a hexadecimal digit's character code. */
function digit(code: number): number {
  return code < 58 ? code - 48 : code - 87;
}

/** The limbs of x modulo 2^(64 limbs), written into `into`. Digits are read off the text: a BigInt a limb is dear. */
export function writeLimbs(into: BigUint64Array, x: bigint): void {
  const n = into.length;
  const hex = BigInt.asUintN(64 * n, x).toString(16);
  const halves = new Uint32Array(into.buffer, into.byteOffset, 2 * n);
  let end = hex.length;
  for (let i = 0; i < 2 * n; i++) {
    let value = 0;
    for (let at = Math.max(0, end - 8); at < end; at++) value = (value << 4) | digit(hex.charCodeAt(at));
    halves[i] = value;
    end -= 8;
  }
}

/** The signed integer that the limbs are the two's complement of. */
export function readLimbs(from: BigUint64Array): bigint {
  let hex = "0x";
  for (let i = from.length - 1; i >= 0; i--) hex += (from[i] as bigint).toString(16).padStart(16, "0");
  return BigInt.asIntN(64 * from.length, BigInt(hex));
}
