import { describe, expect, it } from "vitest";
import { LimitError, OptionsError } from "../../src/errors.js";
import { drawStartWords } from "../../src/kernel/draws.js";
import { type KernelTarget, loadKernel } from "../../src/kernel/kernel.js";
import { prepareWalker } from "../../src/trajectory/walker.js";
import type { Walk } from "../../src/walk/walk.js";
import { apart, Dice, fraction, makeWalk, naiveWalk, randomUnimodular, squareRoot, top64 } from "./walks.js";

const targets: KernelTarget[] = ["simd", "plain"];

/** Bits with which the naive walk is right beyond doubt: every move at its norm, and 128 more. */
function enough(walk: Walk, steps: number): number {
  const rows = walk.moves.flatMap((m) => m.matrix.map((r) => r.reduce((s, a) => s + (a < 0n ? -a : a), 1n)));
  const lengths = rows.map((n) => n.toString(2).length);
  return steps * Math.max(...lengths) + 192;
}

async function agrees(walk: Walk, steps: number, target: KernelTarget, seed = 1n, replicates = 2): Promise<void> {
  const walker = await prepareWalker(walk, { seed, steps, target });
  expect(walker.method).toBe("window");
  const bits = enough(walk, steps);
  const kernel = await loadKernel();
  for (let r = 0; r < replicates; r++) {
    const path = walker.run(r);
    const start =
      walk.start.type === "point"
        ? walk.start.point.map((x) => x.toFixed(bits))
        : Array.from({ length: walk.dimension }, (_, j) => {
            const words = drawStartWords(kernel, seed, r, j, Math.ceil(bits / 64));
            return words.reduce((s, w) => (s << 64n) | w, 0n) >> BigInt(64 * words.length - bits);
          });
    const naive = naiveWalk(walk, start, path.choices, bits);
    const doubles = path.toDoubles();
    for (let k = 0; k <= steps; k++) {
      for (let j = 0; j < walk.dimension; j++) {
        const got = path.positions[k * walk.dimension + j]!;
        if (apart(got, top64(naive[k]![j]!, bits)) > 1n) {
          throw new Error(`step ${k}, coordinate ${j}, replicate ${r}: ${got}, naive ${top64(naive[k]![j]!, bits)}`);
        }
        expect(doubles[k * walk.dimension + j]).toBe(Number(got >> 11n) * 2 ** -53);
      }
    }
  }
}

const roots = [2n, 3n, 5n, 7n, 11n, 13n, 17n, 19n].map(squareRoot);
const pair = [
  {
    matrix: [
      [2n, 1n],
      [1n, 1n],
    ],
  },
  {
    matrix: [
      [3n, 1n],
      [2n, 1n],
    ],
  },
];

