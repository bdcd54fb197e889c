import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { Rational } from "../../src/exact/rational.js";
import { loadReal } from "../../src/kernel/real.js";
import { batchCount, batchEnds, batchMeans } from "../../src/statistics/batches.js";
import { normalCdf, normalQuantile, tQuantile } from "../../src/statistics/distributions.js";
import { meanEstimate, proportionEstimate, varianceEstimate } from "../../src/statistics/intervals.js";
import { envelope } from "../../src/statistics/iterated.js";
import { kolmogorovDistance, kolmogorovPValue, kolmogorovTail } from "../../src/statistics/kolmogorov.js";
import { mean, quantile, sum, variance } from "../../src/statistics/moments.js";
import { normals, uniforms } from "./samples.js";

const finite = fc.double({ noNaN: true, min: -1e6, max: 1e6 });

describe("moments", () => {
  it("sum: as exact fractions give, but for one rounding and the square of the unit", () => {
    fc.assert(
      fc.property(fc.array(finite, { maxLength: 40 }), (x) => {
        const exact = x.reduce((s, v) => s.add(Rational.fromNumber(v)), Rational.ZERO);
        const size = x.reduce((s, v) => s + Math.abs(v), 0);
        const off = Rational.fromNumber(sum(x)).sub(exact).abs().toNumber();
        expect(off).toBeLessThanOrEqual(2 ** -53 * Math.abs(exact.toNumber()) + 40 ** 2 * 2 ** -104 * size);
      }),
    );
    expect(sum([1e16, 1, -1e16])).toBe(1);
  });
  it("variance: against exact fractions, also far from 0", () => {
    const x = [1, 2, 4, 8].map((v) => v + 2 ** 40);
    // Mean 15/4; squared deviations 121/16, 49/16, 1/16, 289/16, their sum 115/4, over 3.
    expect(variance(x)).toBeCloseTo(115 / 12, 12);
    expect(() => variance([1])).toThrow("found 1 values");
    expect(() => mean([])).toThrow("empty");
  });
  it("quantile: order statistics and the line between", () => {
    expect(quantile([3, 1, 2], 0.5)).toBe(2);
    expect(quantile([4, 1], 0.25)).toBe(1.75);
    expect(quantile([4, 1], 1)).toBe(4);
    expect(() => quantile([], 0.5)).toThrow(RangeError);
  });
});

describe("distributions", () => {
  it("quantiles invert the distribution function and are odd about 1/2", () => {
    for (const p of [1e-9, 0.01, 0.3, 0.5, 0.975]) {
      expect(Math.abs(normalCdf(normalQuantile(p)) - p)).toBeLessThan(1e-15);
      expect(tQuantile(p, 7) + tQuantile(1 - p, 7)).toBeCloseTo(0, 4);
    }
  });
});

describe("Kolmogorov", () => {
  it("both series agree where they meet, the tail falls from 1 to 0", async () => {
    const real = await loadReal();
    expect(kolmogorovTail(1 - 1e-13, real)).toBeCloseTo(kolmogorovTail(1, real), 11);
    let last = 1;
    for (let x = 0; x < 6; x += 0.05) {
      const p = kolmogorovTail(x, real);
      expect(p).toBeLessThanOrEqual(last);
      expect(p).toBeGreaterThanOrEqual(0);
      last = p;
    }
    expect(last).toBeLessThan(1e-25);
  });
  it("distance: by hand", () => {
    const uniform = (x: number) => Math.min(1, Math.max(0, x));
    expect(kolmogorovDistance([0.5], uniform)).toBe(0.5);
    expect(kolmogorovDistance([0.9, 0.8], uniform)).toBe(0.8);
    expect(kolmogorovDistance([0.25, 0.75], uniform)).toBe(0.25);
  });
  it("p-values of normal samples of 40 are uniform, of shifted ones are small", async () => {
    const real = await loadReal();
    const all: number[] = [];
    const shifted: number[] = [];
    for (let i = 0; i < 600; i++) {
      const x = await normals(1n, i, 40);
      all.push(kolmogorovPValue(kolmogorovDistance(x, normalCdf), 40, real));
      shifted.push(
        kolmogorovPValue(
          kolmogorovDistance(x, (v) => normalCdf(v - 1)),
          40,
          real,
        ),
      );
    }
    const distance = kolmogorovDistance(all, (p) => p);
    expect(kolmogorovPValue(distance, all.length, real)).toBeGreaterThan(1e-3);
    expect(quantile(shifted, 0.9)).toBeLessThan(1e-3);
  });
});

