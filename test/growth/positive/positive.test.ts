import { describe, expect, it } from "vitest";
import { Rational } from "../../../src/exact/rational.js";
import { type Enclosure, PositiveSet } from "../../../src/growth/positive/positive.js";
import { rateAt, roundSpeeds } from "../../../src/growth/positive/rates.js";
import { provedPressure } from "../../../src/growth/symmetric.js";
import { loadReal } from "../../../src/kernel/real.js";
import { type Numbers, POSITIVE_PAIR, walkOf } from "../walks.js";
import { digitPair, inverses, POSITIVE_SETS, turned } from "./walks.js";

async function setOf(matrices: readonly Numbers[], weights?: readonly number[]): Promise<PositiveSet> {
  const set = PositiveSet.of(walkOf(matrices, weights), await loadReal());
  if (set === undefined) throw new Error("a positive set expected");
  return set;
}

const width = ({ low, high }: Enclosure) => high.sub(low).toNumber();
const meet = (a: Enclosure, b: Enclosure) => a.low.compare(b.high) <= 0 && b.low.compare(a.high) <= 0;
const middle = ({ low, high }: Enclosure) => low.add(high).div(Rational.of(2)).toNumber();

describe("a positive set's exponent", () => {
  for (const [name, set] of POSITIVE_SETS) {
    it(`is enclosed, narrowly, the same at every precision: ${name}`, async () => {
      const positive = await setOf(
        set,
        set.map((_, i) => i + 1),
      );
      const [coarse, fine, finest] = [40, 96, 200].map((bits) => positive.exponent(bits));
      expect(width(coarse!)).toBeLessThan(2 ** -38);
      expect(width(fine!)).toBeLessThan(2 ** -94);
      expect(width(finest!)).toBeLessThan(2 ** -198);
      expect(meet(coarse!, finest!) && meet(fine!, finest!)).toBe(true);
    });
  }

  it("does not depend on the basis, and inverses have the same one", async () => {
    const [here, there, back] = await Promise.all(
      [POSITIVE_PAIR, turned(POSITIVE_PAIR), inverses(POSITIVE_PAIR)].map(async (s) => (await setOf(s)).exponent(150)),
    );
    expect(meet(here!, there!) && meet(here!, back!)).toBe(true);
  });

  it("is log of the spectral radius where all moves are one (by a limit: weights 1 and 2^-40)", async () => {
    const real = await loadReal();
    const positive = await setOf(digitPair(1, 2), [2 ** 40, 1]);
    const golden = real.log((1 + Math.sqrt(5)) / 2);
    expect(Math.abs(middle(positive.exponent(64)) - golden)).toBeLessThan(1e-11);
  });
});

describe("a positive set's pressure", () => {
  for (const [name, set] of POSITIVE_SETS) {
    it(`is enclosed at any s and meets what symmetric powers prove: ${name}`, async () => {
      const positive = await setOf(set);
      for (const s of [-4, -1, -0.3, 0, 0.5, 1, 2, 4]) {
        const found = positive.pressure(s, 64);
        expect(width(found!)).toBeLessThan(2 ** -58);
        if (s === 0) expect(meet(found!, { low: Rational.ZERO, high: Rational.ZERO })).toBe(true);
        const other = provedPressure(walkOf(set), s);
        if (other?.low === undefined) continue;
        expect(Math.abs(middle(found!) - (other.value as number))).toBeLessThan(1e-14 * Math.max(1, Math.abs(s)));
      }
    });

    it(`has the exponent as its slope at 0 and the variance as its second derivative: ${name}`, async () => {
      const positive = await setOf(set);
      const variance = positive.variance(96);
      expect(width(variance!)).toBeLessThan(2 ** -60);
      // Differences of convex functions: Lambda(t) / t falls to the slope at 0 from above, from below for t < 0.
      const t = 2 ** -20;
      const [before, after] = [positive.pressure(-t, 110)!, positive.pressure(t, 110)!];
      const by = Rational.fromNumber(t);
      const exponent = positive.exponent(64);
      expect(before.low.neg().div(by).compare(exponent.high)).toBeLessThanOrEqual(0);
      expect(after.high.div(by).compare(exponent.low)).toBeGreaterThanOrEqual(0);
      expect(after.high.add(before.high).toNumber() / t).toBeLessThan(1e-5 * Math.max(1, middle(variance!)));
      // The symmetric second difference is off by t^2 / 12 of the fourth derivative.
      const second = after.low.add(before.low).div(by.mul(by)).toNumber();
      expect(Math.abs(second - middle(variance!))).toBeLessThan(1e-7 * Math.max(1, middle(variance!)));
    });
  }
});

describe("a positive set's rates", () => {
  it("are enclosed, convex, least near the exponent, and above every tangent", async () => {
    const positive = await setOf(POSITIVE_PAIR);
    const rows = roundSpeeds(positive).map((speed) => ({ speed, rate: rateAt(positive, speed)! }));
    expect(rows.length).toBeGreaterThanOrEqual(10);
    const rates = rows.map((r) => middle(r.rate));
    for (const [i, row] of rows.entries()) {
      expect(width(row.rate)).toBeLessThan(1e-14);
      if (i > 0 && i + 1 < rows.length) expect(rates[i - 1]! + rates[i + 1]! - 2 * rates[i]!).toBeGreaterThan(0);
      for (const s of [-3, -1, 1, 3]) {
        expect(s * row.speed - middle(positive.pressure(s, 64)!)).toBeLessThanOrEqual(row.rate.high.toNumber() + 1e-13);
      }
    }
    const least = rates.indexOf(Math.min(...rates));
    expect(Math.abs(rows[least]!.speed - middle(positive.exponent(64)))).toBeLessThan(0.02);
  });
});
