import { Decimal } from "decimal.js";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { type ExactNumber, exactRational } from "../../src/exact/number.js";
import { Rational } from "../../src/exact/rational.js";
import { exactFromText, readExact } from "../../src/exact/read.js";
import { bestApproximations } from "../../src/start/approximations.js";
import { isPoint, nearestNumerators, torusDistance } from "../../src/start/distance.js";
import { liouville } from "../../src/start/liouville.js";

const lcm = (a: bigint, b: bigint) => {
  let [x, y] = [a, b];
  while (y !== 0n) [x, y] = [y, x % y];
  return (a / x) * b;
};

/** Squared distance to the nearest point of denominator q, exactly. */
function squared(point: readonly Rational[], q: bigint): Rational {
  return point.reduce((sum, x) => {
    const scaled = x.mul(Rational.of(q)).mod1();
    const off = scaled.compare(Rational.of(1n, 2n)) > 0 ? Rational.ONE.sub(scaled) : scaled;
    return sum.add(off.mul(off).div(Rational.of(q * q)));
  }, Rational.ZERO);
}

/** The definition, in exact fractions; stops at the start itself. */
function brute(point: readonly Rational[], most: number, translations: bigint): number[] {
  const records: number[] = [];
  let best: Rational | undefined;
  for (let q = 1n; q <= BigInt(most); q++) {
    const l = lcm(q, translations);
    const value = squared(point, q).mul(Rational.of(l * l));
    if (value.num === 0n) continue;
    if (best !== undefined && value.compare(best) >= 0) continue;
    best = value;
    records.push(Number(q));
  }
  return records;
}

/** Records among all q, by adding x to itself in units of 2^-52: right while no two values agree in five digits. */
function scan(start: readonly ExactNumber[], most: number, b: number): number[] {
  const unit = 2 ** 52;
  const steps = start.map((x) => Number(BigInt.asUintN(52, x.toFixed(52))));
  const at = steps.map(() => 0);
  const records: number[] = [];
  let best = Number.POSITIVE_INFINITY;
  for (let q = 1; q <= most; q++) {
    let sum = 0;
    for (const [j, step] of steps.entries()) {
      at[j] = (at[j]! + step) % unit;
      sum += Math.min(at[j]!, unit - at[j]!) ** 2;
    }
    let [g, rest] = [b, q % b];
    while (rest !== 0) [g, rest] = [rest, g % rest];
    const value = (b / g) * Math.sqrt(sum);
    if (value >= best * (1 - 1e-5)) continue;
    best = value;
    records.push(q);
  }
  return records;
}

const bits = fc.bigInt({ min: 0n, max: 2n ** 90n });

