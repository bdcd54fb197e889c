/** Exact numbers against decimal.js, an independent arbitrary-precision library, and against published digits. */
import { Decimal } from "decimal.js";
import { describe, expect, it } from "vitest";
import { exactFromText } from "../../src/exact/read.js";
import { fnv1a64 } from "../../src/walk/hash.js";

const Wide = Decimal.clone({ precision: 1010 });

describe("constants and roots to 1000 digits", () => {
  it.each([
    ["sqrt(2)", () => new Wide(2).sqrt()],
    ["sqrt(22/7)", () => new Wide(22).div(7).sqrt()],
    ["cbrt(2)", () => new Wide(2).cbrt()],
    ["cbrt(10/3)", () => new Wide(10).div(3).cbrt()],
    ["pi", () => Wide.acos(-1)],
    ["e", () => Wide.exp(1)],
    ["e^2/pi", () => Wide.exp(2).div(Wide.acos(-1))],
  ] as [string, () => Decimal][])("%s", (text, value) => {
    const bits = 3321;
    const off = value().times(new Wide(2).pow(bits)).minus(exactFromText(text).toFixed(bits).toString()).abs();
    expect(off.lte(1.0001), `off by ${off.toString()}`).toBe(true);
  });

  // Published digits, from memory: OEIS A000796 (pi), A001113 (e), A002193 (sqrt 2), A002580 (cbrt 2).
  it.each([
    ["pi", "314159265358979323846264338327950288419716939937510"],
    ["e", "271828182845904523536028747135266249775724709369995"],
    ["sqrt(2)", "141421356237309504880168872420969807856967187537694"],
    ["cbrt(2)", "125992104989487316476721060727822835057025146470150"],
  ])("%s begins with its published 51 digits", (text, digits) => {
    const m = exactFromText(text).toFixed(200);
    expect((m * 10n ** 50n) >> 200n).toBe(BigInt(digits));
  });

  it("sqrt(2) squared to 200000 bits is 2", () => {
    const m = exactFromText("sqrt(2)").toFixed(200_000);
    const off = m * m - (2n << 400_000n);
    expect((off < 0n ? -off : off) < m * 3n).toBe(true);
  });
});

describe("the fingerprint", () => {
  // Test vectors of Fowler, Noll and Vo for FNV-1a with 64 bits, from memory.
  it.each([
    ["", "cbf29ce484222325"],
    ["a", "af63dc4c8601ec8c"],
    ["foobar", "85944171f73967e8"],
  ])("of %j is %s", (text, hash) => {
    expect(fnv1a64(text)).toBe(hash);
  });
});
