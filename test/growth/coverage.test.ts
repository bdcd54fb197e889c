/** Intervals of the sampled top exponent against its proved value, over many seeds and random sets. */
import { describe, expect, it } from "vitest";
import { exponentEstimates } from "../../src/growth/intervals.js";
import { samplingPlan } from "../../src/growth/plan.js";
import { sampleGrowth } from "../../src/kernel/growth.js";
import { loadKernel } from "../../src/kernel/kernel.js";
import { loadReal } from "../../src/kernel/real.js";
import { encloseExponent } from "../../src/modular/exponent.js";
import { type Matrix2, multiply2 } from "../../src/modular/words.js";
import type { Walk } from "../../src/walk/walk.js";
import { tableOf, walkOf } from "./walks.js";

/** TORWEND_TEST_SCALE=10 takes ten times as many seeds. */
const SCALE = Number(process.env.TORWEND_TEST_SCALE ?? 1);
const SETS = 5;
const SEEDS = 200 * SCALE;
const REPLICATES = 32;

/** Marsaglia's xorshift (2003), so that a failure repeats. */
function source(seed: number): (below: number) => number {
  let x = seed | 0 || 1;
  return (below) => {
    x ^= x << 13;
    x ^= x >>> 17;
    x ^= x << 5;
    return (x >>> 0) % below;
  };
}

/** Two or three products of shears of either sign and a swap, with uneven weights: few are positive. */
function randomWalk(next: (below: number) => number): Walk {
  const matrices = Array.from({ length: 2 + next(2) }, () => {
    let m: Matrix2 = next(2) === 0 ? [1n, 0n, 0n, 1n] : [0n, 1n, 1n, 0n];
    for (let i = 0; i < 3; i++) {
      const q = BigInt(next(5) - 2);
      m = multiply2(m, i % 2 === 0 ? [1n, q, 0n, 1n] : [1n, 0n, q, 1n]);
    }
    const [a, b, c, d] = m.map(Number) as [number, number, number, number];
    return [
      [a, b],
      [c, d],
    ];
  });
  return walkOf(
    matrices,
    matrices.map(() => 1 + next(4)),
  );
}

describe("95 % intervals of the sampled top exponent", () => {
  it(`hold the proved value in 93 to 97 % of ${SETS * SEEDS} runs on random sets`, async () => {
    const [real, kernel] = [await loadReal(), await loadKernel()];
    const next = source(2);
    let covered = 0;
    let sets = 0;
    while (sets < SETS) {
      const walk = randomWalk(next);
      const truth = encloseExponent(
        walk.moves.map((m) => m.matrix.flat() as unknown as Matrix2),
        walk.moves.map((m) => m.probability),
        real,
        1e9,
      );
      // Groups that keep lines have no such proof, or no growth.
      if (truth === undefined || truth.low < 0.01) continue;
      sets++;
      const middle = (truth.low + truth.high) / 2;
      expect(truth.high - truth.low).toBeLessThan(1e-10);
      const table = tableOf(walk);
      const plan = samplingPlan(table, "quick", 512);
      const { warmUp, checkpoints } = plan;
      for (let seed = 1; seed <= SEEDS; seed++) {
        const run = { seed: BigInt(seed), firstReplicate: 0, replicates: REPLICATES, warmUp, checkpoints };
        const logs = sampleGrowth(kernel, table, run);
        const { estimates } = exponentEstimates({ plan, replicates: REPLICATES, exponents: 1, logs }, 0.95);
        if (Math.abs(estimates[0]!.value - middle) <= estimates[0]!.halfWidth) covered++;
      }
    }
    const share = covered / (SETS * SEEDS);
    expect(share).toBeGreaterThanOrEqual(0.93);
    expect(share).toBeLessThanOrEqual(0.97);
  });
});
