/** The dual walk in exact integers, and frequencies dropped: against BigInt and against the doubles. */
import { describe, expect, it } from "vitest";
import { averages } from "../../src/averages/averages.js";
import { OptionsError } from "../../src/errors.js";
import { Rational } from "../../src/exact/rational.js";
import { exactFromText } from "../../src/exact/read.js";
import { DualTables } from "../../src/kernel/dual.js";
import { type KernelTarget, loadKernel } from "../../src/kernel/kernel.js";
import { law } from "../../src/law/law.js";
import { type Quantity, quantityNumber } from "../../src/quantity/quantity.js";
import { move, number, r, walkOf } from "./naive.js";

const third = r(1, 3);
const moves = [
  move(
    [
      [2, 1],
      [1, 1],
    ],
    third,
  ),
  move(
    [
      [1, -2],
      [0, 1],
    ],
    r(1, 2),
  ),
  move(
    [
      [0, 1],
      [1, 3],
    ],
    r(1, 6),
    -1,
  ),
];
const exactly = (q: Quantity) => {
  expect(q.standing).toBe("exact");
  const [num, den = "1"] = String(q.value).split("/");
  return Rational.of(BigInt(num!), BigInt(den));
};
const within = (x: Rational, q: Quantity) => {
  expect(x.toNumber()).toBeGreaterThanOrEqual(Number(q.low ?? quantityNumber(q)) - 1e-300);
  expect(x.toNumber()).toBeLessThanOrEqual(Number(q.high ?? quantityNumber(q)) + 1e-300);
};

describe("tables of integers", () => {
  it.each(["simd", "plain"] as KernelTarget[])("evolve and pair as BigInt does (%s)", async (target) => {
    for (const d of [2, 3]) {
      for (const width of [1, 2] as const) {
        const tables = new DualTables(
          await loadKernel({ target }),
          { dimension: d, width, fold: "none", exact: true },
          5000,
          2,
        );
        const one = (i: number, j: number): bigint => (i === j ? 1n : i === (j + 1) % d ? 2n : 0n);
        const other = (i: number, j: number): bigint => (i === j ? 1n : j === (i + 1) % d ? -3n : 0n);
        const list = [one, other].map((entry, m) => ({
          matrix: Array.from({ length: d }, (_, i) => Array.from({ length: d }, (_, j) => entry(i, j))),
          weight: 5 + 3 * m,
        }));
        const placed = tables.place(list);
        const first = [
          {
            frequency: Array.from({ length: d }, (_, i) => BigInt(i + 1)),
            re: 2n ** 40n + 7n,
            im: width === 2 ? -(2n ** 39n) : 0n,
          },
          { frequency: Array.from({ length: d }, (_, i) => BigInt(-i)), re: -(2n ** 41n), im: width === 2 ? 3n : 0n },
        ];
        tables.fill(0, first);
        let naive = new Map(first.map((t) => [t.frequency.join(), t]));
        for (let n = 0; n < 5; n++) {
          expect(tables.evolve(n % 2, (n + 1) % 2, placed)).toBe("done");
          const next: typeof naive = new Map();
          for (const { frequency, re, im } of naive.values()) {
            for (const { matrix, weight } of list) {
              const k = matrix.map((row) => row.reduce((s, e, j) => s + e * frequency[j]!, 0n));
              const old = next.get(k.join()) ?? { frequency: k, re: 0n, im: 0n };
              const w = BigInt(weight);
              next.set(k.join(), { frequency: k, re: old.re + w * re, im: old.im + w * im });
            }
          }
          naive = next;
        }
        expect(tables.count(1)).toBe(naive.size);
        for (const { frequency, re, im } of naive.values()) expect(tables.integerAt(1, frequency)).toEqual({ re, im });
        const norm = [...naive.values()].reduce((s, { re, im }) => s + re * re + im * im, 0n);
        expect(norm > 2n ** 100n).toBe(true);
        expect(tables.pairExact(1, 1)).toBe(norm);
        const negated = [...naive.values()].slice(1).map(({ frequency, re, im }) => ({ frequency, re: -re, im: -im }));
        tables.fill(0, negated);
        const { re, im } = [...naive.values()][0]!;
        expect(tables.pairExact(0, 1)).toBe(-(norm - re * re - im * im));
      }
    }
  });
});

