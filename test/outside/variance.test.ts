/** Variances in closed form, derived here, against the enclosure by Green's function. */
import { describe, expect, it } from "vitest";
import { planarTerms } from "../../src/averages/modular.js";
import { polynomialOf } from "../../src/dual/polynomial.js";
import { PlanarSums } from "../../src/modular/variance.js";
import { parseWalk } from "../../src/walk/parse.js";

function walkOf(moves: readonly (readonly (readonly number[])[])[], observables: unknown) {
  return parseWalk({
    torwend: 1,
    title: "variance check",
    dimension: 2,
    moves: moves.map((matrix) => ({ matrix })),
    observables,
  });
}

function enclosed(walk: ReturnType<typeof walkOf>) {
  const planar = new PlanarSums(walk.moves);
  return walk.observables.map((o) => {
    if (o.type !== "terms") throw new Error("a box has no finite list of terms");
    const found = planar.variance(planarTerms(polynomialOf(o.terms)));
    if (found === undefined) throw new Error("no enclosure");
    return found;
  });
}

describe("symmetric walk on the free group of [[1,2],[0,1]], [[1,0],[2,1]]", () => {
  // The pair is free (Sanov 1947). The dual walk of (1, 0) up to sign lives on the cosets of
  // the cyclic group of one generator a: a vertex with a loop (a and its inverse), from which
  // two trees hang. First returns across a tree edge: F = (4 - sqrt(16 - 12)) / 6 = 1/3 at z = 1
  // (F = 1/4 + 3/4 F^2, Kesten 1959). Returns to the vertex: G = 1 / (1 - 1/2 - 2/4 F) = 3,
  // so sigma^2 = (2 G - 1) / 2 = 5/2.
  const moves = [
    [
      [1, 2],
      [0, 1],
    ],
    [
      [1, -2],
      [0, 1],
    ],
    [
      [1, 0],
      [2, 1],
    ],
    [
      [1, 0],
      [-2, 1],
    ],
  ];
  it("cos(2 pi x_1) has variance 5/2, to 1e-10", () => {
    const f = 1 / 3;
    const g = 1 / (1 - 1 / 2 - (2 / 4) * f);
    expect((2 * g - 1) / 2).toBeCloseTo(2.5, 14);
    const [v] = enclosed(walkOf(moves, [{ label: "f", terms: [{ frequency: [1, 0], cos: "1" }] }]));
    expect(v!.low).toBeLessThanOrEqual(2.5);
    expect(v!.high).toBeGreaterThanOrEqual(2.5);
    expect(v!.high - v!.low).toBeLessThan(1e-10);
  });
  it("cos(2 pi (x_1 + x_2)) and a sine: a tree vertex without a loop, and a sign", () => {
    // (1, 1) is fixed up to sign by a conjugate of b^-1 a: a coset graph with a cycle of length 2
    // through the vertex, every other edge a tree. From the vertex: two of four steps enter the
    // cycle, two a tree. At the other vertex of the cycle likewise, so with x the chance of
    // coming back from it: x = (1/2) + (2/4) F x (two of its edges lead back).
    const f = 1 / 3;
    const x = 1 / 2 / (1 - (2 / 4) * f);
    const g = 1 / (1 - (2 / 4) * f - (1 / 2) * x);
    const list = enclosed(
      walkOf(moves, [
        { label: "diagonal", terms: [{ frequency: [1, 1], cos: "1" }] },
        // a fixes (1, 0) without turning it, and no element takes it to (-1, 0): the sine is like the cosine.
        { label: "sine", terms: [{ frequency: [1, 0], sin: "1" }] },
      ]),
    );
    for (const [i, value] of [(2 * g - 1) / 2, 2.5].entries()) {
      expect(list[i]!.low).toBeLessThanOrEqual(value + 1e-13);
      expect(list[i]!.high).toBeGreaterThanOrEqual(value - 1e-13);
      expect(list[i]!.high - list[i]!.low).toBeLessThan(1e-10);
    }
  });
});

describe("symmetric walk on a = [[1,2],[0,1]], c = [[5,2],[2,1]] and inverses", () => {
  // c = a b with b = [[1,0],[2,1]]: free generators of the same group. a b^-1 = a c^-1 a takes (1, -1) to
  // (-1, 1) transposed, so that up to sign this frequency's coset graph is a cycle of length 3, each vertex
  // with two trees. F = 1/3 across a tree edge as above; with G_0 the visits at the start, G_1 at the others,
  // (1 - 1/6) G_0 - 1/2 G_1 = 1 and (1 - 1/6) G_1 - 1/4 (G_0 + G_1) = 0.
  const moves = [
    [
      [1, 2],
      [0, 1],
    ],
    [
      [1, -2],
      [0, 1],
    ],
    [
      [5, 2],
      [2, 1],
    ],
    [
      [1, -2],
      [-2, 5],
    ],
  ];
  it("cos(2 pi (x_1 - x_2)): a cycle of length 3; cos(2 pi x_2): a loop, as above", () => {
    const g1 = (g0: number) => g0 / 4 / (1 - 1 / 6 - 1 / 4);
    const g0 = 1 / (1 - 1 / 6 - g1(1) / 2);
    const list = enclosed(
      walkOf(moves, [
        { label: "cycle", terms: [{ frequency: [1, -1], cos: "1" }] },
        { label: "loop", terms: [{ frequency: [0, 1], cos: "1" }] },
      ]),
    );
    for (const [i, value] of [(2 * g0 - 1) / 2, 2.5].entries()) {
      expect(list[i]!.low).toBeLessThanOrEqual(value + 1e-13);
      expect(list[i]!.high).toBeGreaterThanOrEqual(value - 1e-13);
      expect(list[i]!.high - list[i]!.low).toBeLessThan(1e-10);
    }
  });
});

describe("f = g - P g for a positive pair", () => {
  it("has variance |g|^2 - |P g|^2 exactly (Gordin 1969)", () => {
    // g = cos(2 pi x_1): P g = (cos(2 pi (2,1).x) + cos(2 pi (3,1).x)) / 2, so 1/2 - 1/4.
    const moves = [
      [
        [2, 1],
        [1, 1],
      ],
      [
        [3, 1],
        [2, 1],
      ],
    ];
    const terms = [
      { frequency: [1, 0], cos: "1" },
      { frequency: [2, 1], cos: "-1/2" },
      { frequency: [3, 1], cos: "-1/2" },
    ];
    const [v] = enclosed(walkOf(moves, [{ label: "f", terms }]));
    expect(v!.low).toBeLessThanOrEqual(0.25);
    expect(v!.high).toBeGreaterThanOrEqual(0.25);
    expect(v!.high - v!.low).toBeLessThan(1e-11);
  });
});
