import { describe, expect, it } from "vitest";
import { enumeratedBounds } from "../../src/growth/enumerated.js";
import { growth } from "../../src/growth/growth.js";
import { nonNegativeMoves } from "../../src/growth/orthant.js";
import { PositiveSet } from "../../src/growth/positive/positive.js";
import { meansJob, narrowest, normsJob, runWords } from "../../src/growth/words.js";
import { loadKernel } from "../../src/kernel/kernel.js";
import { loadReal } from "../../src/kernel/real.js";
import { wordMeans, wordNorms } from "../../src/kernel/words.js";
import { withSession } from "../../src/session.js";
import { type Numbers, POSITIVE_PAIR, RANDOM_FIBONACCI, SIGNED, shear, walkOf } from "./walks.js";

/** Positive, dimension 3. */
const POSITIVE_3: readonly Numbers[] = [
  [
    [1, 1, 1],
    [1, 2, 2],
    [1, 2, 3],
  ],
  [
    [2, 1, 1],
    [1, 1, 1],
    [1, 1, 2],
  ],
];

/** D A D for D = diag(1, -1, 1), and the second move negated. */
const HIDDEN_3 = POSITIVE_3.map((m, i) =>
  m.map((row, j) => row.map((x, k) => x * (j === 1 ? -1 : 1) * (k === 1 ? -1 : 1) * (i === 1 ? -1 : 1))),
);

describe("nonNegativeMoves", () => {
  it("finds the signs, and says where there are none", () => {
    const plain = POSITIVE_3.map((m) => m.map((row) => row.map(BigInt)));
    expect(nonNegativeMoves(walkOf(HIDDEN_3))).toEqual(plain);
    expect(nonNegativeMoves(walkOf(SIGNED))).toBeUndefined();
    expect(nonNegativeMoves(walkOf(RANDOM_FIBONACCI))).toBeUndefined();
  });
});

describe("wordMeans", () => {
  it("encloses a positive set's exponent, narrowly, and both builds give the same bits", async () => {
    const { table } = meansJob(walkOf(POSITIVE_PAIR, [1, 3]), "quick")!;
    const exponent = PositiveSet.of(walkOf(POSITIVE_PAIR, [1, 3]), await loadReal())!.exponent(80);
    const runs = await Promise.all(
      (["simd", "plain"] as const).map(async (target) => wordMeans(await loadKernel({ target }), table, 60, 1e-16)),
    );
    expect(runs[0]).toEqual(runs[1]);
    const [{ low, high }] = runs as [(typeof runs)[0]];
    expect(low < exponent.low.toNumber() && exponent.high.toNumber() < high).toBe(true);
    expect(high - low).toBeLessThan(1e-12);
  });

  it("does not depend on the number of workers or on how it is cut into parts", async () => {
    const walk = walkOf([shear(2, 0, 1), shear(2, 1, 0)], [2, 1]);
    const real = await loadReal();
    const bounds = (workers: number) =>
      withSession({ effort: "quick", workers }, (session) => enumeratedBounds(walk, session, real));
    const one = await bounds(0);
    expect(await bounds(2)).toEqual(one);
    const look = narrowest(await runWords(meansJob(walk, "quick")!));
    const [low, high] = [Number(one.enclosure!.low), Number(one.enclosure!.high)];
    expect(look.low <= high && low <= look.high).toBe(true);
    expect(high - low).toBeLessThan((look.high - look.low) / 2);
  });

  it("narrows in dimension 3 around the golden mean's cousin: one move, log of its spectral radius", async () => {
    const real = await loadReal();
    // x^3 - x - 1, the plastic number.
    const move = [
      [0, 0, 1],
      [1, 0, 1],
      [0, 1, 0],
    ];
    const { low, high } = narrowest(await runWords(meansJob(walkOf([move]), "quick")!));
    const value = real.log(1.324717957244746);
    expect(low - 1e-15 < value && value < high + 1e-15).toBe(true);
    expect(high - low).toBeLessThan(1e-11);
  });
});

describe("wordNorms", () => {
  it("is the mean over all words, as integers have it", async () => {
    const real = await loadReal();
    const walk = walkOf(SIGNED, [1, 2]);
    const { table } = normsJob(walk, "quick")!;
    const moves = walk.moves.map((m) => m.matrix);
    const times = (a: readonly (readonly bigint[])[], b: readonly (readonly bigint[])[]) =>
      a.map((row) => row.map((_, k) => row.reduce((s, x, j) => s + x * b[j]![k]!, 0n)));
    const sum = (xs: readonly bigint[]) => xs.reduce((s, x) => s + Math.abs(Number(x)), 0);
    const mean = (m: readonly (readonly bigint[])[], left: number): number => {
      if (left > 0) return mean(times(moves[0]!, m), left - 1) / 3 + (2 * mean(times(moves[1]!, m), left - 1)) / 3;
      const frobenius = m.flat().reduce((s, x) => s + Number(x * x), 0);
      const other = Math.max(...m.map(sum)) * Math.max(...m.map((_, k) => sum(m.map((row) => row[k]!))));
      return real.log(Math.min(frobenius, other)) / 2;
    };
    const unit = [0, 1, 2].map((i) => [0, 1, 2].map((j) => (i === j ? 1n : 0n)));
    const runs = await Promise.all(
      (["simd", "plain"] as const).map(async (target) => wordNorms(await loadKernel({ target }), table, 7)),
    );
    expect(runs[0]).toEqual(runs[1]);
    const expected = mean(unit, 7);
    expect(runs[0]!.low < expected && expected < runs[0]!.high).toBe(true);
    expect(runs[0]!.high - runs[0]!.low).toBeLessThan(1e-12);
    expect(runs[0]!.words).toBe(128);
  });
});

describe("growth in dimension 3 and more", () => {
  const here = { workers: 0, effort: "quick", steps: 20_000 } as const;

  it("encloses the top exponent of non-negative moves of dimension 4", async () => {
    const move = [
      [1, 1, 1, 1],
      [1, 2, 2, 2],
      [1, 2, 3, 3],
      [1, 2, 3, 4],
    ];
    const { exponents, sampled, warnings } = await growth(walkOf([move, move.toReversed()]), here);
    expect(exponents[0]).toMatchObject({ standing: "enclosed" });
    const [low, high] = [Number(exponents[0]!.low), Number(exponents[0]!.high)];
    expect(high - low).toBeLessThan(1e-6);
    expect(Number(sampled!.low) < high && low < Number(sampled!.high)).toBe(true);
    expect(warnings).toEqual([]);
  });

  it("bounds it from above otherwise", async () => {
    const { exponents, upperBound } = await growth(walkOf(SIGNED), here);
    expect(exponents[0]!.standing).toBe("estimated");
    expect(Number(upperBound!.value.low)).toBeGreaterThan(Number(exponents[0]!.low));
    expect(upperBound!.value.standing).toBe("enclosed");
    expect(upperBound!.moves).toBeGreaterThan(10);
  });
});
