import { describe, expect, it } from "vitest";
import type { KernelTarget } from "../../src/kernel/kernel.js";
import { rationalWalk, residueTable } from "../../src/trajectory/table.js";
import { prepareWalker } from "../../src/trajectory/walker.js";
import type { Walk } from "../../src/walk/walk.js";
import { Dice, fraction, makeWalk, randomUnimodular, rationalPath, squareRoot } from "./walks.js";

async function agrees(walk: Walk, steps: number, target: KernelTarget): Promise<void> {
  const walker = await prepareWalker(walk, { seed: 3n, steps, target });
  expect(walker.method).toBe("residue");
  for (const replicate of [0, 1]) {
    const path = walker.run(replicate);
    const want = rationalPath(walk, path.choices).flat();
    expect([...path.numerators!].map((n) => [n, path.denominator])).toEqual(
      want.map((x) => [(x.num * path.denominator!) / x.den, path.denominator]),
    );
    expect([...path.positions]).toEqual(want.map((x) => (x.num << 64n) / x.den));
    expect([...path.toDoubles()]).toEqual(want.map((x) => Number((x.num << 53n) / x.den) * 2 ** -53));
  }
}

/** Denominators near 2^63, the largest below it, and what is left of 64 bits. */
const LARGE = [(1n << 59n) - 55n, (1n << 62n) + 135n, (1n << 63n) - 25n, (1n << 63n) - 1n];

for (const target of ["simd", "plain"] as const) {
  describe(`residue kernel, ${target}`, () => {
    for (const d of [2, 3, 5, 8]) {
      it(`walks dimension ${d} as fractions do, with and without translations`, async () => {
        const dice = new Dice(BigInt(d));
        const kinds = new Set<boolean>();
        for (const q of [1n, 2n, 7n, 60n, 65_537n, 1_000_000_007n, (1n << 31n) - 1n, (1n << 45n) + 59n, ...LARGE]) {
          const numerator = () => fraction(dice.word() % q, q);
          const point = Array.from({ length: d }, numerator);
          for (const size of [1n, 1n << 3n]) {
            const moves = Array.from({ length: 3 }, (_, i) => ({
              ...randomUnimodular(dice, d, size, d),
              ...(i === 1 ? {} : { translation: Array.from({ length: d }, numerator) }),
            }));
            const walk = makeWalk(moves, point);
            const table = residueTable(walk, rationalWalk(walk)!);
            if (table === undefined) continue;
            kinds.add(table.narrow);
            await agrees(walk, 40, target);
          }
        }
        // Both ways to a remainder were taken.
        expect(kinds.size).toBe(2);
      });
    }

    it.each([(1n << 57n) + 29n, (1n << 63n) - 1n])("takes the ends of the classes modulo %i", async (q) => {
      const swap = [
        [0n, 1n],
        [-1n, 0n],
      ];
      for (const [a, b] of [
        [0n, 1n],
        [q - 1n, q - 1n],
        [q / 2n, 1n],
      ] as const) {
        const walk = makeWalk([{ matrix: swap }], [fraction(a, q), fraction(b, q)]);
        await agrees(walk, 9, target);
      }
    });
  });
}

describe("which kernel", () => {
  const matrix = [
    [2n, 1n],
    [1n, 1n],
  ];
  it("leaves points that are not rational, or of too large a denominator, to the window", async () => {
    const rational = [fraction(1, 2), fraction(0)];
    const huge = [fraction(1n, (1n << 70n) + 1n), fraction(0)];
    const method = async (walk: Walk) => (await prepareWalker(walk, { seed: 1n, steps: 3 })).method;
    expect(await method(makeWalk([{ matrix }], rational))).toBe("residue");
    expect(await method(makeWalk([{ matrix }], huge))).toBe("window");
    expect(await method(makeWalk([{ matrix }], [squareRoot(2n), fraction(0)]))).toBe("window");
    const translation = [squareRoot(2n), fraction(0)];
    expect(await method(makeWalk([{ matrix, translation }], rational))).toBe("window");
    expect(await method(makeWalk([{ matrix }], "uniform"))).toBe("window");
  });
});
