import { describe, expect, it } from "vitest";
import { exactFromText } from "../../src/exact/read.js";
import { DualTables } from "../../src/kernel/dual.js";
import { type KernelTarget, loadKernel } from "../../src/kernel/kernel.js";
import { follow } from "../../src/law/follow.js";
import { law } from "../../src/law/law.js";
import { move, r, walkOf } from "../dual/naive.js";

const half = r(1, 2);
const tray = [
  move(
    [
      [2, 1],
      [1, 1],
    ],
    half,
  ),
  move(
    [
      [3, 1],
      [2, 1],
    ],
    half,
  ),
];

describe("steps in parts, by ranges of the hash", () => {
  it.each(["simd", "plain"] as KernelTarget[])(
    "make together what one table does, no frequency twice (%s)",
    async (target) => {
      for (const [d, width] of [
        [2, 1],
        [3, 2],
      ] as const) {
        const shape = { dimension: d, width, fold: "none" } as const;
        const tables = new DualTables(await loadKernel({ target }), shape, 20_000, 2);
        const matrix = (a: bigint, b: bigint) =>
          Array.from({ length: d }, (_, i) =>
            Array.from({ length: d }, (_, j) => (i === j ? 1n : j === i + 1 ? a : i === j + 1 ? b : 0n)),
          );
        const moves = [matrix(1n, 0n), matrix(0n, 1n), matrix(-2n, 0n)].map((m) => ({ matrix: m, weight: 1 / 3 }));
        const placed = tables.place(moves);
        tables.fill(0, [{ frequency: Array.from({ length: d }, (_, i) => BigInt(i + 1)), re: 0.7, im: 0 }]);
        for (let n = 0; n < 7; n++) expect(tables.evolve(n % 2, (n + 1) % 2, placed)).toBe("done");
        const source = tables.packed(1);
        expect(source.words.length).toBe(tables.count(1) * (d + width));
        expect(source.largest).toBe(tables.largest(1));
        expect(tables.evolve(1, 0, placed)).toBe("done");
        const whole = new Map(tables.terms(0).map((t) => [t.frequency.join(), t]));
        for (const parts of [1, 3, 4]) {
          let seen = 0;
          for (let part = 0; part < parts; part++) {
            const own = new DualTables(await loadKernel({ target }), shape, 20_000, 1);
            expect(own.evolvePart(source, 0, own.place(moves), part, parts)).toBe("done");
            for (const t of own.terms(0)) {
              const other = whole.get(t.frequency.join())!;
              expect(Math.abs(t.re - other.re) + Math.abs(t.im - other.im)).toBeLessThan(1e-15);
              seen++;
              // The part is a table like any other: its keys are found in it.
              expect(own.coefficient(0, t.frequency)).toEqual({ re: t.re, im: t.im });
            }
            // Ranges are even: no part is far from its share.
            if (whole.size > 1000) expect(own.count(0)).toBeLessThan((1.3 * whole.size) / parts);
          }
          expect(seen).toBe(whole.size);
        }
      }
    },
  );

  it("give the same bits for any number of workers, and agree with one table", async () => {
    const walk = walkOf(tray, { type: "point", point: [exactFromText("sqrt(2)"), exactFromText("sqrt(3)")] });
    const ask = (workers: number) => law(walk, { frequency: [1, 0], steps: 21, workers, distance: false });
    const [alone, shared] = [await ask(0), await ask(2)];
    expect(shared).toEqual(alone);
    expect(alone.reached.step).toBe(21);
    const { coefficients } = await follow(walk, {
      frequency: [1n, 0n],
      steps: 21,
      denominator: undefined,
      entries: 2 ** 22,
      products: 1e8,
      memoryLimit: 2 ** 30,
    });
    const [one, parts] = [coefficients[21]!, alone.coefficients[21]!];
    expect(parts.frequencies).toBe(one.frequencies);
    expect(Number(parts.real.low)).toBeLessThanOrEqual(Number(one.real.high));
    expect(Number(parts.real.high)).toBeGreaterThanOrEqual(Number(one.real.low));
    // The last step was made in parts: its bound is wider by the sum of the parts.
    expect(Number(parts.real.high) - Number(parts.real.low)).toBeGreaterThan(
      Number(one.real.high) - Number(one.real.low),
    );
    expect(Number(parts.real.high) - Number(parts.real.low)).toBeLessThan(1e-12);
  });
});