describe("intervals cover at their level", () => {
  // Independent trials at 0.95: outside [925, 975] of 1000 with probability below 4e-4 (normal tail at 3.6).
  const trials = 1000;
  const fair = (hits: number) => {
    expect(hits).toBeGreaterThan(925);
    expect(hits).toBeLessThan(975);
  };
  const covers = (e: { interval?: { low: number; high: number } }, x: number) =>
    e.interval !== undefined && e.interval.low <= x && x <= e.interval.high;

  it("mean (12 normal values), variance (60 normal, 200 uniform values)", async () => {
    const real = await loadReal();
    let means = 0;
    let variances = 0;
    let flat = 0;
    let width = 0;
    for (let i = 0; i < trials; i++) {
      const x = await normals(2n, i, 60);
      if (covers(meanEstimate(x.slice(0, 12), 0.95), 0)) means++;
      const v = varianceEstimate(x, 0.95, real);
      if (covers(v, 1)) variances++;
      width += ((v.interval?.high ?? 0) - (v.interval?.low ?? 0)) / trials;
      if (covers(varianceEstimate(await uniforms(3n, i, 200), 0.95, real), 1 / 12)) flat++;
    }
    fair(means);
    fair(variances);
    fair(flat);
    // The chi-square interval of 60 normal values has mean width 0.77 (59/39.66 - 59/82.12): no wider than 1.2 of it.
    expect(width).toBeLessThan(1.2 * 0.77);
  });

  it("batch means (16 batches of unequal length)", async () => {
    const ends = batchEnds(1001, 16);
    let hits = 0;
    let total = 0;
    for (let i = 0; i < trials; i++) {
      const z = await normals(4n, i, 16);
      const lengths = ends.map((e, j) => e - (ends[j - 1] ?? 0));
      // Sums of l independent values of mean 3, variance 4.
      const sums = z.map((v, j) => 3 * lengths[j]! + 2 * Math.sqrt(lengths[j]!) * v);
      const b = batchMeans(sums, lengths, 0.95);
      if (Math.abs(b.average - 3) <= b.halfWidth) hits++;
      total += b.variance / trials;
    }
    fair(hits);
    // Each estimate is 4 chi-square(15) / 15: the mean of 1000 has standard error 4 sqrt(2/15/1000) = 0.046.
    expect(Math.abs(total - 4)).toBeLessThan(0.2);
  });

  it("proportion: Wilson's ends solve (p - q)^2 = z^2 q (1 - q) / n", () => {
    for (const [hits, n] of [
      [0, 20],
      [3, 10],
      [10, 10],
      [90, 1000],
    ] as const) {
      const { value: p, interval } = proportionEstimate(hits, n, 0.95);
      const z = normalQuantile(0.975);
      for (const q of [interval!.low, interval!.high]) expect((p - q) ** 2).toBeCloseTo((z * z * q * (1 - q)) / n, 14);
      expect(interval!.low).toBeLessThanOrEqual(p);
      expect(interval!.high).toBeGreaterThanOrEqual(p);
    }
  });
});

describe("what a sample cannot give", () => {
  it("no variance interval for equal values, or all but one equal", async () => {
    const real = await loadReal();
    expect(varianceEstimate([2, 2, 2, 2], 0.95, real)).toEqual({ value: 0 });
    expect(varianceEstimate([2, 2, 2, 5], 0.95, real).interval).toBeUndefined();
    expect(varianceEstimate([1, 2], 0.95, real)).toEqual({ value: 0.5 });
  });
  it("batches: 2 at least, 32 at most; ends increase to n", () => {
    expect([2, 3, 16, 100, 5000].map(batchCount)).toEqual([2, 2, 4, 10, 32]);
    expect(batchEnds(10, 3)).toEqual([3, 6, 10]);
  });
  it("the envelope grows from n = 1 on", async () => {
    const real = await loadReal();
    expect(envelope(16, 2, real) / 4).toBeCloseTo(2 * Math.sqrt(real.log(real.log(16))), 12);
    expect(envelope(1, 1, real)).toBeGreaterThan(0);
    expect(envelope(100, 0, real)).toBe(0);
  });
});
