/** Statistics against published tables, and a variance known in closed form. */
import { describe, expect, it } from "vitest";
import { segmentSums } from "../../src/averages/replicates.js";
import { planSegments } from "../../src/averages/segments.js";
import { summarise } from "../../src/averages/summary.js";
import { loadReal } from "../../src/kernel/real.js";
import { twoSidedNormal, twoSidedT } from "../../src/statistics/distributions.js";
import { proportionEstimate } from "../../src/statistics/intervals.js";
import { kolmogorovTail } from "../../src/statistics/kolmogorov.js";
import { FREE, makeWalk, wave } from "../averages/walks.js";

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

// The free group's two generators [[1,2],[0,1]], [[1,0],[2,1]] with their inverses, 1/4 each, and
// f = cos(2 pi x_1): <f, P^n f> / <f, f> is the return probability of the walk on the coset graph of a
// cyclic subgroup, one vertex with a loop (1/2) and two 4-regular trees (1/4 each). From a tree's root one
// step out the walk comes back with probability 1/3 (Kesten, Trans. AMS 1959: the 4-regular tree), so
// the expected visits are 1 / (1 - 1/2 - 2 (1/4)(1/3)) = 3, and sigma^2 = (1/2)(2 * 3 - 1) = 5/2.
describe("variance of a time average in closed form", () => {
  it("5/2 within the sample's interval at level 0.9999, and the interval is narrow", async () => {
    const real = await loadReal();
    const steps = 4000;
    const segments = planSegments(steps, real);
    const walk = makeWalk(FREE, { type: "uniform" }, [wave([1, 0], 1)]);
    const { ends } = segments;
    const count = 600;
    const sums = await segmentSums(walk, { seed: 1n, steps, first: 0, count, ends, memoryLimit: 2 ** 28 });
    const replicates = Array.from({ length: count }, (_, r) => sums.subarray(r * ends.length, (r + 1) * ends.length));
    const shared = { segments, replicates, mean: 0, size: 1, swing: 1, error: 2 ** -45, start: "uniform points" };
    const sure = summarise({ ...shared, variance: 2.5, level: 0.9999 }, real);
    for (const q of [sure.mean, sure.variance]) {
      const truth = q === sure.mean ? 0 : 2.5;
      expect(Number(q.low)).toBeLessThanOrEqual(truth);
      expect(Number(q.high)).toBeGreaterThanOrEqual(truth);
    }
    expect(Number(sure.variance.high) - Number(sure.variance.low)).toBeLessThan(1.3);
    // Batches of 125 moves: biased by order 1/125 of the correlations' reach.
    expect(Math.abs(Number(sure.batchMeansVariance.value) - 2.5)).toBeLessThan(0.15);
    expect(sure.normalDistance.pValue).toBeGreaterThan(1e-3);
    const usual = summarise({ ...shared, variance: 2.5, level: 0.95 }, real);
    expect(Number(usual.coverage.value)).toBeGreaterThan(0.91);
    expect(Number(usual.coverage.value)).toBeLessThan(0.985);
  });
});
