import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { LimitError, OptionsError, StoppedError } from "../../src/errors.js";
import { orbits } from "../../src/orbits/orbits.js";
import { quantityNumber } from "../../src/quantity/quantity.js";
import { parseWalk } from "../../src/walk/parse.js";
import { naiveOrbits, naiveTable } from "./naive.js";

type WrittenMove = { matrix: number[][]; weight?: string; translation?: string[] };
const walkOf = (moves: WrittenMove[]) =>
  parseWalk({
    torwend: 1,
    title: "made for a test",
    dimension: moves[0]!.matrix.length,
    moves: moves.map((m, i) => ({ label: `m${i}`, ...m })),
  });

const pair = [
  {
    matrix: [
      [2, 1],
      [1, 1],
    ],
  },
  {
    matrix: [
      [3, 1],
      [2, 1],
    ],
  },
];
const flips = [
  {
    matrix: [
      [0, 1],
      [1, 1],
    ],
    weight: "1/3",
  },
  {
    matrix: [
      [0, 1],
      [1, -1],
    ],
    weight: "2/3",
  },
];
const shifted = [
  {
    matrix: [
      [1, 1],
      [0, 1],
    ],
    translation: ["1/2", "0"],
  },
  {
    matrix: [
      [1, 0],
      [2, 1],
    ],
    translation: ["1/3", "-1/6"],
  },
];
const solid = [
  {
    matrix: [
      [1, 1, 0],
      [0, 1, 0],
      [0, 0, 1],
    ],
  },
  {
    matrix: [
      [0, 1, 0],
      [0, 0, 1],
      [-1, 0, 0],
    ],
  },
];
const both = [
  {
    matrix: [
      [1, 2],
      [0, 1],
    ],
  },
  {
    matrix: [
      [1, -2],
      [0, 1],
    ],
  },
  {
    matrix: [
      [1, 0],
      [2, 1],
    ],
  },
  {
    matrix: [
      [1, 0],
      [-2, 1],
    ],
  },
];

/** Second largest modulus by the whole matrix, the constant's eigenvalue taken off. */
function naiveSecond(table: number[][], points: number[], weights: number[]): number {
  const place = new Map(points.map((p, i) => [p, i]));
  const m = Matrix.zeros(points.length, points.length);
  for (const p of points) {
    for (const [k, t] of table[p]!.entries()) {
      const [i, j] = [place.get(p)!, place.get(t)!];
      m.set(i, j, m.get(i, j) + weights[k]!);
    }
  }
  m.sub(1 / points.length);
  const { realEigenvalues: re, imaginaryEigenvalues: im } = new EigenvalueDecomposition(m, { assumeSymmetric: false });
  return Math.max(...re.map((x, i) => Math.sqrt(x * x + im[i]! ** 2)));
}

describe.each([
  ["a positive pair", pair, [1, 2, 5, 6, 9]],
  ["determinant -1, unequal weights", flips, [2, 3, 8]],
  ["translations", shifted, [6, 12]],
  ["three dimensions", solid, [2, 3, 4]],
  ["closed under inverse", both, [4, 7, 12]],
  ["one move", [pair[0]!], [5, 8]],
  [
    "the identity",
    [
      {
        matrix: [
          [1, 0],
          [0, 1],
        ],
      },
    ],
    [3],
  ],
])("orbits of %s", (_, moves, moduli) => {
  const walk = walkOf(moves);
  const weights = walk.moves.map((m) => m.probability.toNumber());

  it.each(moduli)("agree with the plain way, modulus %i", async (q) => {
    const table = naiveTable(walk, q);
    const all = naiveOrbits(table);
    const result = await orbits(walk, { modulus: q, workers: 0 });
    const sizes = (rows: { size: number; count: number }[]) =>
      rows.flatMap((r) => new Array<number>(r.count).fill(r.size)).sort((a, b) => a - b);
    expect(sizes([...result.orbits])).toEqual(all.map((o) => o.length).sort((a, b) => a - b));
    for (const row of result.orbits) {
      const index = row.representative.reduce((s, x) => s * q + x, 0);
      const points = all.find((o) => o.includes(index))!;
      expect(points.length).toBe(row.size);
      const second = row.size === 1 ? 0 : naiveSecond(table, points, weights);
      // Defective eigenvalues cost half the digits or more.
      expect(Math.abs(quantityNumber(row.secondEigenvalue) - second)).toBeLessThan(1e-5);
      expect(quantityNumber(row.gap)).toBeCloseTo(1 - quantityNumber(row.secondEigenvalue), 14);
    }
  });
});

