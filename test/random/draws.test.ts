import { describe, expect, it } from "vitest";
import { LimitError } from "../../src/errors.js";
import { Rational } from "../../src/exact/rational.js";
import { cumulativeWeights, drawMoves, drawStartWords } from "../../src/kernel/draws.js";
import { loadKernel } from "../../src/kernel/kernel.js";

const thirds = [Rational.of(1, 3), Rational.of(1, 2), Rational.of(1, 6)];

describe("cumulativeWeights", () => {
  it("puts weights over their common denominator", () => {
    expect([...cumulativeWeights(thirds)]).toEqual([2n, 5n, 6n]);
  });
  it("refuses a common denominator beyond 2^63", () => {
    const p = Rational.of(1n, (1n << 61n) - 1n);
    expect(() => cumulativeWeights([p, p.mul(Rational.of(1, 16))])).toThrow(LimitError);
  });
});

describe("drawMoves", () => {
  it("depends on seed, replicate and move alone, not on how the range is cut", async () => {
    const kernel = await loadKernel();
    const table = cumulativeWeights(thirds);
    const whole = drawMoves(kernel, table, 7n, 3, 0, 101);
    for (const cut of [1, 2, 3, 50, 99]) {
      const parts = [...drawMoves(kernel, table, 7n, 3, 0, cut), ...drawMoves(kernel, table, 7n, 3, cut, 101 - cut)];
      expect(parts).toEqual([...whole]);
    }
    expect([...drawMoves(kernel, table, 7n, 4, 0, 101)]).not.toEqual([...whole]);
    expect([...drawMoves(kernel, table, 8n, 3, 0, 101)]).not.toEqual([...whole]);
  });

  // Weights over 2^32 take the 64-bit path; both paths must follow the weights.
  const wide = Rational.of(1n, (1n << 40n) + 15n);
  const lists = [
    thirds,
    [wide, Rational.ONE.sub(wide).mul(Rational.of(1, 4)), Rational.ONE.sub(wide).mul(Rational.of(3, 4))],
  ];
  for (const [i, weights] of lists.entries()) {
    it(`follows the weights (list ${i}): chi-square below its 1e-6 quantile`, async () => {
      const kernel = await loadKernel();
      const n = 200_000;
      const counts = new Array<number>(3).fill(0);
      for (const m of drawMoves(kernel, cumulativeWeights(weights), 1n, 0, 0, n)) counts[m]!++;
      let chi = 0;
      for (const [j, p] of weights.entries()) chi += (counts[j]! - n * p.toNumber()) ** 2 / (n * p.toNumber());
      expect(chi).toBeLessThan(27.7); // 2 degrees of freedom: exp(-27.7 / 2) = 1e-6
    });
  }
});

describe("drawStartWords", () => {
  it("extends the same point when asked for more", async () => {
    const kernel = await loadKernel();
    const long = drawStartWords(kernel, 1n, 0, 1, 9);
    expect([...drawStartWords(kernel, 1n, 0, 1, 4)]).toEqual([...long.slice(0, 4)]);
    expect([...drawStartWords(kernel, 1n, 0, 0, 4)]).not.toEqual([...long.slice(0, 4)]);
  });
});
