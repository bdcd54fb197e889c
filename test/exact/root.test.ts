import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { compareExact } from "../../src/exact/compare.js";
import { exactRational } from "../../src/exact/number.js";
import {
  bitsBelowRoots,
  countRealRoots,
  isSquareFree,
  multiplyPolynomials,
  type Polynomial,
  polynomialText,
  shifted,
  signAt,
  squareFreePart,
} from "../../src/exact/polynomial.js";
import { Rational } from "../../src/exact/rational.js";
import { exactFromText, readExact } from "../../src/exact/read.js";

const product = (factors: readonly Polynomial[]) => factors.reduce(multiplyPolynomials, [1n]);

describe("Sturm's count", () => {
  it("counts the distinct roots of products of known factors, ends included", () => {
    const roots = fc.array(fc.tuple(fc.integer({ min: -12, max: 12 }), fc.integer({ min: 1, max: 4 })), {
      maxLength: 6,
    });
    const half = fc.integer({ min: -30, max: 30 }).map((n) => Rational.of(n, 2));
    fc.assert(
      fc.property(roots, fc.nat(2), half, half, fc.boolean(), (pairs, complex, a, b, negative) => {
        const [low, high] = a.compare(b) <= 0 ? [a, b] : [b, a];
        const linear = pairs.map(([p, q]) => [BigInt(-p), BigInt(q)]);
        // x^2 + x + 1 has no real root.
        const f = product([...linear, ...Array.from({ length: complex }, () => [1n, 1n, 1n]), [negative ? -3n : 1n]]);
        const inside = pairs
          .map(([p, q]) => Rational.of(p, q))
          .filter((x) => x.compare(low) >= 0 && x.compare(high) <= 0);
        expect(countRealRoots(f, low, high)).toBe(new Set(inside.map(String)).size);
      }),
    );
  });

  it("takes multiple factors out, and knows when there are none", () => {
    const f: Polynomial = [-2n, 0n, 1n];
    const g: Polynomial = [1n, 3n];
    expect(squareFreePart(product([f, f, f, g, g]))).toEqual(product([f, g]));
    expect(isSquareFree(product([f, g]))).toBe(true);
    expect(isSquareFree(product([f, f, g]))).toBe(false);
  });

  it("shifts, bounds roots away from 0, and writes polynomials", () => {
    expect(shifted([-2n, 0n, 1n], 3n)).toEqual([7n, 6n, 1n]);
    // 1000 x - 1 has its root above 2^-11.
    expect(bitsBelowRoots([-1n, 1000n])).toBeLessThanOrEqual(11);
    expect(bitsBelowRoots([-1n, 1000n])).toBeGreaterThanOrEqual(10);
    expect(polynomialText([-2n, 0n, 1n, -1n])).toBe("-x^3 + x^2 - 2");
    expect(polynomialText([Rational.of(1, 2), Rational.of(-3)])).toBe("-3 x + 1/2");
  });
});