describe("orbits, beyond small matrices", () => {
  it("finds by Lanczos what the whole matrix says", async () => {
    const walk = walkOf(both);
    const table = naiveTable(walk, 17);
    const points = naiveOrbits(table).find((o) => o.length > 1)!;
    expect(points.length).toBe(288);
    const { orbits: rows, symmetric } = await orbits(walk, { modulus: 17, workers: 0 });
    expect(symmetric).toBe(true);
    const weights = walk.moves.map((m) => m.probability.toNumber());
    expect(quantityNumber(rows[0]!.secondEigenvalue)).toBeCloseTo(naiveSecond(table, points, weights), 9);
    expect(rows[0]!.residual).toBeLessThan(1e-8);
  });

  it("finds by Arnoldi what the whole matrix says", async () => {
    const walk = walkOf(pair);
    const table = naiveTable(walk, 13);
    const points = naiveOrbits(table).find((o) => o.length > 1)!;
    const { orbits: rows, symmetric } = await orbits(walk, { modulus: 13, workers: 0 });
    expect(symmetric).toBe(false);
    expect(quantityNumber(rows[0]!.secondEigenvalue)).toBeCloseTo(naiveSecond(table, points, [0.5, 0.5]), 7);
    expect(rows[0]!.residual).toBeLessThan(1e-7);
  });

  it("takes all of (Z/500)^2", async () => {
    const { orbits: rows, points } = await orbits(walkOf(both), { modulus: 500, effort: "quick" });
    expect(points).toBe(250_000);
    expect(rows.reduce((s, r) => s + r.size * r.count, 0)).toBe(250_000);
    expect(rows[0]!.size).toBe(60_000);
    for (const row of rows) expect(quantityNumber(row.secondEigenvalue)).toBeLessThanOrEqual(1 + 1e-12);
  });

  it("says the same for any number of workers", async () => {
    const [a, b] = [
      await orbits(walkOf(pair), { modulus: 30, workers: 0 }),
      await orbits(walkOf(pair), { modulus: 30, workers: 2 }),
    ];
    expect(b).toEqual(a);
  });

  it("gives the same bits in both builds", async () => {
    const { loadKernel } = await import("../../src/kernel/kernel.js");
    const { FinitePoints } = await import("../../src/kernel/finite.js");
    const { residueMaps } = await import("../../src/orbits/maps.js");
    const { secondEigenvalue } = await import("../../src/orbits/second.js");
    const found = [];
    for (const target of ["simd", "plain"] as const) {
      for (const moves of [both, pair]) {
        const kernel = await loadKernel({ target });
        const points = new FinitePoints(kernel, 2, 23, residueMaps(walkOf(moves), 23));
        const table = points.tableOf(1);
        const weights = moves.map(() => 1 / moves.length);
        const symmetric = moves === both;
        found.push(secondEigenvalue(kernel, { table, weights, symmetric, seed: 5n, tolerance: 1e-9, most: 500 }));
      }
    }
    expect(found.slice(2)).toEqual(found.slice(0, 2));
  });
});

describe("kinds and periods", () => {
  it("puts orbits that a renumbering carries over into one row", async () => {
    // Cycles of one move are alike exactly where they are equally long.
    const { orbits: rows } = await orbits(walkOf([pair[0]!]), { modulus: 60, workers: 0 });
    expect(new Set(rows.map((r) => r.size)).size).toBe(rows.length);
    for (const row of rows) expect(row.period).toBe(row.size);
    for (const row of rows.filter((r) => r.size > 1)) {
      expect(row.secondEigenvalue).toMatchObject({ value: 1, standing: "exact" });
      expect(row.gap).toMatchObject({ value: 0, standing: "exact" });
    }
  });

  it("keeps apart orbits of equal size that differ", async () => {
    // Mod 3 the axes are swept by one reflection each: alike but for the moves' names.
    const walk = walkOf([
      {
        matrix: [
          [1, 0],
          [0, -1],
        ],
      },
      {
        matrix: [
          [-1, 0],
          [0, 1],
        ],
      },
    ]);
    const split = await orbits(walk, { modulus: 3, workers: 0 });
    expect(split.orbits.map((r) => [r.size, r.count, r.period])).toEqual([
      [4, 1, 2],
      [2, 1, 1],
      [2, 1, 1],
      [1, 1, 1],
    ]);
    expect(split.orbits[1]!.secondEigenvalue).toMatchObject({ value: 0, standing: "exact" });
  });

  it("is exact on two points", async () => {
    const walk = walkOf([
      {
        matrix: [
          [1, 0],
          [0, 1],
        ],
        weight: "1/3",
      },
      {
        matrix: [
          [-1, 0],
          [0, -1],
        ],
        weight: "2/3",
      },
    ]);
    const { orbits: rows } = await orbits(walk, { modulus: 3, workers: 0 });
    expect(rows.map((r) => [r.size, r.count])).toEqual([
      [2, 4],
      [1, 1],
    ]);
    expect(rows[0]!.secondEigenvalue).toMatchObject({ value: "1/3", standing: "exact" });
    expect(rows[0]!.gap).toMatchObject({ value: "2/3", standing: "exact" });
    expect(rows[1]!.gap).toMatchObject({ value: 1, standing: "exact" });
  });
});

describe("what is refused", () => {
  const refusal = (moves: WrittenMove[], modulus: unknown) =>
    orbits(walkOf(moves), { modulus: modulus as number, workers: 0 }).then(
      () => undefined,
      (error) => error,
    );

  it("a modulus that the translations do not allow", async () => {
    const error = await refusal(shifted, 4);
    expect(error).toBeInstanceOf(OptionsError);
    expect(error.message).toBe(
      "--modulus: found 4; accepted: multiples of 6, the common denominator of the moves' translations",
    );
  });
  it("any modulus where a translation is irrational", async () => {
    const error = await refusal(
      [
        {
          matrix: [
            [2, 1],
            [1, 1],
          ],
          translation: ["0", "sqrt(2)"],
        },
      ],
      4,
    );
    expect(error.message).toMatch(/^--modulus: found 4; accepted: none for this walk, since the translation sqrt\(2\)/);
  });
  it.each([0, -3, 2.5, Number.NaN, undefined, "7"])("the modulus %s", async (q) => {
    expect((await refusal(pair, q)).message).toMatch(/^--modulus: found .*; accepted: a whole number from 1 up$/);
  });
  it("more points than the memory holds", async () => {
    const error = await refusal(pair, 60_000);
    expect(error).toBeInstanceOf(LimitError);
    expect(error.message).toMatch(/60000\^2 points.*MiB/);
    expect(await refusal(solid, 10 ** 6)).toBeInstanceOf(LimitError);
  });
  it("work after a stop", async () => {
    const stop = new AbortController();
    stop.abort();
    await expect(orbits(walkOf(pair), { modulus: 5, workers: 0, signal: stop.signal })).rejects.toBeInstanceOf(
      StoppedError,
    );
  });
});
