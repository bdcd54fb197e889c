import { describe, expect, it } from "vitest";
import { OptionsError, StoppedError } from "../../src/errors.js";
import { growth } from "../../src/growth/growth.js";
import { readOptions } from "../../src/growth/options.js";
import { loadReal } from "../../src/kernel/real.js";
import { quantityNumber } from "../../src/quantity/quantity.js";
import { type Numbers, POSITIVE_PAIR, RANDOM_FIBONACCI, SIGNED, shear, walkOf } from "./walks.js";

// A loose tolerance: the first round of replicates is enough here.
const here = { workers: 0, effort: "quick", tolerance: 1 } as const;
const M: Numbers = [
  [2, 1],
  [1, 1],
];
const INVERSE: Numbers = [
  [1, -1],
  [-1, 2],
];

async function exponentOf(matrices: readonly Numbers[], weights?: readonly number[]) {
  const result = await growth(walkOf(matrices, weights), { ...here, steps: 2000 });
  return { result, top: quantityNumber(result.exponents[0]!) };
}

describe("growth", () => {
  it("has exponents in order that add up to 0, a positive variance, a convex pressure, a rate with minimum 0", async () => {
    const walk = walkOf([shear(3, 0, 1), shear(3, 1, 2), shear(3, 2, 0)]);
    const result = await growth(walk, { ...here, steps: 20_000, pressure: [0, 0.5, 1, 2] });
    const exponents = result.exponents.map(quantityNumber);
    expect(exponents).toHaveLength(3);
    expect(exponents[0]! > exponents[1]! && exponents[1]! > exponents[2]!).toBe(true);
    expect(Math.abs(exponents.reduce((a, b) => a + b, 0))).toBeLessThan(1e-12);
    expect(quantityNumber(result.logNormVariance)).toBeGreaterThan(0);
    const [zero, half, one, two] = result.pressure.map((p) => quantityNumber(p.value));
    expect(zero).toBe(0);
    expect(half! < one! / 2 && one! < two! / 2).toBe(true);
    expect(half! / 0.5).toBeGreaterThan(exponents[0]!);
    const rates = result.rate.map((r) => quantityNumber(r.rate));
    expect(Math.min(...rates)).toBe(0);
    expect(rates.at(-1)).toBeGreaterThan(0.001);
    expect(result.curve.at(-1)?.moves).toBe(20_000);
    expect(result.warnings).toEqual([]);
  });

  it("has Lambda(s) / s near lambda_1 for small s, and (Lambda(s) - s lambda_1) / s^2 near half the variance", async () => {
    const result = await growth(walkOf(RANDOM_FIBONACCI), { ...here, steps: 200_000, pressure: [-0.02, 0.02] });
    const [minus, plus] = result.pressure.map((p) => quantityNumber(p.value)) as [number, number];
    expect((plus - minus) / 0.04).toBeCloseTo(quantityNumber(result.exponents[0]!), 3);
    expect((plus + minus) / 0.0004 / quantityNumber(result.logNormVariance)).toBeCloseTo(1, 1);
  });

  it("gives the same result for any number of workers, another for another seed", async () => {
    const walk = walkOf(SIGNED);
    const one = await growth(walk, { ...here, steps: 4000 });
    expect(await growth(walk, { ...here, steps: 4000, workers: 2 })).toEqual(one);
    expect(quantityNumber((await growth(walk, { ...here, steps: 4000, seed: 2 })).exponents[0]!)).not.toBe(
      quantityNumber(one.exponents[0]!),
    );
  });

  it("stops at a tolerance, and says so where it is out of reach", async () => {
    const walk = walkOf(SIGNED);
    const loose = await growth(walk, { ...here, steps: 4096, tolerance: 0.01 });
    expect(loose.replicates).toBe(32);
    expect(loose.warnings).toEqual([]);
    const tight = await growth(walk, { ...here, steps: 262_144, digits: 12 });
    expect(tight.replicates).toBeGreaterThan(32);
    expect(tight.warnings.join()).toMatch(/not to the wanted 5e-13/);
  });

  it("names every wrong option", () => {
    const wrong = { tolerance: 0, digits: 1.5, pressure: [-65], steps: 3 };
    try {
      readOptions(wrong);
      expect.unreachable();
    } catch (error) {
      expect(error).toBeInstanceOf(OptionsError);
      expect((error as OptionsError).faults.map((f) => f.pointer)).toEqual([
        "--tolerance",
        "--digits",
        "--steps",
        "--pressure",
      ]);
    }
  });

  it("stops when asked", async () => {
    await expect(growth(walkOf(POSITIVE_PAIR), { ...here, signal: AbortSignal.abort() })).rejects.toThrow(StoppedError);
  });
});

