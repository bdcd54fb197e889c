import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { exactCbrt, exactSqrt, integerCbrt, integerSqrt } from "../../src/exact/integer-roots.js";

const big = fc.oneof(fc.bigInt({ min: 0n, max: 1000n }), fc.bigInt({ min: 0n, max: 1n << 700n }));

describe("integer roots", () => {
  it("rounds square roots down", () => {
    fc.assert(
      fc.property(big, (n) => {
        const r = integerSqrt(n);
        expect(r * r <= n && n < (r + 1n) * (r + 1n)).toBe(true);
      }),
    );
  });

  it("rounds cube roots down, for either sign", () => {
    fc.assert(
      fc.property(big, fc.boolean(), (size, negative) => {
        const n = negative ? -size : size;
        const r = integerCbrt(n);
        expect(r ** 3n <= n && n < (r + 1n) ** 3n).toBe(true);
      }),
    );
  });

  it("is right just beside squares and cubes", () => {
    fc.assert(
      fc.property(fc.bigInt({ min: 2n, max: 1n << 400n }), (r) => {
        expect(integerSqrt(r * r - 1n)).toBe(r - 1n);
        expect(integerSqrt(r * r)).toBe(r);
        expect(integerCbrt(r ** 3n - 1n)).toBe(r - 1n);
        expect(integerCbrt(r ** 3n)).toBe(r);
        expect(exactSqrt(r * r + 1n)).toBeUndefined();
        expect(exactCbrt(-(r ** 3n))).toBe(-r);
      }),
    );
  });

  it("refuses the square root of a negative integer", () => {
    expect(() => integerSqrt(-4n)).toThrow("integerSqrt: -4 is negative");
  });
});
