/** Enclosed top exponents against published values: contained, and narrow. */
import { describe, expect, it } from "vitest";
import { growth } from "../../src/growth/growth.js";

const walk = (matrices: number[][][]) => ({
  torwend: 1,
  title: "t",
  dimension: 2,
  moves: matrices.map((matrix) => ({ matrix })),
});

/** log of 1.13198824879434... Viswanath, Math. Comp. 69 (2000), gives 1.13198824; further digits: OEIS A078416. */
const FIBONACCI = Math.log(1.1319882487943);

describe("the top exponent, enclosed", () => {
  it("random Fibonacci recurrences", async () => {
    const result = await growth(
      walk([
        [
          [0, 1],
          [1, 1],
        ],
        [
          [0, 1],
          [1, -1],
        ],
      ]),
      { effort: "quick", workers: 0 },
    );
    const top = result.exponents[0]!;
    expect(top.standing).toBe("enclosed");
    // The value is given to 13 decimals of its exponential.
    expect(Number(top.low)).toBeLessThan(FIBONACCI + 1e-13);
    expect(Number(top.high)).toBeGreaterThan(FIBONACCI - 1e-13);
    expect(Number(top.high) - Number(top.low)).toBeLessThan(1e-11);
    // What sampling alone says stands beside it, and agrees.
    expect(result.sampled?.standing).toBe("estimated");
    expect(Math.abs((result.sampled?.value as number) - FIBONACCI)).toBeLessThan(0.01);
    expect(result.exponents[1]).toMatchObject({ standing: "enclosed" });
  });

  it("{[[1,1],[0,1]], [[1,0],[1,1]]}: log 2 over twice the dimension of Minkowski's question-mark measure", async () => {
    // The dimension 0.874716305108211142215152904219159757... (Alkauskas, The Minkowski question mark function, 2010).
    const expected = Math.LN2 / (2 * 0.8747163051082111);
    const { exponents } = await growth(
      walk([
        [
          [1, 1],
          [0, 1],
        ],
        [
          [1, 0],
          [1, 1],
        ],
      ]),
      { effort: "quick", workers: 0 },
    );
    expect(exponents[0]!.standing).toBe("enclosed");
    expect(Number(exponents[0]!.low)).toBeLessThan(expected + 1e-15);
    expect(Number(exponents[0]!.high)).toBeGreaterThan(expected - 1e-15);
    expect(Number(exponents[0]!.high) - Number(exponents[0]!.low)).toBeLessThan(1e-11);
  });

  it("Pollicott's pair, by the general route, against his digits", async () => {
    // Pollicott, Invent. Math. 181 (2010): 1.1433110351029492458...
    const { encloseExponent } = await import("../../src/modular/exponent.js");
    const { loadReal } = await import("../../src/kernel/real.js");
    const { Rational } = await import("../../src/exact/rational.js");
    const half = Rational.of(1n, 2n);
    const found = encloseExponent(
      [
        [2n, 1n, 1n, 1n],
        [3n, 1n, 2n, 1n],
      ],
      [half, half],
      await loadReal(),
    );
    expect(found!.low).toBeLessThan(1.1433110351029492);
    expect(found!.high).toBeGreaterThan(1.1433110351029492);
    expect(found!.high - found!.low).toBeLessThan(1e-12);
  });
});