for (const target of targets) {
  describe(`window kernel, ${target}`, () => {
    it("agrees with BigInt on the positive pair, 2000 moves", async () => {
      await agrees(makeWalk(pair, roots.slice(0, 2)), 2000, target);
    });

    it("agrees on a group walk whose products cancel, in exact bits", async () => {
      const walk = makeWalk(
        [
          [
            [1n, 2n],
            [0n, 1n],
          ],
          [
            [1n, -2n],
            [0n, 1n],
          ],
          [
            [1n, 0n],
            [2n, 1n],
          ],
          [
            [1n, 0n],
            [-2n, 1n],
          ],
        ].map((matrix) => ({ matrix })),
        roots.slice(0, 2),
      );
      await agrees(walk, 1500, target);
    });

    for (const d of [2, 3, 4, 5, 6, 7, 8]) {
      it(`agrees on random walks of dimension ${d}, with and without translations, both determinants`, async () => {
        const dice = new Dice(BigInt(100 + d));
        for (const size of [1n, 3n, 1000n]) {
          const moves = Array.from({ length: 3 }, () => randomUnimodular(dice, d, size, d));
          const point = roots.slice(0, d);
          await agrees(makeWalk(moves, point), 120, target);
          const translated = moves.map((m, i) =>
            i === 1 ? m : { ...m, translation: point.map((_, j) => (j === i ? fraction(0) : roots[(i + j) % 8]!)) },
          );
          await agrees(makeWalk(translated, "uniform"), 120, target, 5n);
        }
      });
    }

    it("takes entries up to 2^40 and beyond", async () => {
      const dice = new Dice(9n);
      for (const size of [1n << 20n, 1n << 29n, 1n << 31n, 1n << 40n, 1n << 60n]) {
        for (const d of [2, 3, 8]) {
          const moves = Array.from({ length: 2 }, () => randomUnimodular(dice, d, size, 1));
          const small = randomUnimodular(dice, d, 1n, 3);
          const walk = makeWalk([...moves, { ...small, translation: roots.slice(0, d) }], roots.slice(8 - d));
          await agrees(walk, 60, target);
        }
      }
    });

    it("keeps a start of large digits right at the last bit: 0 beside an irrational translation, all ones", async () => {
      const zero = fraction(0);
      const nearOne = fraction((1n << 200n) - 1n, 1n << 200n);
      for (const point of [
        [zero, zero],
        [nearOne, nearOne],
      ]) {
        const walk = makeWalk([{ ...pair[0]!, translation: [squareRoot(2n), zero] }, pair[1]!], point);
        await agrees(walk, 300, target);
      }
    });

    it("walks with one move, with no moves, and with moves of finite order", async () => {
      const turn = {
        matrix: [
          [0n, -1n],
          [1n, 0n],
        ],
      };
      const mirror = {
        matrix: [
          [0n, 1n],
          [1n, 0n],
        ],
      };
      const point = roots.slice(0, 2);
      await agrees(makeWalk([pair[0]!], point), 400, target);
      await agrees(makeWalk(pair, "uniform"), 0, target);
      await agrees(makeWalk([turn, mirror], point), 1000, target);
    });
  });
}

describe("exact walkers", () => {
  it("give both targets the same bits, and more words that extend them", async () => {
    const walk = makeWalk(pair, "uniform");
    const [a, b, wide] = await Promise.all([
      prepareWalker(walk, { seed: 4n, steps: 500, target: "simd" }),
      prepareWalker(walk, { seed: 4n, steps: 500, target: "plain" }),
      prepareWalker(walk, { seed: 4n, steps: 500, bits: 192 }),
    ]);
    for (const r of [0, 7]) {
      const x = a.run(r).positions;
      expect(b.run(r).positions).toEqual(x);
      const w = wide.run(r);
      expect([...w.positions.filter((_, i) => i % 3 === 0)].every((y, i) => apart(y, x[i]!) <= 1n)).toBe(true);
      expect(w.toDoubles()[11]).toBeCloseTo(Number(x[11]!) / 2 ** 64, 14);
    }
  });

  it("do not depend on which replicates ran before", async () => {
    const walk = makeWalk(pair, roots.slice(0, 2));
    const one = await prepareWalker(walk, { seed: 4n, steps: 300 });
    const other = await prepareWalker(walk, { seed: 4n, steps: 300 });
    for (const r of [5, 3, 9]) one.run(r);
    expect(one.run(2).positions).toEqual(other.run(2).positions);
  });

  it("take given choices in place of draws", async () => {
    const walk = makeWalk(pair, roots.slice(0, 2));
    const walker = await prepareWalker(walk, { seed: 4n, steps: 50 });
    const drawn = walker.run(1);
    const choices = drawn.choices.slice();
    const positions = drawn.positions.slice();
    expect(walker.run(2).positions).not.toEqual(positions);
    expect(walker.run(2, choices).positions).toEqual(positions);
  });

  it("refuse a density, rows beyond 2^62, and memory beyond the limit", async () => {
    const density = makeWalk(pair, "density");
    await expect(prepareWalker(density, { seed: 1n, steps: 5 })).rejects.toThrow(OptionsError);
    const huge = makeWalk(
      [
        {
          matrix: [
            [1n, 1n << 63n],
            [0n, 1n],
          ],
        },
      ],
      "uniform",
    );
    await expect(prepareWalker(huge, { seed: 1n, steps: 5 })).rejects.toThrow(/move 0 .*at most 2\^62/);
    const walk = makeWalk(pair, "uniform");
    await expect(prepareWalker(walk, { seed: 1n, steps: 1e6, memoryLimit: 2 ** 22 })).rejects.toThrow(LimitError);
  });
});