describe("growth where the conditions fail", () => {
  it("finds log of the spectral radius for one hyperbolic matrix, also with determinant -1", async () => {
    const real = await loadReal();
    const { result, top } = await exponentOf([M]);
    expect(result.exponents[0]).toMatchObject({ value: "log((3 + sqrt(5))/2)", standing: "exact" });
    expect(top).toBeCloseTo(real.log((3 + Math.sqrt(5)) / 2), 14);
    expect(result.logNormVariance).toMatchObject({ value: 0, standing: "exact" });
    expect(
      (
        await exponentOf([
          [
            [1, 1],
            [1, 0],
          ],
        ])
      ).result.exponents[1],
    ).toMatchObject({ value: "-log((1 + sqrt(5))/2)" });
  });

  it("finds 0 for finite groups and shears, without a NaN anywhere", async () => {
    for (const set of [
      [shear(2, 0, 1)],
      [
        [
          [1, 0],
          [0, 1],
        ],
      ],
      [
        [
          [0, -1],
          [1, 0],
        ],
        [
          [0, 1],
          [1, 0],
        ],
      ],
    ]) {
      const { result } = await exponentOf(set);
      expect(result.exponents.map((q) => [q.value, q.standing])).toEqual([
        [0, "exact"],
        [0, "exact"],
      ]);
      expect(JSON.stringify(result)).not.toMatch(/NaN|null/);
      expect(result.warnings).toHaveLength(1);
    }
  });

  it("finds powers of one matrix commensurable: M, M^-1 and its root", async () => {
    const real = await loadReal();
    expect((await exponentOf([M, INVERSE])).result.exponents[0]).toMatchObject({ value: 0, standing: "exact" });
    const { result } = await exponentOf(
      [
        M,
        INVERSE,
        [
          [1, 1],
          [1, 0],
        ],
      ],
      [2, 1, 1],
    );
    // (2 - 1) / 4 of log M and 1/4 of half of it, in units of the root's logarithm: 3/4.
    expect(result.exponents[0]).toMatchObject({ value: "3/4 * log((1 + sqrt(5))/2)", standing: "exact" });
    // Variance of 2, -2, 1 with weights 2, 1, 1: 13/4 - 9/16.
    expect(result.logNormVariance.approx).toBeCloseTo((43 / 16) * real.log((1 + Math.sqrt(5)) / 2) ** 2, 12);
  });

  it("agrees with exact products on exchanged lines", async () => {
    const { result } = await exponentOf(
      [
        M,
        INVERSE,
        [
          [0, -1],
          [1, 0],
        ],
      ],
      [2, 1, 1],
    );
    expect(result.exponents[0]).toMatchObject({ value: 0, standing: "exact" });
    const last = result.curve.at(-1)!;
    // E |S_n| / n for a reflected normal law of the reported variance of |S|: variance / (1 - 2/pi) * 2/pi / n.
    const spread = quantityNumber(result.logNormVariance) / (1 - 2 / Math.PI);
    const expected = Math.sqrt((spread * 2) / Math.PI / last.moves);
    expect(Math.abs(last.mean / expected - 1)).toBeLessThan(0.35);
  });

  it("keeps to the eigenvalues for one matrix in dimension 3 and a block walk in dimension 8", async () => {
    const real = await loadReal();
    // x^3 - x - 1 has the real root 1.3247 and a pair of modulus 1.3247^(-1/2).
    const { result, top } = await exponentOf([
      [
        [0, 0, 1],
        [1, 0, 1],
        [0, 1, 0],
      ],
    ]);
    const root = real.log(1.324717957244746);
    expect(top).toBeCloseTo(root, 12);
    expect(quantityNumber(result.exponents[2]!)).toBeCloseTo(-root / 2, 3);
    for (const { s, value } of result.pressure) expect(quantityNumber(value)).toBeCloseTo(s * root, 10);
    const blocks = Array.from({ length: 8 }, (_, i) =>
      Array.from({ length: 8 }, (_, j) => (i >> 1 !== j >> 1 ? 0 : M[i & 1]![j & 1]!)),
    );
    const eight = await exponentOf([blocks]);
    expect(eight.result.exponents.map((q) => quantityNumber(q)).map((x) => x.toFixed(6))).toEqual(
      [1, 1, 1, 1, -1, -1, -1, -1].map((s) => (s * real.log((3 + Math.sqrt(5)) / 2)).toFixed(6)),
    );
  });
});
