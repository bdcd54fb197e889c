import { describe, expect, it } from "vitest";
import { Rational } from "../../../src/exact/rational.js";
import { growth } from "../../../src/growth/growth.js";
import { boxCone } from "../../../src/growth/positive/box.js";
import { corners } from "../../../src/growth/positive/cone.js";
import { PositiveSet } from "../../../src/growth/positive/positive.js";
import { provedPressure } from "../../../src/growth/symmetric.js";
import { meansJob, narrowest, runWords } from "../../../src/growth/words.js";
import { loadReal } from "../../../src/kernel/real.js";
import { type Numbers, SIGNED, shear, walkOf } from "../walks.js";

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

/** Companion matrices: only their products are positive. */
const COMPANIONS: readonly Numbers[] = [
  [
    [1, 1, 1],
    [1, 0, 0],
    [0, 1, 0],
  ],
  [
    [2, 1, 1],
    [1, 0, 0],
    [0, 1, 0],
  ],
];

const times = (a: Numbers, b: Numbers) =>
  a.map((row) => b[0]!.map((_, k) => row.reduce((s, x, j) => s + x * b[j]![k]!, 0)));

/** Their squares contract more: lower degrees are enough. */
const SQUARES = POSITIVE_3.map((m) => times(m, m));

/** U A U^-1 for a matrix U of determinant 1. */
const turned = (set: readonly Numbers[]) =>
  set.map((m) =>
    times(
      times(
        [
          [1, 2, 0],
          [0, 1, 3],
          [1, 2, 1],
        ],
        m,
      ),
      [
        [-5, -2, 6],
        [3, 1, -3],
        [-1, 0, 1],
      ],
    ),
  );

/** Of determinant 1. */
function inverse(m: Numbers): number[][] {
  const at = (i: number, j: number) => m[i % 3]![j % 3]!;
  return [0, 1, 2].map((i) =>
    [0, 1, 2].map((j) => at(j + 1, i + 1) * at(j + 2, i + 2) - at(j + 1, i + 2) * at(j + 2, i + 1)),
  );
}

describe("boxCone", () => {
  it("finds a box that is mapped into itself, in any basis", () => {
    for (const set of [POSITIVE_3, turned(POSITIVE_3)]) {
      const cone = boxCone(walkOf(set))!;
      expect(cone.reach).toBeGreaterThan(3);
      for (const { rows } of cone.moves) {
        for (const u of corners(2)) {
          const [x, y, last] = rows.map((row) => row.reduce((s, e, k) => s + e * u[k]!, 0n)) as [
            bigint,
            bigint,
            bigint,
          ];
          expect(last > 0n && x <= last && -x <= last && y <= last && -y <= last).toBe(true);
        }
      }
    }
  });

  it("finds none where there is none", () => {
    expect(boxCone(walkOf(SIGNED))).toBeUndefined();
    expect(boxCone(walkOf([shear(3, 0, 1), shear(3, 1, 2), shear(3, 2, 0)]))).toBeUndefined();
    expect(boxCone(walkOf([POSITIVE_3[0]!]))).toBeUndefined();
  });
});

describe("a positive set of dimension 3", () => {
  for (const [name, set, plain] of [
    ["positive", POSITIVE_3, POSITIVE_3],
    ["in another basis", turned(POSITIVE_3), POSITIVE_3],
    ["positive products", COMPANIONS, COMPANIONS],
  ] as const) {
    it(`has its exponent and pressure enclosed, as enumeration and symmetric powers have them: ${name}`, async () => {
      const positive = PositiveSet.of(walkOf(set), await loadReal())!;
      const { low, high } = positive.exponent(40);
      expect(high.sub(low).toNumber()).toBeLessThan(2 ** -40);
      const words = narrowest(await runWords(meansJob(walkOf(plain), "quick")!));
      expect(words.low <= high.toNumber() && low.toNumber() <= words.high).toBe(true);
      for (const s of [1, 2]) {
        const found = positive.pressure(s, 32)!;
        expect(found.high.sub(found.low).toNumber()).toBeLessThan(2 ** -32);
        const proved = provedPressure(walkOf(plain), s)!;
        const value = proved.low === undefined ? proved.approx! : (proved.value as number);
        expect(found.low.toNumber() - 1e-15 <= value && value <= found.high.toNumber() + 1e-15).toBe(true);
      }
    });
  }

  it("has slope and second derivative of the pressure at 0 as exponent and variance", async () => {
    const positive = PositiveSet.of(walkOf(COMPANIONS), await loadReal())!;
    const t = 2 ** -10;
    const [after, before] = [positive.pressure(t, 44)!, positive.pressure(-t, 44)!];
    const middle = (x: { low: Rational; high: Rational }) => x.low.add(x.high).div(Rational.of(2));
    const slope = middle(after).sub(middle(before)).toNumber() / (2 * t);
    const bend = middle(after).add(middle(before)).toNumber() / (t * t);
    expect(Math.abs(slope - middle(positive.exponent(44)).toNumber())).toBeLessThan(1e-7);
    const variance = positive.variance(44)!;
    expect(variance.high.sub(variance.low).toNumber()).toBeLessThan(1e-9);
    expect(Math.abs(bend - middle(variance).toNumber())).toBeLessThan(1e-7);
  });

  it("does not depend on what was asked before", async () => {
    const real = await loadReal();
    const [fresh, used] = [PositiveSet.of(walkOf(SQUARES), real)!, PositiveSet.of(walkOf(SQUARES), real)!];
    for (const s of [9, -4, 0.5]) used.pressure(s, 32);
    used.variance(30);
    expect(used.pressure(1.5, 32)).toEqual(fresh.pressure(1.5, 32));
    expect(used.exponent(30)).toEqual(fresh.exponent(30));
  });

  it("has all exponents, variance, pressure and rates enclosed, where the inverses are positive, too", async () => {
    const { exponents, logNormVariance, pressure, rate, sampled, warnings } = await growth(walkOf(SQUARES), {
      workers: 0,
      effort: "quick",
      steps: 20_000,
      pressure: [-1.5, 0.5],
    });
    const all = [...exponents, logNormVariance, ...pressure.map((p) => p.value), ...rate.map((r) => r.rate)];
    expect(new Set(all.map((q) => q.standing))).toEqual(new Set(["enclosed"]));
    expect(Math.max(...exponents.map((q) => Number(q.high) - Number(q.low)))).toBeLessThan(1e-12);
    expect(rate.length).toBeGreaterThanOrEqual(3);
    expect(Math.max(...rate.map((r) => Number(r.rate.high) - Number(r.rate.low)))).toBeLessThan(1e-7);
    expect(Number(sampled!.low) < Number(exponents[0]!.high)).toBe(true);
    expect(Number(exponents[0]!.low) < Number(sampled!.high)).toBe(true);
    // The last exponent from the other side: enumeration with the inverses, non-negative up to signs.
    const back = narrowest(await runWords(meansJob(walkOf(SQUARES.map(inverse)), "quick")!));
    expect(back.low <= -Number(exponents[2]!.low) && -Number(exponents[2]!.high) <= back.high).toBe(true);
    expect(back.high - back.low).toBeLessThan(1e-3);
    expect(warnings).toEqual([]);
  });
});
