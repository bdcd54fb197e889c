/** Norms of averaging operators against closed forms; free generators. */
import { describe, expect, it } from "vitest";
import { Rational } from "../../src/exact/rational.js";
import { gapBounds } from "../../src/modular/gap.js";
import { certifyFree } from "../../src/modular/ping-pong.js";
import { inverse2, type Matrix2 } from "../../src/modular/words.js";

const rows = ([a, b, c, d]: Matrix2) =>
  [
    [a, b],
    [c, d],
  ] as const;
const uniform = (set: readonly Matrix2[]) =>
  set.map((m) => ({ matrix: rows(m), probability: Rational.of(1, set.length) }));
const withInverses = (set: readonly Matrix2[]) => set.flatMap((m) => [m, inverse2(m)]);
const sanov: Matrix2[] = [
  [1n, 2n, 0n, 1n],
  [1n, 0n, 2n, 1n],
];

describe("gapBounds", () => {
  it("encloses Kesten's norm sqrt(2k - 1) / k of free generators (Kesten 1959), narrowly", () => {
    for (const [set, k] of [
      [withInverses(sanov), 2],
      // Sanov's pair's a^2, b^2 and a b: a subgroup's free generators (checked below).
      [
        withInverses([
          [1n, 4n, 0n, 1n],
          [1n, 0n, 4n, 1n],
          [5n, 2n, 2n, 1n],
        ]),
        3,
      ],
      [
        withInverses([
          [1n, 3n, 0n, 1n],
          [1n, 0n, -3n, 1n],
        ]),
        2,
      ],
    ] as [Matrix2[], number][]) {
      const found = gapBounds(uniform(set), 64)!;
      const norm = Math.sqrt(2 * k - 1) / k;
      expect(found.symmetric).toBe(true);
      expect(found.norm.low).toBeLessThanOrEqual(norm);
      expect(found.norm.high).toBeGreaterThanOrEqual(norm);
      expect(found.norm.high - found.norm.low).toBeLessThan(1e-6);
    }
  });

  it("encloses the norm of free generators without their inverses: 2 sqrt(k - 1) / k", () => {
    // For k free generators of weight 1 / k: Akemann and Ostrand 1976.
    // Two: the norm is 1, and only that of P^2 is less.
    const two = gapBounds(uniform(sanov), 64)!;
    expect(two.norm.high).toBe(1);
    expect(two.norm.low).toBeGreaterThan(1 - 1e-6);
    expect(two.spectralRadius.high).toBeCloseTo(Math.SQRT1_2, 14);
    // Signs hide the cones, but ping-pong shows that the group is free.
    const turned = gapBounds(
      uniform([
        [1n, -2n, 0n, 1n],
        [1n, 0n, 2n, 1n],
      ]),
      64,
    )!;
    expect(turned.freeSemigroup).toBe(true);
    expect(turned.spectralRadius.high).toBeCloseTo(Math.SQRT1_2, 14);
    const three = gapBounds(
      uniform([
        [1n, 4n, 0n, 1n],
        [1n, 0n, 4n, 1n],
        [5n, 2n, 2n, 1n],
      ]),
      200,
    )!;
    const norm = (2 * Math.sqrt(2)) / 3;
    expect(three.symmetric).toBe(false);
    expect(three.norm.low).toBeLessThanOrEqual(norm);
    expect(three.norm.high).toBeGreaterThanOrEqual(norm);
    expect(three.norm.high - three.norm.low).toBeLessThan(1e-6);
    // Non-negative, and their cones are apart: a free semigroup.
    expect(three.spectralRadius.high).toBeCloseTo(1 / Math.sqrt(3), 14);
    expect(three.spectralRadius.low).toBeLessThanOrEqual(1 / Math.sqrt(3));
  });

  it("bounds |P f| / |f| from above, determinant -1 included", () => {
    const set: Matrix2[] = [
      [0n, 1n, 1n, 1n],
      [1n, 1n, 0n, 1n],
      [1n, -2n, 0n, 1n],
    ];
    const { norm } = gapBounds(uniform(set), 64)!;
    // f with coefficients 2^(-|k_1| - |k_2|) for non-zero k in a square, moved by the transposes.
    const f = new Map<string, number>();
    for (let x = -9; x <= 9; x++) {
      for (let y = -9; y <= 9; y++) if (x !== 0 || y !== 0) f.set(`${x},${y}`, 2 ** -(Math.abs(x) + Math.abs(y)));
    }
    const image = new Map<string, number>();
    for (const [key, c] of f) {
      const [x, y] = key.split(",").map(Number) as [number, number];
      for (const m of set) {
        const [a, b, p, q] = m.map(Number) as [number, number, number, number];
        const to = `${a * x + p * y},${b * x + q * y}`;
        image.set(to, (image.get(to) ?? 0) + c / 3);
      }
    }
    const size = (g: Map<string, number>) => Math.sqrt([...g.values()].reduce((s, c) => s + c * c, 0));
    expect(norm.high).toBeGreaterThan(size(image) / size(f));
    expect(norm.high).toBeLessThan(1);
    expect(norm.high - norm.low).toBeLessThan(1e-6);
  });

  it("knows the spectral radius of a free semigroup, which the norm of P does not tell", () => {
    // [[2, 1], [1, 1]] and [[3, 1], [2, 1]]: their transposes' cones share an edge only. Words of n moves are
    // distinct, so that |mu^n|_2 = 2^(-n/2).
    const set: Matrix2[] = [
      [2n, 1n, 1n, 1n],
      [3n, 1n, 2n, 1n],
    ];
    const found = gapBounds(uniform(set), 64)!;
    expect(found.freeSemigroup).toBe(true);
    expect(found.spectralRadius.low).toBeLessThanOrEqual(Math.SQRT1_2);
    expect(found.spectralRadius.high).toBeGreaterThanOrEqual(Math.SQRT1_2);
    expect(found.spectralRadius.high - found.spectralRadius.low).toBeLessThan(1e-14);
    expect(found.norm.low).toBeGreaterThan(1 - 1e-6);
    // With the square of the first its cone overlaps, and the semigroup is not free.
    expect(gapBounds(uniform([...set, [5n, 3n, 3n, 2n]]), 64)?.freeSemigroup).toBe(false);
  });

  it("proves nothing where the group is amenable", () => {
    expect(
      gapBounds(
        uniform([
          [1n, 1n, 0n, 1n],
          [1n, -1n, 0n, 1n],
        ]),
        200,
      ),
    ).toBeUndefined();
    expect(gapBounds(uniform([[2n, 1n, 1n, 1n]]), 64)).toBeUndefined();
    expect(
      gapBounds(
        uniform([
          [0n, -1n, 1n, 0n],
          [0n, 1n, -1n, 0n],
        ]),
        200,
      ),
    ).toBeUndefined();
  });
});

