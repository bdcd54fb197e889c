import { describe, expect, it } from "vitest";
import { plain, quantity, table } from "../../src/cli/render.js";
import { Rational } from "../../src/exact/rational.js";
import { enclosedQuantity, estimatedQuantity, exactQuantity } from "../../src/quantity/quantity.js";

describe("quantities in a line", () => {
  it("show the digits that the interval supports", () => {
    const q = estimatedQuantity(1.14331103, "m", { low: 1.143289, high: 1.143333 });
    expect(quantity(q)).toBe("1.143311 (estimated, 95 %: 1.143289 to 1.143333)");
    expect(quantity(estimatedQuantity(0.4999996, "m"))).toBe("0.5000 (estimated)");
    const narrow = quantity(enclosedQuantity(0.25, 0.25000000001, "m"));
    expect(narrow).toMatch(/^0\.250000000005\d* \(proved to lie in: 0\.2500000000\d* to 0\.25000000001\d*\)$/);
    expect(quantity(exactQuantity(Rational.of(-1, 3), "m"))).toBe("-1/3 ≈ -0.333333 (exact)");
    expect(quantity(exactQuantity(1234567n, "m"))).toBe("1234567 (exact)");
  });
  it("never show what is no number", () => {
    expect(quantity(estimatedQuantity(Number.NaN, "m"))).not.toContain("NaN");
    expect(quantity(estimatedQuantity(-0, "m"))).toBe("0 (estimated)");
    expect(quantity(estimatedQuantity(192.3, "m"), true)).toBe("193 (estimated)");
  });
  it("can be copied", () => {
    expect(plain("−1.25\u202f×\u202f10⁻¹²")).toBe("-1.25e-12");
    expect(Number(plain("12\u202f345.5"))).toBe(12345.5);
  });
});

describe("tables", () => {
  it("align columns and leave out empty ones", () => {
    expect(
      table(
        ["a", "b", "c"],
        [
          ["1", "", "x"],
          ["10", "", "y"],
        ],
      ),
    ).toBe("  a   c\n  --  -\n  1   x\n  10  y");
  });
});
