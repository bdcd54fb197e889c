import { describe, expect, it } from "vitest";
import { LimitError } from "../../src/errors.js";
import { exactVectorGrowth } from "../../src/growth/products.js";
import { growthTable, sampleGrowth } from "../../src/kernel/growth.js";
import { loadKernel } from "../../src/kernel/kernel.js";
import { loadReal } from "../../src/kernel/real.js";
import type { Walk } from "../../src/walk/walk.js";
import { POSITIVE_PAIR, RANDOM_FIBONACCI, shear, tableOf, walkOf } from "./walks.js";

const run = { seed: 5n, firstReplicate: 0, replicates: 4, warmUp: 1 };

async function sample(walk: Walk, target: "simd" | "plain", checkpoints: number[]) {
  return sampleGrowth(await loadKernel({ target }), tableOf(walk), { ...run, checkpoints });
}

/** Shears of all neighbouring pairs, both ways round the circle, and one change of sign. */
function shears(d: number) {
  const reflection = shear(d, 0, 1).map((row, i) => (i === 0 ? row.map((x) => -x) : row));
  return [
    ...Array.from({ length: d }, (_, i) => shear(d, i, (i + 1) % d)),
    ...Array.from({ length: d }, (_, i) => shear(d, (i + 1) % d, i)),
    reflection,
  ];
}

const cases: [string, Walk][] = [
  ["a positive pair", walkOf(POSITIVE_PAIR, [1, 2])],
  ["determinant -1, signs", walkOf(RANDOM_FIBONACCI)],
  ["one move", walkOf([POSITIVE_PAIR[0]!])],
  ["nine moves: no words", walkOf([...POSITIVE_PAIR, ...RANDOM_FIBONACCI, ...shears(2)])],
  ["dimension 3", walkOf(shears(3))],
  ["dimension 4, two moves", walkOf([shears(4)[0]!, shears(4)[8]!, shears(4)[6]!])],
  ["dimension 8", walkOf(shears(8))],
];

describe("sampleGrowth", () => {
  for (const [name, walk] of cases) {
    it(`follows exact integer products, and both builds give the same bits: ${name}`, async () => {
      const real = await loadReal();
      const checkpoints = [3, 8, 501, 1500];
      const simd = await sample(walk, "simd", checkpoints);
      expect([...simd]).toEqual([...(await sample(walk, "plain", checkpoints))]);
      const exponents = simd.length / 4 / checkpoints.length;
      for (const [c, n] of checkpoints.entries()) {
        const exact = await exactVectorGrowth(walk, run.seed, 4, run.warmUp, n, real);
        for (let r = 0; r < 4; r++) {
          const at = (r * checkpoints.length + c) * exponents;
          expect(Math.abs(simd[at]! - exact[r]!)).toBeLessThan(1e-9);
          // Determinants are +-1: the logarithms of all exponents add up to 0.
          const sum = [...simd.slice(at, at + exponents)].reduce((a, b) => a + b, 0);
          if (exponents > 1) expect(Math.abs(sum)).toBeLessThan(1e-8);
        }
      }
    });
  }

  it("does not depend on how replicates are grouped or checkpoints are set", async () => {
    const table = tableOf(walkOf(POSITIVE_PAIR));
    const kernel = await loadKernel();
    const all = sampleGrowth(kernel, table, { ...run, replicates: 8, checkpoints: [1000] });
    const late = sampleGrowth(kernel, table, { ...run, firstReplicate: 4, checkpoints: [17, 600, 1000] });
    for (let r = 0; r < 4; r++) expect(late[3 * r + 2]).toBeCloseTo(all[4 + r]!, 10);
  });

  it("keeps words exact and tables small", () => {
    expect(tableOf(walkOf(POSITIVE_PAIR)).length).toBe(8);
    expect(
      tableOf(
        walkOf([
          [
            [1, 2 ** 40],
            [0, 1],
          ],
        ]),
      ).length,
    ).toBe(1);
    for (const [, walk] of cases) {
      const { entries } = tableOf(walk);
      expect(entries.every((x) => Number.isSafeInteger(x))).toBe(true);
    }
  });

  it("refuses entries that would leave the doubles' range", () => {
    const big = [
      [1n, 1n << 420n],
      [0n, 1n],
    ];
    expect(() => growthTable([big], BigUint64Array.of(1n))).toThrow(LimitError);
  });
});
