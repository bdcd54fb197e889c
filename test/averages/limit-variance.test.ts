/** Limit variances in dimension 2, proved: against enumeration and closed forms. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { exactAverages } from "../../src/averages/exact.js";
import { sampleAverages } from "../../src/averages/sampled.js";
import { type Quantity, quantityNumber } from "../../src/quantity/quantity.js";
import { withSession } from "../../src/session.js";
import type { Observable, Term, Walk } from "../../src/walk/walk.js";
import { move, number, r, walkOf } from "../dual/naive.js";

const term = (frequency: number[], cos: number, sin = 0): Term => ({
  frequency: frequency.map(BigInt),
  cos: number(cos),
  sin: number(sin),
});
const terms = (...list: Term[]): Observable => ({ type: "terms", label: "f", terms: list });
const budget = {
  entries: 2 ** 18,
  products: 6e5,
  last: 100,
  states: 200,
  normStates: 1,
  poisson: 1000,
  boxTerms: 60,
  points: 100,
};
const find = async (walk: Walk, generating: readonly number[] = []) => {
  const { findings } = await withSession({ effort: "quick", workers: 0 }, (session) =>
    exactAverages(walk, session, budget, generating),
  );
  return findings[0]!;
};
const ends = (q: Quantity) => {
  expect(q.standing).toBe("enclosed");
  return { low: Number(q.low), high: Number(q.high) };
};

/** Products of few elementary matrices, up to sign and swap: determinant 1 or -1, mixed signs. */
const matrix = fc
  .tuple(
    fc.array(fc.tuple(fc.boolean(), fc.integer({ min: -2, max: 2 })), { minLength: 2, maxLength: 3 }),
    fc.boolean(),
    fc.boolean(),
  )
  .map(([steps, swap, negative]) => {
    let [a, b, c, d] = [1, 0, 0, 1];
    for (const [upper, q] of steps) {
      if (upper) [b, d] = [b + q * a, d + q * c];
      else [a, c] = [a + q * b, c + q * d];
    }
    if (swap) [a, b, c, d] = [b, a, d, c];
    const s = negative ? -1 : 1;
    return {
      rows: [
        [s * a, s * b],
        [s * c, s * d],
      ] as number[][],
      determinant: (swap ? -1 : 1) as 1 | -1,
    };
  });
const sets = fc.sample(fc.array(matrix, { minLength: 3, maxLength: 3 }), { numRuns: 40, seed: 20 });

describe("the limit variance by Green's function", () => {
  it("contains what correlations add up to, for ten random sets of moves", async () => {
    let proved = 0;
    for (const [i, set] of sets.entries()) {
      if (proved === 10) break;
      const weights = [r(1, 2), r(1, 3), r(1, 6)];
      const moves = set.map((m, j) => move(m.rows, weights[j]!, m.determinant));
      const f = terms(term([1, 0], 1, i % 2), term([1, 1], -1), term([0, 1], 0, 1));
      const { variance, correlations } = await find(walkOf(moves, { type: "uniform" }, [f]));
      // Sets of few directions leave nothing to prove; most do not.
      if (variance!.standing !== "enclosed" || correlations.length < 12) continue;
      proved++;
      const { low, high } = ends(variance!);
      expect(high - low).toBeLessThan(1e-10);
      const c = correlations.map(quantityNumber);
      const partial = (last: number) => c.slice(1, last + 1).reduce((s, x) => s + 2 * x, c[0]!);
      const off = (last: number) => Math.abs(partial(last) - low);
      const last = c.length - 1;
      const settled = Math.max(...[0, 1, 2, 3].map((n) => off(n)));
      expect(Math.max(off(last), off(last - 1))).toBeLessThan(Math.max(1e-9, 0.5 * settled));
    }
    expect(proved).toBe(10);
  });

  it("is what exact walks show, within their own interval, for ten random walks", async () => {
    let compared = 0;
    for (const [i, set] of sets.slice(15).entries()) {
      if (compared === 10) break;
      const moves = set.map((m) => move(m.rows, r(1, 3), m.determinant));
      const f = terms(term([1, i % 3], 2, 1), term([i % 2, 1], -1, 1));
      const walk = walkOf(moves, { type: "uniform" }, [f]);
      const { variance, notes } = await find(walk);
      if (variance!.standing !== "enclosed" || notes.length > 0) continue;
      compared++;
      const plan = { steps: 500, replicates: 400, means: [0], variances: [undefined] };
      const sampled = await withSession({ effort: "quick", workers: 0, level: 0.9999, seed: i }, (session) =>
        sampleAverages(walk, session, plan),
      );
      // n Var differs from its limit by a term of order 1 / n: two per cent of room.
      const { low, high } = sampled[0]!.variance;
      expect(quantityNumber(variance!)).toBeGreaterThan(Number(low) * 0.98);
      expect(quantityNumber(variance!)).toBeLessThan(Number(high) * 1.02);
    }
    expect(compared).toBe(10);
  });

  it("with translations, is what enumeration gives up to the tail that is left", async () => {
    const moves = [
      move(
        [
          [1, 2],
          [0, 1],
        ],
        r(1, 4),
        1,
        [r(1, 3), r(1, 7)],
      ),
      move(
        [
          [1, 0],
          [2, 1],
        ],
        r(1, 4),
        1,
        [r(2, 5), r(0)],
      ),
      move(
        [
          [2, 1],
          [1, 1],
        ],
        r(1, 4),
      ),
      move(
        [
          [0, 1],
          [1, 1],
        ],
        r(1, 4),
        -1,
        [r(0), r(1, 2)],
      ),
    ];
    const f = terms(term([1, 0], 1), term([0, 1], 0, 1), term([1, 1], -2));
    const { variance, correlations } = await find(walkOf(moves, { type: "uniform" }, [f]));
    const { low, high } = ends(variance!);
    const c = correlations.map(quantityNumber);
    expect(high - low).toBeLessThan(0.2 * c[0]!);
    const all = c.slice(1).reduce((s, x) => s + 2 * x, c[0]!);
    expect(all).toBeGreaterThan(low);
    expect(all).toBeLessThan(high);
    // Fewer terms, wider, and around the narrower one: the same number is meant.
    const few = await withSession({ effort: "quick", workers: 0 }, (session) =>
      exactAverages(walkOf(moves, { type: "uniform" }, [f]), session, { ...budget, products: 3e3 }),
    );
    const wide = ends(few.findings[0]!.variance!);
    expect(wide.low).toBeLessThan(low);
    expect(wide.high).toBeGreaterThan(high);
  });

  it("of f = g - P g is |g|^2 - |P g|^2, with translations too (Gordin 1969)", async () => {
    // g = cos(2 pi x_1). Under x -> A_i x + b_i with (1, 0) A = (2, 1), (3, 1) and first shifts 1/4, 1/2:
    // P g = (cos(2 pi (2 x_1 + x_2 + 1/4)) + cos(2 pi (3 x_1 + x_2 + 1/2))) / 2
    //     = (-sin(2 pi (2, 1).x) - cos(2 pi (3, 1).x)) / 2, so that the variance is 1/2 - 1/4.
    const moves = [
      move(
        [
          [2, 1],
          [1, 1],
        ],
        r(1, 2),
        1,
        [r(1, 4), r(1, 3)],
      ),
      move(
        [
          [3, 1],
          [2, 1],
        ],
        r(1, 2),
        1,
        [r(1, 2), r(2, 7)],
      ),
    ];
    const f = terms(
      term([1, 0], 1),
      { ...term([2, 1], 0), sin: number(1, 2) },
      { ...term([3, 1], 0), cos: number(1, 2) },
    );
    const { variance, degenerate } = await find(walkOf(moves, { type: "uniform" }, [f]));
    const { low, high } = ends(variance!);
    expect(low).toBeLessThanOrEqual(0.25);
    expect(high).toBeGreaterThanOrEqual(0.25);
    expect(high - low).toBeLessThan(1e-10);
    expect(degenerate.verdict).toBe("fails");
  });
});