describe("certifyFree", () => {
  it("certifies free pairs and triples by arcs", () => {
    for (const set of [
      sanov,
      [
        [1n, 3n, 0n, 1n],
        [1n, 0n, -3n, 1n],
      ],
      [
        [1n, 4n, 0n, 1n],
        [1n, 0n, 4n, 1n],
        [5n, 2n, 2n, 1n],
      ],
      // [[2, 1], [1, 1]]^4 and its conjugate by x -> x + 3: fixed directions 1.6, -0.6 and 4.6, 2.4.
      [
        [34n, 21n, 21n, 13n],
        [97n, -231n, 21n, -50n],
      ],
    ] as Matrix2[][]) {
      const found = certifyFree(withInverses(set));
      expect(found?.generators).toHaveLength(set.length);
      expect(found?.arcs).toHaveLength(2 * set.length);
    }
  });
  it("does not certify what is not free, or no set of pairs", () => {
    expect(
      certifyFree(
        withInverses([
          [1n, 1n, 0n, 1n],
          [1n, 0n, 1n, 1n],
        ]),
      ),
    ).toBeUndefined();
    expect(
      certifyFree(
        withInverses([
          [2n, 1n, 1n, 1n],
          [5n, 3n, 3n, 2n],
        ]),
      ),
    ).toBeUndefined();
    expect(certifyFree(sanov)).toBeUndefined();
  });
});
