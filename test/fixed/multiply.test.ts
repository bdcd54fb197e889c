/** Products by the transform against BigInt, worst-case operands included, in both builds. */
import { describe, expect, it } from "vitest";
import { type KernelTarget, loadKernel } from "../../src/kernel/kernel.js";
import { type DigitWidth, multiply } from "../../src/kernel/multiply.js";

/** A soak: TORWEND_TEST_SCALE=10 repeats the random part ten times. */
const SCALE = Number(process.env.TORWEND_TEST_SCALE ?? 1);

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

/** `pattern` (binary) over and over, cut to `bits` bits. */
function repeated(pattern: string, bits: number): bigint {
  const text = pattern.repeat(Math.ceil(bits / pattern.length)).slice(-bits);
  const padded = text.padStart(4 * Math.ceil(bits / 4), "0");
  return BigInt(`0x${padded.replace(/..../g, (nibble) => Number.parseInt(nibble, 2).toString(16))}`);
}

/** Operands at which carries, signs and digits are at their worst. */
function corners(limbs: number, width: number): bigint[] {
  const bits = 64 * limbs - 1;
  const ones = (1n << BigInt(bits)) - 1n;
  const alternating = repeated("10", bits);
  // Every digit at its largest: 2^(width-1) - 1, and -2^(width-1), in each place.
  const high = repeated(`0${"1".repeat(width - 1)}`, bits);
  const low = -repeated(`1${"0".repeat(width - 1)}`, bits);
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
  it("refuses digits too wide for its proof, and is exact with narrower ones", async () => {
    const kernel = await loadKernel({ target });
    const limbs = 65_536;
    // 2^22 bits of largest 14-bit digits: the bound passes 7/16, so the product is refused, not risked.
    const worst = repeated(`1${"0".repeat(13)}`, 64 * limbs - 1);
    expect(() => multiply(kernel, worst, worst, limbs, 14)).toThrow(/failed its check/);
    expect(multiply(kernel, worst, worst, limbs, 12)).toBe(worst * worst);
  });
  it("checks products that wrap, at every length that is taken: the primes have roots for them", async () => {
    const width = 12;
    for (const length of [8, 24, 40, 3 << 10, 5 << 11, 3 << 17, 1 << 21]) {
      const { raw, ...kernel } = await loadWithArena(target);
      const plan = raw.makePlan(length, 0) >>> 0;
      // All 2 M digits: what passes the top wraps with its sign turned, which only rho^(2M) = -1 can check.
      const limbs = Math.floor((2 * length * width) / 64);
      const [a, b, out] = [0, 1, 2].map(() => kernel.alloc(8 * limbs)) as [number, number, number];
      const next = source(length);
      for (const at of [a, b]) {
        const words = kernel.u32(at, 2 * limbs);
        for (let i = 0; i < words.length; i++) words[i] = next();
      }
      const [x, y, work] = [0, 1, 2].map(() => kernel.alloc(16 * length)) as [number, number, number];
      const [xNotes, yNotes] = [kernel.alloc(16), kernel.alloc(16)] as const;
      raw.treeTransform(plan, x, xNotes, a, 8 * limbs, 1, limbs, width, true);
      raw.treeTransform(plan, y, yNotes, b, 8 * limbs, 1, limbs, width, true);
      const row = () => raw.treeRow(plan, x, xNotes, y, yNotes, 1, 1, work, out, 8 * limbs, limbs, 0, width, true);
      expect(row(), `length ${length}`).toBe(0);
      // A wrong evaluation is seen.
      kernel.f64(y, 1)[0]! += 2 ** 30;
      expect(row(), `length ${length}`).not.toBe(0);
    }
  });
});

async function loadWithArena(target: KernelTarget) {
  const kernel = await loadKernel({ target, memoryLimit: 2 ** 29 });
  return {
    raw: kernel.raw,
    alloc: (bytes: number) => kernel.alloc(bytes, "a test"),
    u32: kernel.u32.bind(kernel),
    f64: kernel.f64.bind(kernel),
  };
}
