import Decimal from "decimal.js";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { LimitError } from "../../src/errors.js";
import { Rational } from "../../src/exact/rational.js";
import { type DualShape, DualTables } from "../../src/kernel/dual.js";
import { loadKernel } from "../../src/kernel/kernel.js";
import { type NaiveMove, naivePair, naiveStep, naiveTable } from "./naive.js";

const FRACTION = 1n << 128n;
const targets = ["simd", "plain"] as const;

/** A product of random shears and sign changes: determinant +-1, entries moderate. */
function unimodular(d: number, seed: number): bigint[][] {
  let state = BigInt(seed * 2 + 1);
  const next = (n: number) => {
    state = BigInt.asUintN(64, state * 6364136223846793005n + 1442695040888963407n);
    return Number(state >> 33n) % n;
  };
  const a: bigint[][] = Array.from({ length: d }, (_, i) => Array.from({ length: d }, (_, j) => BigInt(i === j)));
  for (let n = 0; n < 3 * d; n++) {
    const [i, j] = [next(d), next(d)];
    if (i === j) a[i] = a[i]!.map((x) => -x);
    else a[i] = a[i]!.map((x, c) => x + BigInt(next(5) - 2) * a[j]![c]!);
  }
  return a;
}

const fixed = (x: Rational) => (x.mod1().num * FRACTION) / x.mod1().den;

describe.each(targets)("phases (%s)", (target) => {
  it("are within 8 units of 2^-53 of exact ones, for every size of k", async () => {
    const tables = new DualTables(await loadKernel({ target }), { dimension: 2, width: 2, fold: "none" }, 16, 1);
    const D = Decimal.clone({ precision: 80 });
    const twoPi = D.acos(-1).times(2);
    const int64 = fc.oneof(fc.bigInt(-(2n ** 63n) + 1n, 2n ** 63n - 1n), fc.bigInt(-9n, 9n));
    const fraction = fc.oneof(
      fc.bigInt(0n, FRACTION - 1n),
      fc.bigInt(0n, 15n).map((x) => x << 124n),
    );
    fc.assert(
      fc.property(int64, int64, fraction, fraction, (k0, k1, b0, b1) => {
        const turn = BigInt.asUintN(128, k0 * b0 + k1 * b1);
        const angle = new D(turn.toString()).div(FRACTION.toString()).times(twoPi);
        const got = tables.phase([k0, k1], [b0, b1]);
        const off = D.hypot(D.cos(angle).minus(got.re), D.sin(angle).minus(got.im)).toNumber();
        expect(off).toBeLessThan(8 * 2 ** -53);
      }),
      { numRuns: 100 },
    );
    expect(tables.phase([1n, 0n], [FRACTION / 4n, 0n])).toEqual({ re: 0, im: 1 });
    expect(tables.phase([-3n, 2n], [FRACTION / 2n, 0n])).toEqual({ re: -1, im: 0 });
  });
});

