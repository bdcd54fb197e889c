import { describe, expect, it } from "vitest";
import { HELD_MOVES, segmentSums } from "../../src/averages/replicates.js";
import { bitLength } from "../../src/exact/rational.js";
import { cumulativeWeights, drawMoves, drawStartWords } from "../../src/kernel/draws.js";
import { type KernelTarget, loadKernel } from "../../src/kernel/kernel.js";
import type { Walk } from "../../src/walk/walk.js";
import { box, FREE, fraction, makeWalk, STROKES, wave } from "./walks.js";

const LIMIT = 2 ** 28;
const TARGETS: KernelTarget[] = ["simd", "plain"];

/** Values of the first observable (a wave) along a replicate from a uniform start, by BigInt. */
async function naiveWave(walk: Walk, seed: bigint, replicate: number, steps: number): Promise<number[]> {
  const kernel = await loadKernel();
  const moves = drawMoves(kernel, cumulativeWeights(walk.moves.map((m) => m.probability)), seed, replicate, 0, steps);
  const words = 40;
  const bits = 64 * words;
  const one = 1n << BigInt(bits);
  let x = Array.from({ length: walk.dimension }, (_, j) =>
    drawStartWords(kernel, seed, replicate, j, words).reduce((s, w) => (s << 64n) | w, 0n),
  );
  const f = walk.observables[0]!;
  if (f.type !== "terms") throw new Error("a wave is wanted");
  return Array.from({ length: steps }, (_, n) => {
    const p = f.terms[0]!.frequency.reduce((s, k, j) => s + k * x[j]!, 0n) % one;
    const turns = Number(p >> BigInt(bits - 60)) / 2 ** 60;
    const value =
      f.terms[0]!.cos.toNumber() * Math.cos(2 * Math.PI * turns) +
      f.terms[0]!.sin.toNumber() * Math.sin(2 * Math.PI * turns);
    x = walk.moves[moves[n]!]!.matrix.map((row) =>
      BigInt.asUintN(
        bits,
        row.reduce((s, a, j) => s + a * x[j]!, 0n),
      ),
    );
    return value;
  });
}

