import { beforeAll, describe, expect, it } from "vitest";
import { planSegments } from "../../src/averages/segments.js";
import { type SummaryInput, summarise } from "../../src/averages/summary.js";
import { loadReal, type Real } from "../../src/kernel/real.js";
import { quantityNumber } from "../../src/quantity/quantity.js";
import { kolmogorovDistance, kolmogorovPValue } from "../../src/statistics/kolmogorov.js";
import { normals } from "../statistics/samples.js";

let real: Real;
beforeAll(async () => {
  real = await loadReal();
});

describe("planSegments", () => {
  it("ends increase to steps; batches, checkpoints and running points are among them", () => {
    for (const steps of [2, 3, 15, 16, 17, 31, 100, 12_345, 1_000_000]) {
      const { ends, batches, envelope, running } = planSegments(steps, real);
      expect(ends.every((n, i) => n >= 1 && n > (ends[i - 1] ?? 0))).toBe(true);
      expect(ends.at(-1)).toBe(steps);
      for (const list of [batches, running]) expect(ends[list.at(-1)!]).toBe(steps);
      expect(ends[running[0]!]).toBe(1);
      expect(envelope.every((i) => ends[i]! >= Math.max(16, Math.floor(steps / 2)))).toBe(true);
      expect(envelope.length > 0).toBe(steps >= 16);
    }
    const { running, envelope } = planSegments(1_000_000, real);
    expect(running.length).toBeGreaterThan(150);
    expect(envelope.length).toBe(65);
  });
});

/** Sums of independent normal steps of mean 3 and variance 4, by segments. */
async function synthetic(seed: bigint, replicates: number, steps: number, known = true): Promise<SummaryInput> {
  const segments = planSegments(steps, real);
  const rows: number[][] = [];
  for (let r = 0; r < replicates; r++) {
    const z = await normals(seed, r, segments.ends.length);
    rows.push(
      z.map((v, j) => {
        const length = segments.ends[j]! - (segments.ends[j - 1] ?? 0);
        return 3 * length + 2 * Math.sqrt(length) * v;
      }),
    );
  }
  const variance = known ? 4 : undefined;
  return { segments, replicates: rows, mean: 3, variance, size: 10, swing: 7, error: 0, level: 0.95, start: "a test" };
}