describe.each(targets)("evolution (%s)", (target) => {
  for (const dimension of [2, 3, 4, 5, 6, 7, 8]) {
    for (const phases of [false, true]) {
      it(`agrees with the plain version, dimension ${dimension}${phases ? ", with translations" : ""}`, async () => {
        const moves: NaiveMove[] = [0.5, 0.25, 0.25].map((weight, i) => ({
          matrix: unimodular(dimension, 10 * dimension + i),
          weight,
          ...(phases && i !== 1
            ? { translation: Array.from({ length: dimension }, (_, j) => Rational.of(7 * i + 3 * j + 1, 29 + j)) }
            : {}),
        }));
        const kernel = await loadKernel({ target });
        const tables = new DualTables(kernel, { dimension, width: 2, fold: "none" }, 4000, 2);
        const placed = tables.place(
          moves.map(({ translation, ...m }) => ({
            ...m,
            ...(translation === undefined ? {} : { translation: translation.map(fixed) }),
          })),
        );
        const k = Array.from({ length: dimension }, (_, j) => BigInt(j % 3) - 1n);
        let naive = naiveTable([
          { k, c: { re: 1, im: 0.5 } },
          { k: k.map((x) => 2n * x), c: { re: 0, im: -3 } },
        ]);
        tables.fill(
          0,
          [...naive.values()].map(({ k: frequency, c }) => ({ frequency, ...c })),
        );
        let now = 0;
        for (let n = 0; n < 6; n++) {
          naive = naiveStep(naive, moves);
          expect(tables.evolve(now, 1 - now, placed)).toBe("done");
          now = 1 - now;
        }
        const terms = tables.terms(now);
        expect(terms.length).toBe(naive.size);
        let largest = 0n;
        let worst = 0;
        for (const { frequency, re, im } of terms) {
          const expected = naive.get(frequency.join())!.c;
          worst = Math.max(worst, Math.abs(re - expected.re) + Math.abs(im - expected.im));
          const sought = tables.coefficient(now, frequency);
          if (sought?.re !== re || sought.im !== im) worst = Number.POSITIVE_INFINITY;
          for (const x of frequency) if ((x < 0n ? -x : x) > largest) largest = x < 0n ? -x : x;
        }
        expect(worst).toBeLessThan(1e-12);
        expect(tables.largest(now)).toBe(largest);
        expect(tables.pair(now, now).sum).toBeCloseTo(naivePair(naive, naive), 12);
      });
    }
  }

  const shears: Omit<NaiveMove, "translation">[] = [
    {
      matrix: [
        [1n, 2n],
        [0n, 1n],
      ],
      weight: 0.25,
    },
    {
      matrix: [
        [1n, -2n],
        [0n, 1n],
      ],
      weight: 0.25,
    },
    {
      matrix: [
        [1n, 0n],
        [2n, 1n],
      ],
      weight: 0.25,
    },
    {
      matrix: [
        [0n, 1n],
        [1n, 0n],
      ],
      weight: 0.25,
    },
  ];
  const folds: [string, DualShape, number][] = [
    ["even", { dimension: 2, width: 1, fold: "even" }, 1],
    ["odd", { dimension: 2, width: 1, fold: "conjugate" }, -1],
  ];
  for (const [name, shape, sign] of folds) {
    it(`folds ${name} functions to half the table`, async () => {
      const tables = new DualTables(await loadKernel({ target }), shape, 5000, 2);
      const placed = tables.place(shears);
      const c = (re: number) => (sign === 1 ? { re, im: 0 } : { re: 0, im: re });
      const seeds: [bigint[], number][] = [
        [[1n, 0n], 1],
        [[2n, -3n], 0.5],
        [[-4n, 1n], -2],
      ];
      let naive = naiveTable(
        seeds.flatMap(([k, v]) => [
          { k, c: c(v) },
          { k: k.map((x) => -x), c: c(sign * v) },
        ]),
      );
      tables.fill(
        0,
        seeds.map(([frequency, re]) => ({ frequency, re, im: 0 })),
      );
      let now = 0;
      for (let n = 0; n < 7; n++, now = 1 - now) {
        naive = naiveStep(naive, shears);
        expect(tables.evolve(now, 1 - now, placed)).toBe("done");
      }
      expect(2 * tables.count(now)).toBe(naive.size);
      const off = tables.terms(now).map(({ frequency, re }) => {
        const x = naive.get(frequency.join())!.c;
        return Math.abs(re - (sign === 1 ? x.re : x.im));
      });
      expect(Math.max(...off)).toBeLessThan(1e-14);
      expect(2 * tables.pair(now, now).sum).toBeCloseTo(naivePair(naive, naive), 13);
    });
  }

  it("follows residues modulo q", async () => {
    const tables = new DualTables(
      await loadKernel({ target }),
      { dimension: 2, width: 1, fold: "none", modulus: 7 },
      48,
      2,
    );
    const placed = tables.place(shears);
    tables.fill(0, [{ frequency: [1n, -1n], re: 1, im: 0 }]);
    let naive = naiveTable([{ k: [1n, 6n], c: { re: 1, im: 0 } }]);
    let now = 0;
    for (let n = 0; n < 30; n++, now = 1 - now) {
      const next = naiveStep(naive, shears);
      naive = naiveTable([...next.values()].map(({ k, c }) => ({ k: k.map((x) => ((x % 7n) + 7n) % 7n), c })));
      expect(tables.evolve(now, 1 - now, placed)).toBe("done");
    }
    expect(tables.count(now)).toBe(48);
    for (const { frequency, re } of tables.terms(now)) expect(re).toBeCloseTo(naive.get(frequency.join())!.c.re, 14);
  });

  it("stops before a component overflows, not earlier than it must, and keeps the source", async () => {
    const tables = new DualTables(await loadKernel({ target }), { dimension: 2, width: 1, fold: "none" }, 64, 2);
    const placed = tables.place([
      {
        matrix: [
          [2n, 1n],
          [1n, 1n],
        ],
        weight: 1,
      },
    ]);
    tables.fill(0, [{ frequency: [1n, 0n], re: 1, im: 0 }]);
    let k = [1n, 0n];
    let now = 0;
    while (tables.evolve(now, 1 - now, placed) === "done") {
      now = 1 - now;
      k = [2n * k[0]! + k[1]!, k[0]! + k[1]!];
      expect(tables.terms(now)[0]!.frequency).toEqual(k);
    }
    expect(tables.evolve(now, 1 - now, placed)).toBe("overflow");
    expect(2n * k[0]! + k[1]!).toBeGreaterThan(2n ** 63n - 2n ** 17n);
    expect(tables.terms(now)[0]!.frequency).toEqual(k);
  });

  it("says that the table is full, and keeps the source", async () => {
    const tables = new DualTables(await loadKernel({ target }), { dimension: 2, width: 1, fold: "even" }, 20, 2);
    const placed = tables.place(shears);
    tables.fill(0, [{ frequency: [1n, 0n], re: 1, im: 0 }]);
    let now = 0;
    let before = tables.terms(now);
    while (tables.evolve(now, 1 - now, placed) === "done") {
      now = 1 - now;
      before = tables.terms(now);
      expect(before.length).toBeLessThanOrEqual(20);
    }
    expect(tables.evolve(now, 1 - now, placed)).toBe("full");
    expect(tables.terms(now)).toEqual(before);
  });
});

