import { describe, expect, it } from "vitest";
import { loadReal } from "../../src/kernel/real.js";
import { fitDecay } from "../../src/law/decay.js";
import { cutoffFor, lowHalf } from "../../src/law/distance.js";
import { law } from "../../src/law/law.js";
import { smoothing, smoothings, wasserstein } from "../../src/law/smoothing.js";
import { point } from "../../src/quantity/interval.js";
import { exactQuantity, quantityNumber } from "../../src/quantity/quantity.js";
import { point as at, move, number, phase, r, walkOf } from "../dual/naive.js";

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
const real = await loadReal();

/** Moduli of a law given by its coefficients, at all low frequencies. */
const moduli = (d: number, cutoff: number, modulus: (k: readonly number[]) => number) =>
  lowHalf(d, cutoff).map((frequency) => ({ frequency, modulus: point(modulus(frequency)) }));

describe("Wasserstein-1 from coefficients", () => {
  it("of one point: the mean distance to a uniform one, (sqrt 2 + log(1 + sqrt 2)) / 6 in the plane", () => {
    const truth = (Math.SQRT2 + Math.log(1 + Math.SQRT2)) / 6;
    for (const K of [1, 4, 16]) {
      const { low, high } = wasserstein(
        moduli(2, K, () => 1),
        smoothings(K, 2, real),
      );
      expect(low).toBeLessThan(truth);
      expect(high).toBeGreaterThan(truth);
      expect(high).toBeLessThan(1.1 * truth);
    }
  });

  it("of a grid: a point's over the number of rows, and the upper bound comes near it", () => {
    const rows = 3;
    const truth = (Math.SQRT2 + Math.log(1 + Math.SQRT2)) / 6 / rows;
    let before = Number.POSITIVE_INFINITY;
    for (const K of [3, 12, 48]) {
      const grid = moduli(2, K, (k) => (k.every((x) => x % rows === 0) ? 1 : 0));
      const { low, high } = wasserstein(grid, smoothings(K, 2, real));
      expect(low).toBeLessThan(truth);
      expect(low).toBeGreaterThan(0.4 * truth);
      expect(high).toBeGreaterThan(truth);
      expect(high).toBeLessThanOrEqual(before);
      before = high;
    }
    expect(before).toBeLessThan(1.7 * truth);
  });

  it("of 1 + a cos(2 pi x): a / pi^2, the mean of |a sin(2 pi x)| / 2 pi", () => {
    for (const d of [1, 2]) {
      const truth = 0.8 / Math.PI ** 2;
      const wave = moduli(d, d === 1 ? 100 : 40, (k) => (k[0] === 1 && k.slice(1).every((x) => x === 0) ? 0.4 : 0));
      const { low, high } = wasserstein(wave, smoothings(d === 1 ? 100 : 40, d, real));
      expect(low).toBeGreaterThan(0.78 * truth);
      expect(low).toBeLessThan(truth);
      expect(high).toBeGreaterThan(truth);
      expect(high - low).toBeLessThan(0.8 * truth);
    }
  });

  it("uses a kernel of positive coefficients whose first is cos(pi / (K + 2))", () => {
    for (const K of [1, 2, 5, 20]) {
      const { coefficients, moved } = smoothing(K, 3, real);
      expect(coefficients[1]!.low).toBeLessThanOrEqual(Math.cos(Math.PI / (K + 2)) + 1e-15);
      expect(coefficients[1]!.high).toBeGreaterThanOrEqual(Math.cos(Math.PI / (K + 2)) - 1e-15);
      expect(coefficients.every((c) => c.low > 0 && c.high - c.low < 1e-13)).toBe(true);
      expect(moved.high ** 2).toBeCloseTo((3 * (1 - Math.cos(Math.PI / (K + 2)))) / 8, 12);
    }
  });
});