describe("summarise", () => {
  it("independent normal steps: every part is what theory says", async () => {
    const s = summarise(await synthetic(11n, 800, 4000), real);
    const holds = (q: { low?: string; high?: string }, x: number) => Number(q.low) <= x && x <= Number(q.high);
    expect(holds(s.mean, 3)).toBe(true);
    expect(holds(s.variance, 4)).toBe(true);
    expect(holds(s.batchMeansVariance, 4)).toBe(true);
    expect(holds(s.coverage, 0.95)).toBe(true);
    // Narrow: relative standard errors sqrt(2/800) = 5 % and sqrt(2/31/800) = 0.9 %.
    expect(Number(s.variance.high) - Number(s.variance.low)).toBeLessThan(4 * 4 * 0.06);
    expect(Number(s.batchMeansVariance.high) - Number(s.batchMeansVariance.low)).toBeLessThan(4 * 4 * 0.011);
    expect(s.normalDistance.pValue).toBeGreaterThan(0.01);
    // Of 800 paths the largest of |S_n| / sqrt(n) over the half is some 3.5 standard deviations or more, over sqrt(2 log log 4000) = 2.06.
    expect(s.iteratedLogarithm.largest).toBeGreaterThan(1.3);
    expect(s.iteratedLogarithm.largest).toBeLessThan(3);
    expect(s.iteratedLogarithm.median).toBeLessThan(1);
    expect(s.standardised).toHaveLength(800);
    const last = s.running.at(-1)!;
    expect(last.moves).toBe(4000);
    expect((last.high - last.low) / 2).toBeCloseTo(1.959964 * Math.sqrt(4 / 4000), 6);
    expect(last.envelope).toBeCloseTo(Math.sqrt((8 * real.log(real.log(4000))) / 4000), 12);
    expect(last.average).toBeCloseTo(3 + s.standardised[0]! * Math.sqrt(4 / 4000), 10);
  });

  it("p-values over independent repetitions are uniform, with known variance and with batch means'", async () => {
    for (const known of [true, false]) {
      const p: number[] = [];
      for (let i = 0; i < 60; i++) {
        const s = summarise(await synthetic(BigInt(100 + i), 100, 64, known), real);
        expect(s.normalDistance.method).toContain(known ? "limit variance" : "batch-means variance");
        p.push(s.normalDistance.pValue!);
      }
      expect(
        kolmogorovPValue(
          kolmogorovDistance(p, (x) => x),
          p.length,
          real,
        ),
      ).toBeGreaterThan(1e-3);
    }
  });

  it("a wrong limit mean is found out: p-value and coverage fall", async () => {
    const s = summarise({ ...(await synthetic(11n, 200, 4000)), mean: 3.06 }, real);
    expect(s.normalDistance.pValue).toBeLessThan(1e-6);
    expect(Number(s.coverage.high)).toBeLessThan(0.8);
    expect(quantityNumber(s.mean)).toBeLessThan(3.02);
  });

  it("variance 0, known or found: nothing is standardised, no number is NaN or infinite", () => {
    for (const steps of [2, 10, 100]) {
      const segments = planSegments(steps, real);
      const row = segments.ends.map((n, i) => 0.1 * (n - (segments.ends[i - 1] ?? 0)));
      for (const variance of [0, 1e-18, undefined]) {
        const input = {
          segments,
          replicates: [row, row, row],
          mean: 0.1,
          variance,
          size: 0.1,
          swing: variance === undefined ? 0 : 0.1,
          error: 2 ** -50,
          level: 0.9,
        };
        const s = summarise({ ...input, start: "a test" }, real);
        expect(s.normalDistance).toMatchObject({ statistic: null, pValue: null });
        expect(s.iteratedLogarithm).toEqual({ largest: null, median: null });
        expect(s.standardised).toEqual([]);
        expect(s.coverage.value).toBe(1);
        expect(s.running.every((p) => p.low === 0.1 && p.high === 0.1 && p.envelope === 0)).toBe(true);
        expect(allFinite(s)).toBe(true);
      }
    }
  });

  it("a large constant does not hide a small variance", async () => {
    const input = await synthetic(12n, 50, 1000);
    const { ends } = input.segments;
    const lifted = input.replicates.map((row) => Array.from(row, (v, j) => v + 1e7 * (ends[j]! - (ends[j - 1] ?? 0))));
    const s = summarise({ ...input, replicates: lifted, mean: 1e7 + 3, size: 1e7 + 10, variance: undefined }, real);
    expect(s.normalDistance.pValue).toBeGreaterThan(1e-3);
  });

  it("a zero observable", () => {
    const segments = planSegments(50, real);
    const row = segments.ends.map(() => 0);
    const input = {
      segments,
      replicates: [row, row],
      mean: 0,
      variance: undefined,
      size: 0,
      swing: 0,
      error: 0,
      level: 0.95,
    };
    const s = summarise({ ...input, start: "a test" }, real);
    expect(s.mean.value).toBe(0);
    expect(s.normalDistance.statistic).toBeNull();
    expect(allFinite(s)).toBe(true);
  });

  it("the shortest plan: 2 replicates of 2 moves", async () => {
    const s = summarise(await synthetic(1n, 2, 2), real);
    expect(allFinite(s)).toBe(true);
    expect(s.iteratedLogarithm.largest).toBeNull();
    expect(s.variance.low).toBeUndefined();
  });
});

function allFinite(x: unknown): boolean {
  if (typeof x === "number") return Number.isFinite(x);
  if (typeof x === "string") return !/NaN|Infinity/.test(x);
  if (typeof x !== "object" || x === null) return true;
  return Object.values(x).every(allFinite);
}