describe("correlations in exact integers", () => {
  it("are fractions inside the enclosures, for even, odd and mixed observables", async () => {
    const wave = (label: string, cos: string, sin: string) => ({
      type: "terms" as const,
      label,
      terms: [
        { frequency: [1n, 0n], cos: exactFromText(cos), sin: exactFromText(sin) },
        { frequency: [1n, 1n], cos: exactFromText("0"), sin: exactFromText(sin) },
      ],
    });
    const walk = walkOf(moves, { type: "uniform" }, [
      wave("even", "2/7", "0"),
      wave("odd", "0", "1/3"),
      wave("both", "1/5", "-2"),
    ]);
    const options = { workers: 0, effort: "quick", steps: 2, replicates: 8 } as const;
    const whole = await averages(walk, { ...options, exact: true });
    const doubles = await averages(walk, options);
    for (const [i, { correlations, reached }] of whole.observables.entries()) {
      expect(correlations.length).toBeGreaterThan(8);
      expect(reached!.reason).not.toBe("");
      const others = doubles.observables[i]!.correlations;
      let met = 0;
      for (const [n, q] of correlations.entries()) {
        if (others[n] === undefined) break;
        const x = exactly(q);
        // The weights' common denominator is 6: nothing else is divided by, but the coefficients' squares.
        const scale = [49n, 9n, 25n][i]!;
        expect((2n * scale * 6n ** BigInt(n)) % x.den).toBe(0n);
        within(x, others[n]!);
        if (x.num !== 0n) met++;
      }
      expect(met).toBeGreaterThan(1);
    }
  });

  it("are refused where coefficients or translations do not allow them", async () => {
    const walk = walkOf([{ ...moves[0]!, translation: [number(1, 2), number(0)] }, moves[1]!, moves[2]!]);
    const call = averages(walk, { workers: 0, exact: true });
    await expect(call).rejects.toThrow(OptionsError);
    await expect(call).rejects.toThrow("--exact: found a walk with translations; accepted: walks without translations");
    const point = walkOf(moves, { type: "point", point: [exactFromText("sqrt(2)"), exactFromText("0")] });
    await expect(law(point, { frequency: [1, 0], workers: 0, exact: true })).rejects.toThrow(
      "found a start at one point",
    );
  });
});

describe("law from a density", () => {
  const terms = [
    { frequency: [0n, 0n], cos: number(1), sin: number(0) },
    { frequency: [3n, -1n], cos: number(1, 3), sin: number(1, 7) },
    { frequency: [1n, 2n], cos: number(-1, 4), sin: number(0) },
    { frequency: [1n, 0n], cos: number(0), sin: number(1, 2) },
  ];
  const walk = walkOf(moves, { type: "density", terms });
  const ask = (steps: number, exact = false) =>
    law(walk, { frequency: [1, 0], steps, exact, workers: 0, effort: "quick", distance: false });

  it("is exact on request, inside the enclosures", async () => {
    const [whole, doubles] = [await ask(9, true), await ask(9)];
    let met = 0;
    for (const [n, c] of whole.coefficients.entries()) {
      within(exactly(c.real), doubles.coefficients[n]!.real);
      within(exactly(c.imag), doubles.coefficients[n]!.imag);
      if (exactly(c.imag).num !== 0n) met++;
    }
    expect(met).toBeGreaterThan(3);
    // By hand: at n = 0 the density's coefficient at -(1, 0) is i/4.
    expect(String(whole.coefficients[0]!.imag.value)).toBe("1/4");
  });

  it("drops frequencies that cannot come back to the density's, and no coefficient changes", async () => {
    const [short, long] = [await ask(8), await ask(11)];
    // The last steps of the short run hold fewer frequencies than the long run does there.
    expect(short.coefficients[8]!.frequencies).toBeLessThan(0.2 * long.coefficients[8]!.frequencies);
    for (const [n, c] of short.coefficients.entries()) {
      expect(c.real.value).toBeCloseTo(long.coefficients[n]!.real.value as number, 14);
      expect(c.imag.value).toBeCloseTo(long.coefficients[n]!.imag.value as number, 14);
    }
    const [a, b] = [await ask(8, true), await ask(11, true)];
    expect(a.coefficients.map((c) => c.real.value)).toEqual(b.coefficients.slice(0, 9).map((c) => c.real.value));
  });

  it("stops before integers pass 63 bits", async () => {
    const one = walkOf([{ ...moves[0]!, weight: r(1), probability: r(1) }], { type: "density", terms });
    const heavy = walkOf(
      [
        { ...moves[1]!, weight: r(1, 10 ** 6), probability: r(1, 10 ** 6) },
        { ...moves[1]!, weight: r(10 ** 6 - 1, 10 ** 6), probability: r(10 ** 6 - 1, 10 ** 6) },
      ],
      { type: "density", terms },
    );
    const options = {
      frequency: [1, 0],
      steps: 20,
      workers: 0,
      effort: "quick",
      exact: true,
      distance: false,
    } as const;
    expect((await law(one, options)).stoppedAt).toBeUndefined();
    // 10^18 < 2^63 < 10^24.
    expect((await law(heavy, options)).stoppedAt).toEqual({ step: 3, reason: expect.stringMatching(/63 bits/) });
  });
});