describe("distance to uniform", () => {
  it("is the largest among all low coefficients, by enumeration of the walk", async () => {
    const start: [number, number][] = [
      [1234567, 2147483659],
      [7654321, 2147483659],
    ];
    const { distance } = await law(walkOf(tray, at(...start)), {
      frequency: [1, 0],
      steps: 5,
      workers: 0,
      effort: "quick",
    });
    expect(distance).toMatchObject({ cutoff: 4, frequencies: 40 });
    let points = [start.map(([a, b]) => r(a, b))];
    for (const { step, largest } of distance!.steps) {
      let most = 0;
      for (const k of lowHalf(2, 4)) {
        let [re, im] = [0, 0];
        for (const x of points) {
          const e = phase(x[0]!.mul(r(k[0]!)).add(x[1]!.mul(r(k[1]!))));
          re += e.re / points.length;
          im += e.im / points.length;
        }
        most = Math.max(most, Math.hypot(re, im));
      }
      expect(Number(largest.low ?? largest.value)).toBeLessThanOrEqual(most + 1e-14);
      expect(Number(largest.high ?? largest.value)).toBeGreaterThanOrEqual(most - 1e-14);
      expect(Number(largest.high ?? largest.value) - Number(largest.low ?? largest.value)).toBeLessThan(1e-13);
      expect(step).toBeLessThan(6);
      points = points.flatMap((x) =>
        tray.map((m) => m.matrix.map((row) => row.reduce((s, e, j) => s.add(x[j]!.mul(r(Number(e)))), r(0)).mod1())),
      );
    }
    expect(distance!.steps.length).toBe(6);
  });

  it("is the same for any number of workers, and is left out on request", async () => {
    const walk = walkOf(tray, {
      type: "density",
      terms: [
        { frequency: [0n, 0n], cos: number(1), sin: number(0) },
        { frequency: [2n, 1n], cos: number(1, 2), sin: number(1, 3) },
      ],
    });
    const ask = (more: object) => law(walk, { frequency: [1, 0], steps: 8, effort: "quick", ...more });
    const one = await ask({ workers: 0 });
    expect(await ask({ workers: 2 })).toEqual(one);
    expect(one.distance!.steps.at(-1)!.largest.value).toBe(0);
    const without = await ask({ workers: 0, distance: false });
    expect([without.distance, without.normBound]).toEqual([undefined, undefined]);
    expect(without.coefficients).toEqual(one.coefficients);
  });

  it("takes a cutoff of 1 at least", () => {
    expect([2, 3, 8].map((d) => cutoffFor(d, "quick"))).toEqual([4, 1, 1]);
    expect(lowHalf(8, 1).length).toBe((3 ** 8 - 1) / 2);
  });
});

describe("decay", () => {
  it("fits an exponential, and passes over what rounding covers", () => {
    const coefficients = Array.from({ length: 20 }, (_, step) => ({
      step,
      frequencies: 1,
      real: { ...exactQuantity(0n, "test"), value: 0.75 ** step },
      imag: exactQuantity(0n, "test"),
    }));
    const decay = fitDecay(coefficients, real)!;
    expect(quantityNumber(decay.rate)).toBeCloseTo(-Math.log(0.75), 12);
    expect([decay.from, decay.to]).toEqual([10, 19]);
    expect(fitDecay(coefficients.slice(0, 8), real)).toBeUndefined();
  });

  it("stands beside the rate that the norm guarantees: of a free semigroup, half of log 2", async () => {
    const result = await law(walkOf(tray, at([1234567, 2147483659], [7654321, 2147483659])), {
      frequency: [1, 0],
      steps: 16,
      workers: 0,
      effort: "quick",
    });
    // A rational start: no bound is claimed.
    expect(result.normBound).toBeUndefined();
    expect(quantityNumber(result.decay!.rate)).toBeGreaterThan(0.2);
    const density = { type: "density", terms: [{ frequency: [0n, 0n], cos: number(1), sin: number(0) }] } as const;
    const bound = (await law(walkOf(tray, density), { frequency: [1, 0], steps: 3, workers: 0, effort: "quick" }))
      .normBound!;
    expect(bound.rate.standing).toBe("enclosed");
    expect(Number(bound.rate.low)).toBeLessThanOrEqual(Math.log(2) / 2);
    expect(Number(bound.rate.low)).toBeGreaterThan(Math.log(2) / 2 - 1e-9);
  });
});
