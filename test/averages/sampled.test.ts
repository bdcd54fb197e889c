import { describe, expect, it } from "vitest";
import { bitsPerMove, defaultSampling, type SamplingPlan, sampleAverages } from "../../src/averages/sampled.js";
import { LimitError, OptionsError, StoppedError } from "../../src/errors.js";
import { type CommonOptions, type Progress, type Session, withSession } from "../../src/session.js";
import { parseWalk } from "../../src/walk/parse.js";

const document = {
  torwend: 1,
  title: "Tray stirring, two strokes",
  dimension: 2,
  moves: [
    {
      label: "long stroke",
      weight: "1/3",
      matrix: [
        [2, 1],
        [1, 1],
      ],
    },
    {
      label: "short stroke",
      weight: "2/3",
      matrix: [
        [3, 1],
        [2, 1],
      ],
      translation: ["0", "sqrt(2)"],
    },
  ],
  start: ["sqrt(2)-1", "sqrt(3)-1"],
  observables: [
    { label: "east probe", terms: [{ frequency: [1, 0], cos: "1" }] },
    { label: "corner cell", box: { low: ["0", "0"], high: ["1/2", "1/4"] } },
    { label: "level", terms: [{ frequency: [0, 0], cos: "1/10" }] },
  ],
};
const plan: SamplingPlan = {
  steps: 1500,
  replicates: 300,
  means: [0, 1 / 8, 1 / 10],
  variances: [undefined, undefined, 0],
};

function sample(options: CommonOptions, body: object = document, wanted: SamplingPlan = plan) {
  return withSession(options, (session) => sampleAverages(parseWalk(body), session, wanted));
}

describe("sampleAverages", () => {
  it("is the same for any number of workers and any order of the jobs, and follows the seed", async () => {
    const alone = await sample({ workers: 0 });
    expect(await sample({ workers: 2 })).toEqual(alone);
    const backwards = await withSession({ workers: 0 }, (session) => {
      const pool = {
        map: async (job: { run: (p: unknown) => unknown }, payloads: unknown[]) => {
          expect(payloads.length).toBeGreaterThan(1);
          const results: unknown[] = [];
          for (let i = payloads.length - 1; i >= 0; i--) results[i] = await job.run(payloads[i]);
          return results;
        },
      } as unknown as Session["pool"];
      return sampleAverages(parseWalk(document), { ...session, pool }, plan);
    });
    expect(backwards).toEqual(alone);
    expect(await sample({ workers: 0, seed: 2 })).not.toEqual(alone);
  });

  it("tells the limit means and a constant from the rest", async () => {
    const [probe, cell, level] = await sample({ workers: 0, level: 0.9999 });
    for (const [s, m] of [
      [probe!, 0],
      [cell!, 1 / 8],
    ] as const) {
      expect(Number(s.mean.low)).toBeLessThanOrEqual(m);
      expect(Number(s.mean.high)).toBeGreaterThanOrEqual(m);
      expect(s.mean.standing).toBe("estimated");
      expect(s.normalDistance.pValue).toBeGreaterThan(1e-4);
      // Both estimates of one variance: their intervals meet.
      expect(Number(s.variance.low)).toBeLessThan(Number(s.batchMeansVariance.high));
      expect(Number(s.batchMeansVariance.low)).toBeLessThan(Number(s.variance.high));
    }
    expect(level!.mean.value).toBeCloseTo(0.1, 15);
    expect(level!.coverage.value).toBe(1);
    expect(level!.normalDistance.statistic).toBeNull();
    expect(JSON.stringify([probe, cell, level])).not.toMatch(/NaN|Infinity/);
  });

  it("from 0 without translation nothing moves", async () => {
    const still = {
      ...document,
      start: ["0", "0"],
      moves: document.moves.map(({ label, matrix }) => ({ label, matrix })),
    };
    const wanted = { steps: 100, replicates: 5, means: [1, 1, 1 / 10], variances: [0, undefined, undefined] };
    for (const s of await sample({ workers: 0 }, still, wanted)) {
      expect(s.variance.value).toBe(0);
      expect(s.coverage.value).toBe(1);
      expect(s.iteratedLogarithm.largest).toBeNull();
    }
  });

  it("says when a density start was replaced", async () => {
    const density = { ...document, start: { density: [{ frequency: [0, 0], cos: "1" }] } };
    const wanted = { ...plan, steps: 20, replicates: 3 };
    const [first] = await sample({ workers: 0 }, density, wanted);
    expect(first!.mean.method).toContain("uniform points in place of the density");
  });

  it("names every option out of range", async () => {
    const wrong = sample({ workers: 0 }, document, { ...plan, steps: 1, replicates: 2.5 });
    await expect(wrong).rejects.toThrow(OptionsError);
    await expect(wrong).rejects.toThrow(/--steps: found 1; accepted[\s\S]*--replicates: found 2.5; accepted/);
  });

  it("plans memory before it walks, and stops when told to", async () => {
    await expect(sample({ workers: 0, memoryLimit: 2 ** 17 })).rejects.toThrow(LimitError);
    const stop = new AbortController();
    const seen: Progress[] = [];
    const run = sample({
      workers: 0,
      signal: stop.signal,
      onProgress: (p) => {
        seen.push(p);
        stop.abort();
      },
    });
    await expect(run).rejects.toThrow(StoppedError);
    expect(seen).toHaveLength(1);
    expect(seen[0]).toMatchObject({ stage: "sampling exact walks", done: 1 });
  });
});

describe("defaultSampling", () => {
  it("grows with the effort, shrinks its paths with the dimension", () => {
    for (let d = 2; d <= 8; d++) {
      const [quick, standard, thorough] = (["quick", "standard", "thorough"] as const).map((e) =>
        defaultSampling(e, d),
      );
      expect(quick!.steps).toBeGreaterThanOrEqual(1000);
      expect(standard!.steps).toBeGreaterThan(quick!.steps);
      expect(thorough!.steps).toBeGreaterThan(standard!.steps);
      expect(thorough!.replicates).toBeGreaterThanOrEqual(standard!.replicates);
    }
  });
  it("leaves small entries alone and shortens the paths of large ones", () => {
    expect(bitsPerMove(parseWalk(document))).toBeLessThanOrEqual(4);
    expect(defaultSampling("quick", 2, 3)).toEqual(defaultSampling("quick", 2));
    expect(defaultSampling("quick", 2, 40).steps).toBe(defaultSampling("quick", 2).steps / 10);
    expect(defaultSampling("quick", 8, 1e6).steps).toBe(64);
  });
});