describe("limits", () => {
  it("are refused before the run, with the size that was found", async () => {
    const kernel = await loadKernel({ memoryLimit: 2 ** 20 });
    const shape: DualShape = { dimension: 2, width: 1, fold: "even" };
    expect(() => new DualTables(kernel, shape, 1_000_000, 2)).toThrow(
      /2 frequency tables of 1000000 entries would take/,
    );
    const tables = new DualTables(kernel, shape, 100, 2);
    expect(() =>
      tables.place([
        {
          matrix: [
            [1n, 2n ** 64n],
            [0n, 1n],
          ],
          weight: 1,
        },
      ]),
    ).toThrow(LimitError);
    expect(() => tables.fill(0, [{ frequency: [2n ** 63n, 0n], re: 1, im: 0 }])).toThrow(LimitError);
  });

  it("take at most 40 bytes a frequency in dimension 2, and what is planned is what is taken", async () => {
    for (const width of [1, 2] as const) {
      const kernel = await loadKernel();
      const entries = 100_000;
      const before = kernel.raw.mark() >>> 0;
      const tables = new DualTables(kernel, { dimension: 2, width, fold: "conjugate" }, entries, 2);
      expect(tables.bytesEach).toBeLessThanOrEqual(40);
      const taken = (kernel.raw.mark() >>> 0) - before;
      expect(taken / (2 * entries)).toBeLessThan(1.01 * tables.bytesEach);
      // All of them go in, and not one more.
      const terms = Array.from({ length: entries }, (_, i) => ({ frequency: [1n, BigInt(i)], re: 1, im: 0 }));
      tables.fill(0, terms);
      expect(tables.count(0)).toBe(entries);
      expect(() => tables.fill(1, [...terms, { frequency: [2n, 1n], re: 1, im: 0 }])).toThrow(LimitError);
    }
  });

  it("both builds give the same bits", async () => {
    const runs = await Promise.all(
      targets.map(async (target) => {
        const tables = new DualTables(
          await loadKernel({ target }),
          { dimension: 3, width: 2, fold: "conjugate" },
          3000,
          2,
        );
        const placed = tables.place(
          [0.3, 0.7].map((weight, i) => ({
            matrix: unimodular(3, i),
            weight,
            translation: [12345n << 100n, 7n, 1n << 127n],
          })),
        );
        tables.fill(0, [{ frequency: [1n, 0n, -1n], re: 0.1, im: 0.2 }]);
        for (let n = 0; n < 8; n++) expect(tables.evolve(n % 2, (n + 1) % 2, placed)).toBe("done");
        return tables.terms(0);
      }),
    );
    expect(runs[0]).toEqual(runs[1]);
  });
});
