/** BigInt to limbs and back: two's complement, 64-bit, least significant first. */
import type { Kernel } from "./kernel.js";

/**
 * Writes the `limbs` limbs of x modulo 2^(64 limbs) at an address. The engine's text of x is
 * read by the kernel: a BigInt a limb would be dear.
 * @throws LimitError
 */
export function writeLimbs(kernel: Kernel, at: number, limbs: number, x: bigint): void {
  const text = BigInt.asUintN(64 * limbs, x).toString(16);
  kernel.scoped(() => {
    const bytes = kernel.alloc(text.length, "a number's text");
    new TextEncoder().encodeInto(text, kernel.u8(bytes, text.length));
    kernel.raw.limbsFromHex(at, limbs, bytes, text.length);
  });
}

/** The signed integer that the limbs are the two's complement of. */
export function readLimbs(from: BigUint64Array): bigint {
  let hex = "0x";
  for (let i = from.length - 1; i >= 0; i--) hex += (from[i] as bigint).toString(16).padStart(16, "0");
  return BigInt.asIntN(64 * from.length, BigInt(hex));
}
