/** Products of big integers by the transform: the border of assembly/fixed. */
import { LimitError } from "../errors.js";
import { readLimbs, writeLimbs } from "./bigint.js";
import type { Kernel } from "./kernel.js";

/** Bits of a transform's digit. 14 is fast; 12 is exact for longer products (see assembly/fixed/transform.ts). */
export type DigitWidth = 12 | 14;

/**
 * x y, computed in the kernel with `limbs` limbs an operand (64 bits each, two's complement).
 * @throws LimitError where the arena is too small, Error where the product fails its check or
 * its digits are too wide for the proof: neither has been seen to happen at width 12.
 */
export function multiply(kernel: Kernel, x: bigint, y: bigint, limbs: number, width: DigitWidth): bigint {
  return kernel.scoped(() => {
    const a = kernel.alloc(8 * limbs, "an operand");
    const b = kernel.alloc(8 * limbs, "an operand");
    const r = kernel.alloc(16 * limbs, "a product");
    const plan = kernel.raw.productPlan(128 * limbs, width) >>> 0;
    if (plan === 0) throw new LimitError(`a transform for ${128 * limbs} bits does not fit the memory limit`);
    writeLimbs(kernel, a, limbs, x);
    writeLimbs(kernel, b, limbs, y);
    const status = kernel.raw.multiply(r, a, limbs, b, limbs, plan, width);
    if (status === kernel.raw.statusFull()) throw new LimitError("a product does not fit the memory limit");
    if (status !== 0) throw new Error(`multiply: a product of ${limbs} limbs failed its check at width ${width}`);
    return readLimbs(kernel.u64(r, 2 * limbs));
  });
}
