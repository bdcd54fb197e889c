import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { evaluateHomogeneous } from "../../src/exact/polynomial.js";
import { exactFromText } from "../../src/exact/read.js";

describe("kinds", () => {
  it.each([
    ["sqrt(4)", "2"],
    ["sqrt(9/4)", "3/2"],
    ["sqrt(0)", "0"],
    ["sqrt(2)*sqrt(2)", "2"],
    ["(sqrt(2)+1)*(sqrt(2)-1)", "1"],
    ["sqrt(8)/sqrt(2)", "2"],
    ["sqrt(6)-sqrt(2)*sqrt(3)", "0"],
    ["sqrt(1/2)*sqrt(2)", "1"],
    ["cbrt(-8)", "-2"],
    ["cbrt(4)*cbrt(2)", "2"],
    ["cbrt(2)*cbrt(4)", "2"],
    ["cbrt(2+sqrt(5))+cbrt(2-sqrt(5))", "1"],
    ["cbrt(2+sqrt(5))-cbrt(sqrt(5)-2)", "1"],
    ["sqrt(3+2*sqrt(2))-sqrt(2)", "1"],
    ["sqrt(3+2*sqrt(2))-sqrt(3-2*sqrt(2))", "2"],
    ["1/(sqrt(2)-1)-sqrt(2)", "1"],
    ["(sqrt(6)-sqrt(2)*sqrt(3)+1)/(sqrt(6)-sqrt(2)*sqrt(3)+2)", "1/2"],
    ["sqrt(cbrt(8))^2/7", "2/7"],
    ["sqrt(2)+sqrt(3)-sqrt(5+2*sqrt(6))", "0"],
    ["sqrt(10)*sqrt(15)/sqrt(6)", "5"],
    ["cbrt(12)*cbrt(18)", "6"],
    // Ramanujan's identity, from memory.
    ["cbrt(cbrt(2)-1)-cbrt(1/9)+cbrt(2/9)-cbrt(4/9)", "0"],
    ["cbrt(5)*cbrt(7)/cbrt(35)", "1"],
    ["pi-pi", "0"],
    ["(e+1)/(e+1)", "1"],
    ["0*pi", "0"],
    ["pi^0", "1"],
    ["sqrt(5)^2 - 1/3", "14/3"],
  ])("%s is the rational %s", (text, value) => {
    const x = exactFromText(text);
    expect([x.kind, x.rational?.toString()]).toEqual(["rational", value]);
    expect(x.polynomial).toBeUndefined();
  });

  it.each([
    ["sqrt(2)-1", [-1n, 2n, 1n]],
    ["sqrt(3)/2", [-3n, 0n, 4n]],
    ["cbrt(2)", [-2n, 0n, 0n, 1n]],
    ["cbrt(1/4)*cbrt(16)", [-4n, 0n, 0n, 1n]],
    ["sqrt(2)+sqrt(3)", [1n, 0n, -10n, 0n, 1n]],
    ["1/(sqrt(2)+sqrt(3))", [1n, 0n, -10n, 0n, 1n]],
    ["sqrt(2)+sqrt(3)-sqrt(3)", [-2n, 0n, 1n]],
    ["(1+sqrt(5))/2", [-1n, -1n, 1n]],
  ])("%s is algebraic with its minimal polynomial", (text, polynomial) => {
    const x = exactFromText(text);
    expect([x.kind, x.rational, x.polynomial]).toEqual(["algebraic", undefined, polynomial]);
  });

  it.each(["pi", "e", "pi/4", "sqrt(pi)", "pi+e", "pi*sqrt(2)", "(pi+1)-pi", "2*pi-pi"])("%s is unproved", (text) => {
    const x = exactFromText(text);
    expect([x.kind, x.rational, x.polynomial]).toEqual(["unproved", undefined, undefined]);
  });

  it("is unproved beyond the limit on the tower, and still evaluates", () => {
    const primes = [2, 3, 5, 7, 11, 13, 17];
    const six = exactFromText(
      primes
        .slice(0, 6)
        .map((p) => `sqrt(${p})`)
        .join("+"),
    );
    const seven = exactFromText(primes.map((p) => `sqrt(${p})`).join("+"));
    expect([six.kind, six.polynomial?.length, seven.kind]).toEqual(["algebraic", 65, "unproved"]);
    expect(Math.abs(seven.toNumber() - six.toNumber() - Math.sqrt(17))).toBeLessThan(1e-14);
  });

  it("the polynomial of an algebraic number vanishes there", () => {
    const part = fc.tuple(
      fc.constantFrom("sqrt", "cbrt"),
      fc.integer({ min: 1, max: 20 }),
      fc.constantFrom("", "+sqrt(2)", "-sqrt(3)/9"),
    );
    const text = fc.tuple(part, fc.constantFrom("+", "*", "-", "/"), part).map(([[f, a, u], sign, [g, b, v]]) => {
      return `${f}(${a}${u})${sign}${g}(${b}${v})`;
    });
    let irrational = 0;
    fc.assert(
      fc.property(text, (t) => {
        const x = exactFromText(t);
        if (x.polynomial === undefined) return;
        irrational++;
        // A simple root within 2^-400 of the number: f changes sign between its two neighbours.
        const m = x.toFixed(402);
        const [low, high] = [m - 2n, m + 2n].map((a) => evaluateHomogeneous(x.polynomial!, a, 1n << 402n));
        expect(low < 0n !== high < 0n, t).toBe(true);
      }),
      { numRuns: 100 },
    );
    expect(irrational).toBeGreaterThan(50);
  });

  it("finds the rational value of every product of conjugates", () => {
    const small = fc.integer({ min: -9, max: 9 });
    fc.assert(
      fc.property(small, small, fc.integer({ min: 2, max: 30 }), (a, b, n) => {
        const x = exactFromText(`((${a})+(${b})*sqrt(${n}))*((${a})-(${b})*sqrt(${n}))`);
        expect(x.rational?.toString()).toBe(String(a * a - b * b * n));
      }),
    );
  });
});