describe("the generating function of correlations", () => {
  it("is enclosed by Green's function, around what the terms add up to", async () => {
    const moves = [
      move(
        [
          [1, 2],
          [0, 1],
        ],
        r(1, 4),
      ),
      move(
        [
          [1, -2],
          [0, 1],
        ],
        r(1, 4),
      ),
      move(
        [
          [1, 0],
          [2, 1],
        ],
        r(1, 4),
      ),
      move(
        [
          [1, 0],
          [-2, 1],
        ],
        r(1, 4),
      ),
    ];
    const f = terms(term([1, 0], 1));
    const { generating, correlations } = await find(walkOf(moves, { type: "uniform" }, [f]), [0.25, 0.5, 1]);
    const c = correlations.map(quantityNumber);
    for (const { z, value } of generating!) {
      const { low, high } = ends(value);
      expect(high - low).toBeLessThan(1e-10);
      // First returns: F = z / 4 + 3 z / 4 F^2 across a tree edge, G = 1 / (1 - z / 2 - z F / 2); <f, P^n f> is half of that.
      const F = (1 - Math.sqrt(1 - (3 * z * z) / 4)) / ((3 * z) / 2);
      const exact = 0.5 / (1 - z / 2 - (z / 2) * F);
      expect(low).toBeLessThanOrEqual(exact + 1e-14);
      expect(high).toBeGreaterThanOrEqual(exact - 1e-14);
      if (z < 1) expect(Math.abs(c.reduce((s, x, n) => s + x * z ** n, 0) - exact)).toBeLessThan(z ** c.length);
    }
  });
  it("is bounded term by term where there are translations", async () => {
    const moves = [
      move(
        [
          [1, 2],
          [0, 1],
        ],
        r(1, 2),
        1,
        [r(1, 3), r(0)],
      ),
      move(
        [
          [1, 0],
          [-3, 1],
        ],
        r(1, 2),
        1,
        [r(0), r(1, 5)],
      ),
    ];
    const { generating, correlations } = await find(
      walkOf(moves, { type: "uniform" }, [terms(term([1, 0], 1))]),
      [0.5],
    );
    const { low, high } = ends(generating![0]!.value);
    const c = correlations.map(quantityNumber);
    const sum = c.reduce((s, x, n) => s + x * 0.5 ** n, 0);
    expect(low).toBeLessThanOrEqual(sum);
    expect(high).toBeGreaterThanOrEqual(sum);
    expect(high - low).toBeLessThan(4 * 0.5 ** c.length);
  });
});