describe("segmentSums of replicates", () => {
  for (const target of TARGETS) {
    it(`follows the exact walk for longer than doubles could (${target})`, async () => {
      const walk = makeWalk(STROKES, { type: "uniform" }, [wave([1, -2], 1, 3)]);
      const steps = 200;
      expect(bitLength(3n ** BigInt(steps))).toBeGreaterThan(64);
      const ends = Array.from({ length: steps }, (_, i) => i + 1);
      const sums = await segmentSums(walk, { seed: 9n, steps, first: 4, count: 2, ends, memoryLimit: LIMIT, target });
      for (const r of [0, 1]) {
        const values = await naiveWave(walk, 9n, 4 + r, steps);
        for (const [n, v] of values.entries()) expect(Math.abs(sums[r * steps + n]! - v)).toBeLessThan(1e-13);
      }
    });
  }

  it("does not depend on how replicates are cut into jobs, or on their order", async () => {
    const walk = makeWalk(FREE, { type: "uniform" }, [
      wave([1, 0], 1),
      box(
        [
          [0, 1],
          [0, 1],
        ],
        [
          [1, 2],
          [1, 3],
        ],
      ),
    ]);
    const ends = [7, 100, 500];
    const base = { seed: 3n, steps: 500, ends, memoryLimit: LIMIT };
    const whole = await segmentSums(walk, { ...base, first: 0, count: 10 });
    for (const cut of [7, 1, 4]) {
      const late = await segmentSums(walk, { ...base, first: cut, count: 10 - cut });
      const early = await segmentSums(walk, { ...base, first: 0, count: cut });
      expect([...early, ...late]).toEqual([...whole]);
    }
    const plain = await segmentSums(walk, { ...base, first: 0, count: 10, target: "plain" });
    expect(plain).toEqual(whole);
  });

  it("from 0 the path is constant", async () => {
    const origin = { type: "point", point: [fraction(0), fraction(0)] } as const;
    const walk = makeWalk(STROKES, origin, [
      wave([1, 0], 1),
      wave([1, 0], 0, 1),
      box(
        [
          [0, 1],
          [0, 1],
        ],
        [
          [1, 2],
          [1, 2],
        ],
      ),
    ]);
    const sums = await segmentSums(walk, {
      seed: 1n,
      steps: 3000,
      first: 0,
      count: 1,
      ends: [1000, 3000],
      memoryLimit: LIMIT,
    });
    expect([...sums]).toEqual([1000, 2000, 0, 0, 1000, 2000]);
  });

  it("from (1/2, 0) and (1/3, 1/3) the sums are those of the finite orbit", async () => {
    // Modulo 2 and 3 the walk is a short loop over few points; values there are known.
    const half = { type: "point", point: [fraction(1, 2), fraction(0)] } as const;
    const walk = makeWalk(FREE, half, [wave([1, 0], 1), wave([0, 1], 1)]);
    const sums = await segmentSums(walk, {
      seed: 1n,
      steps: 2000,
      first: 0,
      count: 1,
      ends: [2000],
      memoryLimit: LIMIT,
    });
    // Every move is the identity modulo 2.
    expect([...sums]).toEqual([-2000, 2000]);
    const third = { type: "point", point: [fraction(1, 3), fraction(1, 3)] } as const;
    // The point (1/3, 1/3) lies on the low sides: inside in every visit.
    const still = makeWalk([FREE[0]!, FREE[1]!], third, [
      box(
        [
          [0, 1],
          [1, 3],
        ],
        [
          [1, 1],
          [2, 3],
        ],
      ),
    ]);
    const inside = await segmentSums(still, {
      seed: 1n,
      steps: 500,
      first: 0,
      count: 1,
      ends: [500],
      memoryLimit: LIMIT,
    });
    expect([...inside]).toEqual([500]);
  });

  it("a density start walks from uniform points", async () => {
    const observables = [wave([1, 0], 1)];
    const density = makeWalk(STROKES, { type: "density", terms: [] }, observables);
    const uniform = makeWalk(STROKES, { type: "uniform" }, observables);
    const request = { seed: 1n, steps: 50, first: 0, count: 3, ends: [50], memoryLimit: LIMIT };
    expect(await segmentSums(density, request)).toEqual(await segmentSums(uniform, request));
  });

  it("refuses what its memory does not hold", async () => {
    const walk = makeWalk(STROKES, { type: "uniform" }, [wave([1, 0], 1)]);
    const request = { seed: 1n, steps: 2_000_000, first: 0, count: 1, ends: [2_000_000], memoryLimit: 2 ** 21 };
    await expect(segmentSums(walk, request)).rejects.toThrow(/would take .* MiB/);
  });
});

describe("long paths", () => {
  it("are summed block by block to what a whole path gives", async () => {
    const walk = makeWalk(STROKES, { type: "uniform" }, [
      wave([1, 0], 1),
      box(
        [
          [0, 1],
          [0, 1],
        ],
        [
          [1, 2],
          [1, 4],
        ],
      ),
    ]);
    const request = { seed: 3n, first: 2, count: 2, memoryLimit: 2 ** 30 };
    const steps = HELD_MOVES + 7000;
    const ends = [1, 1000, 20_000, HELD_MOVES, steps];
    const streamed = await segmentSums(walk, { ...request, steps, ends });
    // The same moves in a path that is held: whatever its length, draws do not depend on it.
    const held = await segmentSums(walk, { ...request, steps: HELD_MOVES, ends: ends.slice(0, 4) });
    for (let r = 0; r < 2; r++) {
      for (let i = 0; i < 2; i++) {
        for (let s = 0; s < 4; s++) {
          const [a, b] = [streamed[(2 * r + i) * 5 + s]!, held[(2 * r + i) * 4 + s]!];
          expect(Math.abs(a - b)).toBeLessThan(1e-9);
        }
      }
    }
  });
});