describe("roots of polynomials", () => {
  it.each([
    [["-2", "0", "0", "1"], ["1", "2"], "cbrt(2)"],
    [["-1", "-1", "1"], ["0", "5"], "(1+sqrt(5))/2"],
    [["-1", "-1", "1"], ["-1", "0"], "(1-sqrt(5))/2"],
    [["1", "0", "-10", "0", "1"], ["0.3", "0.4"], "sqrt(3)-sqrt(2)"],
    [["4", "0", "-4", "0", "1"], ["-100", "0"], "-sqrt(2)"],
    [["-1/3", "0", "1/6"], ["1", "3/2"], "sqrt(2)"],
  ] as [string[], [string, string], string][])("%j in %j is %s", (polynomial, between, text) => {
    const [x, y] = [readExact({ polynomial, between }), exactFromText(text)];
    expect(x.kind).toBe("algebraic");
    for (const bits of [0, 1, 10, 1000, 100, 3000]) {
      const off = x.toFixed(bits) - y.toFixed(bits);
      expect(off * off <= 4n, `${bits} bits`).toBe(true);
    }
    expect(compareExact(x, y)).toBe(0);
    expect(Math.abs(x.toNumber() / y.toNumber() - 1)).toBeLessThan(5e-16);
  });

  it.each([
    [["-6", "3"], ["0", "5"], "2"],
    [["1/4", "-1", "1"], ["0", "1"], "1/2"],
    [["-1", "0", "1"], ["1", "2"], "1"],
    [["-1", "0", "1"], ["0", "1"], "1"],
    [["-1", "0", "1"], ["1", "1"], "1"],
    [["0", "0", "1"], ["-1", "1"], "0"],
    [["-2", "1", "-2", "1"], ["-100", "100"], "2"],
    [["-355", "113", "0", "-355", "113"], ["2", "4"], "355/113"],
  ] as [string[], [string, string], string][])("%j in %j is the rational %s", (polynomial, between, value) => {
    const x = readExact({ polynomial, between });
    expect([x.kind, x.rational?.toString()]).toEqual(["rational", value]);
  });

  it.each([
    [{ polynomial: ["-2", "0", "1"], between: ["-2", "2"] }, "x^2 - 2 has 2 real roots from -2 to 2", ""],
    [{ polynomial: ["2", "0", "1"], between: ["-2", "2"] }, "x^2 + 2 has no real root from -2 to 2", ""],
    [{ polynomial: ["1", "0"], between: ["0", "1"] }, "a constant polynomial", "/polynomial"],
    [{ polynomial: ["-2", "0", "1"], between: ["2", "1"] }, "the empty interval from 2 to 1", "/between"],
    [{ polynomial: ["sqrt(2)", "1"], between: ["0", "1"] }, "an irrational number", "/polynomial/0"],
    [{ polynomial: ["2", "1"], between: ["0", "pi"] }, "a number that is not proved to be rational", "/between/1"],
    [{ polynomial: ["2", "1+"], between: ["0", "1"] }, "at character 3: the text ends", "/polynomial/1"],
  ])("refuses %j", (written, message, path) => {
    expect(() => readExact(written)).toThrow(
      expect.objectContaining({ message: expect.stringContaining(message), path }),
    );
  });

  it("encloses the root of random polynomials", () => {
    const coefficient = fc.integer({ min: -50, max: 50 });
    let found = 0;
    fc.assert(
      fc.property(fc.array(coefficient, { minLength: 2, maxLength: 9 }), fc.integer({ min: -8, max: 8 }), (c, from) => {
        const f = c.map(BigInt);
        while (f.length > 0 && f[f.length - 1] === 0n) f.pop();
        fc.pre(f.length > 1);
        const [low, high] = [Rational.of(from, 2), Rational.of(from + 1, 2)];
        fc.pre(countRealRoots(f, low, high) === 1);
        const x = readExact({ polynomial: f.map(String), between: [low.toString(), high.toString()] });
        const base = squareFreePart(f);
        if (x.rational !== undefined) {
          expect(signAt(base, x.rational)).toBe(0);
          return;
        }
        const bits = 300;
        const m = x.toFixed(bits);
        const signs = [m - 1n, m + 1n].map((a) => signAt(base, Rational.of(a, 1n << BigInt(bits))));
        expect(signs[0] * signs[1]).toBe(-1);
        found++;
      }),
      { numRuns: 500 },
    );
    expect(found).toBeGreaterThan(20);
  });
});

describe("exact comparison", () => {
  it("orders rationals, roots and constants", () => {
    const ordered = ["-2", "-sqrt(3)", "0", "1/3", "sqrt(2)-1", "cbrt(2)", "sqrt(2)", "e", "3", "pi"].map(
      exactFromText,
    );
    ordered.forEach((x, i) => {
      ordered.forEach((y, j) => {
        if (i !== j || x.kind !== "unproved") expect(compareExact(x, y)).toBe(Math.sign(i - j));
      });
    });
  });

  it("proves the equality of different forms, and the difference of near ones", () => {
    const x = exactFromText("sqrt(2)+sqrt(3)");
    expect(compareExact(x, exactFromText("sqrt(5+2*sqrt(6))"))).toBe(0);
    const tiny = exactFromText("sqrt(2)+sqrt(3)+2^-900");
    expect(compareExact(x, tiny)).toBe(-1);
    expect(compareExact(exactFromText("pi"), exactFromText("pi+1-1"))).toBeUndefined();
    expect(compareExact(exactRational(Rational.of(1, 3)), exactFromText("0.333333333333333333333"))).toBe(1);
  });
});
