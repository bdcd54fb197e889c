/** The search for traps against published continued fractions. */
import { describe, expect, it } from "vitest";
import { exactFromText } from "../../src/exact/read.js";
import { bestApproximations } from "../../src/start/approximations.js";

/**
 * Khinchin, Continued Fractions, theorems 16 and 17 (after Lagrange; from memory): the q at
 * which |q x - p| falls below all earlier values are the denominators of the convergents.
 * The other coordinate is 0, so that it adds nothing.
 */
function records(text: string, most: number): number[] {
  return bestApproximations([exactFromText(text), exactFromText("0")], most, 1n).records.map((r) => r.denominator);
}

function denominators(quotients: readonly number[], most: number): number[] {
  const out: number[] = [];
  let [before, now] = [0, 1];
  for (const a of quotients) {
    [before, now] = [now, a * now + before];
    if (now <= most) out.push(now);
  }
  return [1, ...out].filter((q, i, all) => i === 0 || q !== all[i - 1]);
}

describe("traps of one coordinate are convergents", () => {
  it("sqrt(2) = [1; 2, 2, 2, ...] (Bombelli 1572)", () => {
    expect(records("sqrt(2)", 1_000_000_000)).toEqual(denominators(new Array(30).fill(2), 1_000_000_000));
  });

  it("the golden ratio [1; 1, 1, ...]: Fibonacci numbers", () => {
    expect(records("(1+sqrt(5))/2", 1_000_000_000)).toEqual(denominators(new Array(60).fill(1), 1_000_000_000));
  });

  it("e = [2; 1, 2, 1, 1, 4, 1, 1, 6, ...] (Euler 1737)", () => {
    const quotients = Array.from({ length: 45 }, (_, i) => (i % 3 === 1 ? (2 * (i + 2)) / 3 : 1));
    expect(records("e", 1_000_000_000)).toEqual(denominators(quotients, 1_000_000_000));
  });

  it("pi: 1, 7, 106, 113, 33102, 33215, 66317, ... (OEIS A002486)", () => {
    expect(records("pi", 100_000)).toEqual([1, 7, 106, 113, 33102, 33215, 66317, 99532]);
  });
});
