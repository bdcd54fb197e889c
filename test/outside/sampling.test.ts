/** Statistics against published tables. */
import { describe, expect, it } from "vitest";
import { loadReal } from "../../src/kernel/real.js";
import { twoSidedNormal, twoSidedT } from "../../src/statistics/distributions.js";
import { proportionEstimate } from "../../src/statistics/intervals.js";
import { kolmogorovTail } from "../../src/statistics/kolmogorov.js";

describe("published tables", () => {
  it("Student's t and normal quantiles (standard tables, from memory)", () => {
    expect(twoSidedT(0.95, 10)).toBeCloseTo(2.228, 3);
    expect(twoSidedT(0.99, 5)).toBeCloseTo(4.032, 3);
    expect(twoSidedT(0.95, 1)).toBeCloseTo(12.706, 3);
    expect(twoSidedNormal(0.95)).toBeCloseTo(1.959964, 6);
    expect(twoSidedNormal(0.99)).toBeCloseTo(2.575829, 6);
  });

  // Smirnov, Annals of Mathematical Statistics 19 (1948), percentage points; from memory.
  it("Kolmogorov's limit law", async () => {
    const real = await loadReal();
    for (const [x, tail] of [
      [1.2238, 0.1],
      [1.3581, 0.05],
      [1.6276, 0.01],
      [0.8276, 0.5],
    ] as const) {
      expect(kolmogorovTail(x, real)).toBeCloseTo(tail, 4);
    }
  });

  // Newcombe, Statistics in Medicine 17 (1998), table I, score method without continuity correction; from memory.
  it("Wilson's interval", () => {
    for (const [hits, trials, low, high] of [
      [81, 263, 0.2553, 0.3662],
      [15, 148, 0.0624, 0.1605],
      [0, 20, 0, 0.1611],
      [1, 29, 0.0061, 0.1718],
    ] as const) {
      const { interval } = proportionEstimate(hits, trials, 0.95);
      expect(interval!.low).toBeCloseTo(low, 4);
      expect(interval!.high).toBeCloseTo(high, 4);
    }
  });
});
