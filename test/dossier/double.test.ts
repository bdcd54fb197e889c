import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { doubleWalk, torusDistance } from "../../src/dossier/double.js";
import { lowFrequencies, smallModuli } from "../../src/dossier/plan.js";
import { precisionOf } from "../../src/dossier/precision.js";
import type { GrowthResult } from "../../src/growth/result.js";
import { parseWalk } from "../../src/walk/parse.js";
import { fixture } from "./fixture.js";

const doubling = parseWalk({
  torwend: 1,
  title: "t",
  dimension: 2,
  moves: [
    {
      matrix: [
        [2, 1],
        [1, 1],
      ],
    },
    {
      matrix: [
        [1, 0],
        [0, -1],
      ],
      translation: ["1/4", "1/2"],
    },
  ],
  start: ["1/3", "1/8"],
});

describe("the walk in double precision", () => {
  it("is the plain recursion, exact on short dyadic points", () => {
    expect(doubleWalk(doubling, [0.5, 0.125], [0, 1, 1, 0])).toEqual([
      [0.5, 0.125],
      [0.125, 0.625],
      [0.375, 0.875],
      [0.625, 0.625],
      [0.875, 0.25],
    ]);
  });
  it("strays from an exact walk at 1/3, which no double holds", () => {
    const points = doubleWalk(doubling, [1 / 3, 1 / 3], new Array(80).fill(0));
    // The exact walk of (1/3, 1/3) under this move: (0, 2/3), (2/3, 2/3), (0, 1/3), (1/3, 1/3), ...
    const exact = ["0.33333333333333333333", "0.33333333333333333333"];
    expect(torusDistance(exact, points[4] as number[])).toBeLessThan(1e-13);
    expect(torusDistance(exact, points[4] as number[])).toBeGreaterThan(0);
    expect(torusDistance(exact, points[80] as number[])).toBeGreaterThan(1e-3);
  });
  it("keeps points in [0, 1)", () => {
    const unit = fc.double({ min: 0, max: 1, maxExcluded: true, noNaN: true });
    fc.assert(
      fc.property(unit, unit, fc.array(fc.integer({ min: 0, max: 1 })), (x, y, choices) => {
        for (const point of doubleWalk(doubling, [x, y], choices)) {
          expect(point.every((c) => c >= 0 && c < 1)).toBe(true);
        }
      }),
    );
  });
  it("names a move that is not there", () => {
    expect(() => doubleWalk(doubling, [0, 0], [2])).toThrow("move 2 of 2");
  });
});

describe("distance on the torus", () => {
  it("goes round, and sees differences below a double's own digits", () => {
    expect(torusDistance(["0.99"], [0.01])).toBeCloseTo(0.02, 15);
    expect(torusDistance(["0.50000000000000000001", "0.25"], [0.5, 0.25])).toBe(1e-20);
    expect(torusDistance(["0.5"], [0.5])).toBe(0);
  });
});

describe("what is asked", () => {
  it("starts with the frequency (1, 0, ..., 0)", () => {
    expect(lowFrequencies(3, "quick")).toEqual([
      [1, 0, 0],
      [0, 1, 0],
    ]);
    expect(lowFrequencies(2, "standard")).toEqual([
      [1, 0],
      [0, 1],
      [1, 1],
      [1, -1],
    ]);
  });
  it("takes moduli that the translations allow, the walk's own first", () => {
    // Translations over 4, start over 24.
    expect(smallModuli(doubling, "quick").moduli).toEqual([24, 4, 8, 12]);
    const document = doubling.document as { moves: object[] };
    const irrational = {
      ...document,
      moves: [
        {
          matrix: [
            [2, 1],
            [1, 1],
          ],
          translation: ["sqrt(2)", "0"],
        },
      ],
    };
    expect(smallModuli(parseWalk(irrational), "quick").moduli).toEqual([]);
    expect(smallModuli(parseWalk(irrational), "quick").skipped).toContain("translation");
    const high = { torwend: 1, title: "t", dimension: 8, moves: [{ matrix: identity(8) }] };
    expect(smallModuli(parseWalk(high), "quick").moduli).toEqual([2]);
  });
});

function identity(d: number): number[][] {
  return Array.from({ length: d }, (_, i) => Array.from({ length: d }, (_, j) => (i === j ? 1 : 0)));
}

describe("how long doubles last", () => {
  const growth = fixture().growth as GrowthResult;
  it("follows from the growth rate and its interval", () => {
    const found = precisionOf(growth);
    if (!("movesOfDouble" in found)) throw new Error("no answer");
    // 53 ln 2 / 1.1432, and the same at the interval's ends.
    expect(found.movesOfDouble.value).toBeCloseTo(32.1349, 3);
    expect(Number(found.movesOfDouble.low)).toBeCloseTo((53 * Math.LN2) / 1.1439, 9);
    expect(Number(found.movesOfDouble.high)).toBeCloseTo((53 * Math.LN2) / 1.1425, 9);
    expect(found.movesOfDouble.standing).toBe("estimated");
  });
  it("is not told where products may not grow", () => {
    const flat = {
      ...growth,
      exponents: [{ value: 0.001, standing: "estimated", low: "-0.001", high: "0.003", method: "m" } as const],
    };
    expect(precisionOf(flat)).toHaveProperty("skipped");
    expect(precisionOf({ stopped: "x" })).toHaveProperty("skipped");
  });
});
