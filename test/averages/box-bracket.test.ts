/** Proved bounds of a box's variance, and its Fourier series. */
import { describe, expect, it } from "vitest";
import { averages } from "../../src/averages/averages.js";
import { boxTerms } from "../../src/averages/box-series.js";
import { squareNorm } from "../../src/modular/variance.js";
import { quantityNumber } from "../../src/quantity/quantity.js";
import { move, r, walkOf } from "../dual/naive.js";
import { box } from "./walks.js";

describe("boxTerms", () => {
  it("encloses the Fourier coefficients, largest first", () => {
    // The half x_1 < 1/2 is 1/2 + sum over odd k of 2 / (pi k) sin(2 pi k x_1).
    const half = boxTerms(
      box(
        [
          [0, 1],
          [0, 1],
        ],
        [
          [1, 2],
          [1, 1],
        ],
      ) as never,
      5,
    )!;
    expect(half.map((t) => t.frequency.map(Number))).toEqual([
      [1, 0],
      [3, 0],
      [5, 0],
      [7, 0],
      [9, 0],
    ]);
    for (const { frequency, cos, sin } of half) {
      const value = 2 / (Math.PI * Number(frequency[0]));
      expect(sin.low).toBeLessThanOrEqual(value * (1 + 1e-15));
      expect(sin.high).toBeGreaterThanOrEqual(value * (1 - 1e-15));
      expect(sin.high - sin.low).toBeLessThan(1e-14);
      expect(Math.max(-cos.low, cos.high)).toBeLessThan(1e-15);
    }
  });
  it("agree with sums over a grid, and have at most the box's square norm", () => {
    const b = box(
      [
        [1, 10],
        [1, 5],
      ],
      [
        [1, 2],
        [4, 5],
      ],
    );
    const terms = boxTerms(b as never, 40)!;
    // Midpoints of a grid of which the box's sides are lines: an error of order (k / 2000)^2.
    const n = 1000;
    for (const { frequency, cos, sin } of terms.slice(0, 6)) {
      const [x, y] = frequency.map(Number) as [number, number];
      let [c, s] = [0, 0];
      for (let i = 100; i < 500; i++) {
        for (let j = 200; j < 800; j++) {
          const a = 2 * Math.PI * ((x * (i + 0.5)) / n + (y * (j + 0.5)) / n);
          c += (2 * Math.cos(a)) / n ** 2;
          s += (2 * Math.sin(a)) / n ** 2;
        }
      }
      expect(Math.abs(c - (cos.low + cos.high) / 2)).toBeLessThan(1e-4);
      expect(Math.abs(s - (sin.low + sin.high) / 2)).toBeLessThan(1e-4);
    }
    const v = 0.4 * 0.6;
    expect(squareNorm(terms).high).toBeLessThan(v * (1 - v));
    expect(squareNorm(terms).low).toBeGreaterThan(0.8 * v * (1 - v));
  });
});

describe("a box's variance", () => {
  it("is bracketed around 5/4 for the half x_1 < 1/2 and the free walk", async () => {
    // Frequencies (k, 0) of different k do not meet, and each sine of coefficient c has c^2 5/2
    // (test/outside): the sum of (2 / (pi k))^2 5/2 over odd k is 5/4.
    const free = [
      [
        [1, 2],
        [0, 1],
      ],
      [
        [1, -2],
        [0, 1],
      ],
      [
        [1, 0],
        [2, 1],
      ],
      [
        [1, 0],
        [-2, 1],
      ],
    ].map((m) => move(m, r(1, 4)));
    const half = box(
      [
        [0, 1],
        [0, 1],
      ],
      [
        [1, 2],
        [1, 1],
      ],
    );
    const walk = walkOf(free, { type: "uniform" }, [half]);
    const { observables } = await averages(walk, { effort: "quick", workers: 0, steps: 400, replicates: 60 });
    const { bracket, variance, notes, degenerate } = observables[0]!;
    expect(bracket!.standing).toBe("enclosed");
    expect(Number(bracket!.low)).toBeLessThan(1.25);
    expect(Number(bracket!.high)).toBeGreaterThan(1.25);
    expect(Number(bracket!.high) / Number(bracket!.low)).toBeLessThan(1.8);
    expect(variance.standing).toBe("estimated");
    expect(quantityNumber(variance) / 1.25).toBeGreaterThan(0.5);
    expect(degenerate.verdict).toBe("fails");
    expect(notes.some((n) => /almost every start/.test(n))).toBe(true);
  });
});
