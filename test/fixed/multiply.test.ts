/** Products by the transform against BigInt, worst-case operands included, in both builds. */
import { describe, expect, it } from "vitest";
import { type KernelTarget, loadKernel } from "../../src/kernel/kernel.js";
import { type DigitWidth, multiply } from "../../src/kernel/multiply.js";

/** A soak: TORWEND_TEST_SCALE=10 repeats the random part ten times. */
const SCALE = Number(process.env["TORWEND_TEST_SCALE"] ?? 1);

/** A small generator of our own, so that a failure repeats (Marsaglia's xorshift, 2003). */
function source(seed: number): () => number {
  let x = seed | 0 || 1;
  return () => {
    x ^= x << 13;
    x ^= x >>> 17;
    x ^= x << 5;
    return x >>> 0;
  };
}
function random(bits: number, next: () => number): bigint {
  let hex = "0x0";
  for (let have = 0; have < bits; have += 32) hex += next().toString(16).padStart(8, "0");
  return BigInt.asUintN(bits, BigInt(hex));
}

function corners(limbs: number, width: number): bigint[] {
  const bits = 64 * limbs - 1;
  const ones = (1n << BigInt(bits)) - 1n;
  // Every digit at its largest: 2^(width-1) - 1, and -2^(width-1), in each place.
  let high = 0n;
  let low = 0n;
  for (let at = 0; at + width < bits; at += width) {
    high |= ((1n << BigInt(width - 1)) - 1n) << BigInt(at);
    low -= (1n << BigInt(width - 1)) << BigInt(at);
  }
  const alternating = BigInt(`0x${"5".repeat(16 * limbs)}`);
  return [0n, 1n, -1n, ones, -ones, -ones - 1n, alternating, -alternating, high, low, 1n << BigInt(bits - 1)];
}

describe.each(["simd", "plain"] as KernelTarget[])("multiply (%s)", (target) => {
  for (const width of [14, 12] as DigitWidth[]) {
    it(`agrees with BigInt on corner cases, digits of ${width} bits`, async () => {
      const kernel = await loadKernel({ target });
      for (const limbs of [1, 2, 3, 7, 20, 64, 200, 333]) {
        const list = corners(limbs, width);
        for (const x of list) for (const y of list) expect(multiply(kernel, x, y, limbs, width)).toBe(x * y);
      }
    });
    it(`agrees with BigInt on random operands of every small size, digits of ${width} bits`, async () => {
      const kernel = await loadKernel({ target });
      const next = source(20_240 + width);
      for (let limbs = 1; limbs <= 60 * SCALE; limbs++) {
        const x = random(64 * limbs - 1, next) * (next() & 1 ? 1n : -1n);
        const y = random(next() % (64 * limbs - 1), next) * (next() & 1 ? 1n : -1n);
        expect(multiply(kernel, x, y, limbs, width)).toBe(x * y);
      }
    });
  }
  it("agrees with BigInt on a million bits of the largest digits, and refuses what it cannot prove", async () => {
    const kernel = await loadKernel({ target });
    const limbs = 8192;
    for (const x of corners(limbs, 12)) expect(multiply(kernel, x, x, limbs, 12)).toBe(x * x);
    const worst = corners(32_768, 14)[9] as bigint;
    // 2^21 bits of largest 14-bit digits: the bound passes 7/16, so the product is refused, not risked.
    expect(() => multiply(kernel, worst, worst, 32_768, 14)).toThrow(/failed its check/);
    expect(multiply(kernel, worst, worst, 32_768, 12)).toBe(worst * worst);
  });
});