describe("best approximations", () => {
  it("are those of the definition, for random points with up to 8 coordinates and translations", () => {
    fc.assert(
      fc.property(fc.array(bits, { minLength: 2, maxLength: 8 }), fc.integer({ min: 1, max: 12 }), (values, b) => {
        const point = values.map((v) => Rational.of(v, 2n ** 90n + 1n));
        const { records, unresolved } = bestApproximations(
          point.map((x) => exactRational(x)),
          80,
          BigInt(b),
        );
        expect(unresolved).toEqual([]);
        expect(records.map((r) => r.denominator)).toEqual(brute(point, 80, BigInt(b)));
      }),
      { numRuns: 20, seed: 3 },
    );
  });

  it("see a point within 10^-20 of a small fraction, and pass over the start itself", () => {
    const near = [Rational.of(1n, 3n).add(Rational.of(1n, 10n ** 20n)), Rational.of(2n, 7n)];
    const { records } = bestApproximations(
      near.map((x) => exactRational(x)),
      100,
      1n,
    );
    expect(records.at(-1)?.denominator).toBe(21);
    expect(records.at(-1)?.numerators).toEqual([7, 6]);
    const self = [Rational.of(1n, 3n), Rational.of(2n, 7n)];
    const found = bestApproximations(
      self.map((x) => exactRational(x)),
      100,
      1n,
    ).records;
    expect(found.map((r) => r.denominator)).toEqual(brute(self, 20, 1n));
  });

  it("are those of a scan of every denominator, with translations too", () => {
    const point = ["sqrt(2)-1", "cbrt(3)-1"];
    for (const [numbers, b] of [
      [point, 1],
      [point, 12],
      [[2, 3, 5, 7, 11, 13, 17, 19].map((n) => `sqrt(${n})`), 1],
      [["sqrt(5)", "sqrt(6)", "sqrt(7)"], 30],
    ] as const) {
      const start = numbers.map((text) => exactFromText(text));
      const most = 300_000;
      const { records, searchedTo } = bestApproximations(start, most, BigInt(b));
      expect(searchedTo).toBe(most);
      expect(records.map((r) => r.denominator)).toEqual(scan(start, most, b));
    }
  });

  it("reach 10^9 in two to eight dimensions, each better than the one before", () => {
    for (const d of [2, 3, 8]) {
      const start = [2, 3, 5, 7, 11, 13, 17, 19].slice(0, d).map((n) => exactFromText(`sqrt(${n})`));
      const { records, searchedTo } = bestApproximations(start, 1e9, 1n);
      expect(searchedTo).toBe(1e9);
      // Dirichlet: some q <= Q has every |q x_j - p_j| at most Q^(-1/d).
      const last = records.at(-1)!;
      const off = last.distance.low.mul(Rational.of(last.denominator)).toNumber();
      expect(off).toBeLessThan(Math.sqrt(d) * 1e9 ** (-1 / d));
      for (const [i, r] of records.slice(1).entries()) {
        const value = (a: typeof r, end: "low" | "high") => a.distance[end].mul(Rational.of(a.denominator));
        expect(value(r, "high").compare(value(records[i]!, "low"))).toBe(-1);
      }
    }
  });

  it("report a number that cannot be told from a fraction", () => {
    const pretender = { ...exactFromText("pi - 3"), toFixed: (n: number) => (1n << BigInt(n)) / 2n };
    const { unresolved } = bestApproximations([pretender, exactFromText("0")], 3, 1n);
    expect(unresolved).toEqual([2]);
  });
});

describe("distances", () => {
  it("are enclosed, narrowly", () => {
    const D = Decimal.clone({ precision: 80 });
    const start = [exactFromText("sqrt(2) - 3"), exactFromText("sqrt(3)/10")];
    const value = [new D(2).sqrt().sub(3), new D(3).sqrt().div(10)];
    for (const q of [1, 2, 17, 985, 123456]) {
      const numerators = nearestNumerators(start, q);
      const { low, high } = torusDistance(start, numerators, q)!;
      const parts = value.map((x, j) => {
        const off = x.sub(new D(numerators[j]).div(q));
        const turned = off.sub(off.round());
        return turned.mul(turned);
      });
      const exact = parts[0].add(parts[1]).sqrt();
      const decimal = (r: Rational) => new D(r.num.toString()).div(r.den.toString());
      expect(decimal(low).lte(exact)).toBe(true);
      expect(decimal(high).gte(exact)).toBe(true);
      expect(decimal(high).sub(decimal(low)).div(exact).lt("1e-17")).toBe(true);
    }
  });

  it("know when a start is the point", () => {
    const start = [exactFromText("7/3"), exactFromText("-1/2")];
    expect(isPoint(start, [2, 3], 6)).toBe(true);
    expect(isPoint(start, [2, 2], 6)).toBe(false);
    expect(isPoint([exactFromText("pi")], [0], 1)).toBe(false);
  });
});

describe("Liouville's inequality", () => {
  it("holds for every fraction tried", () => {
    const numbers = [
      exactFromText("sqrt(2)"),
      exactFromText("-cbrt(5) * 7"),
      exactFromText("sqrt(2) + cbrt(3)"),
      readExact({ polynomial: ["-1", "1", "0", "1"], between: ["0", "1"] }),
    ];
    for (const x of numbers) {
      const { degree, bound } = liouville(x);
      for (let q = 1n; q <= 400n; q++) {
        const scaled = x.toFixed(200) * q;
        const p = (scaled + (1n << 199n)) >> 200n;
        const off = scaled - (p << 200n);
        // |x - p/q| >= 1 / (M q^n), with one unit of 2^-200 for the fixed-point value.
        const distance = (off < 0n ? -off : off) + q;
        expect(distance * bound * q ** BigInt(degree) >= q << 200n).toBe(true);
      }
    }
    expect(() => liouville(exactFromText("1/2"))).toThrow("liouville: 1/2 is rational");
  });
});
