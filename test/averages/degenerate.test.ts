import { describe, expect, it } from "vitest";
import { degeneracyOf, differencesOf } from "../../src/averages/degenerate.js";
import { polynomialOf } from "../../src/dual/polynomial.js";
import type { ExactNumber } from "../../src/exact/number.js";
import type { Move, Term } from "../../src/walk/walk.js";
import { move, number, r, walkOf } from "../dual/naive.js";

const half = r(1, 2);
const t = (k: number[], cos: number | ExactNumber, sin: number | ExactNumber = 0): Term => ({
  frequency: k.map(BigInt),
  cos: typeof cos === "number" ? number(cos) : cos,
  sin: typeof sin === "number" ? number(sin) : sin,
});
const verdict = (moves: Move[], terms: Term[]) => {
  const walk = walkOf(moves);
  return degeneracyOf(walk, polynomialOf(terms), differencesOf(walk));
};

// Equal first rows: cos(2 pi x_1) after either move is the same function.
const sameRow = [
  move(
    [
      [2, 1],
      [1, 1],
    ],
    half,
  ),
  move(
    [
      [2, 1],
      [3, 2],
    ],
    half,
  ),
];
const shifted = (b: [number, number]) => [
  move(
    [
      [2, 1],
      [1, 1],
    ],
    half,
    1,
    [r(1, 4), r(0)],
  ),
  move(
    [
      [2, 1],
      [3, 2],
    ],
    half,
    1,
    [r(...b), r(1, 3)],
  ),
];
const root2: ExactNumber = {
  text: "sqrt(2)",
  kind: "algebraic",
  toFixed: (b) => BigInt(Math.round(Math.SQRT2 * 2 ** 50)) << BigInt(b - 50),
  toNumber: () => Math.SQRT2,
};

describe("variance 0", () => {
  it("is recognised, with g, where f = g - g after a move and g does not tell the moves apart", () => {
    const { verdict: v, g } = verdict(sameRow, [t([1, 0], 2), t([2, 1], -2)]);
    expect(v.verdict).toBe("holds");
    expect(g!.harmonics.map((h) => [h.frequency, h.cos.rational!.toString()])).toEqual([[[1n, 0n], "2"]]);
    expect(
      verdict(sameRow, [t([1, 0], root2), t([2, 0], 1), t([2, 1], { ...root2, text: "r" })]).verdict.verdict,
    ).not.toBe("holds");
  });
  it("with several multiples on the line, and sines", () => {
    expect(
      verdict(sameRow, [t([1, 0], 0, 1), t([2, 1], 0, -1), t([-3, 0], 5, 2), t([6, 3], -5, 2)]).verdict.verdict,
    ).toBe("holds");
    expect(verdict(sameRow, [t([1, 0], 0, 1), t([2, 1], 0, 1)]).verdict.verdict).toBe("fails");
  });
  it("follows phases of translations that are quarter turns", () => {
    // cos(2 pi (2 x_1 + x_2 + 1/4)) = -sin(2 pi (2 x_1 + x_2)).
    expect(verdict(shifted([1, 4]), [t([1, 0], 1), t([2, 1], 0, 1)]).verdict.verdict).toBe("holds");
    expect(verdict(shifted([1, 4]), [t([1, 0], 1), t([2, 1], 0, -1)]).verdict.verdict).toBe("fails");
    expect(verdict(shifted([3, 4]), [t([1, 0], 1), t([2, 1], 0, 1)]).verdict.verdict).toBe("fails");
    expect(verdict(shifted([1, 5]), [t([1, 0], 1), t([2, 1], 0, 1)]).verdict.verdict).toBe("undecided");
  });
  it("in dimension 3 by the sufficient condition alone", () => {
    const moves = [
      move(
        [
          [1, 1, 0],
          [1, 2, 1],
          [0, 0, 1],
        ],
        half,
      ),
      move(
        [
          [1, 1, 0],
          [0, 0, 1],
          [1, 2, 1],
        ],
        half,
        -1,
      ),
    ];
    expect(verdict(moves, [t([1, 0, 0], 1), t([1, 1, 0], -1)]).verdict.verdict).toBe("holds");
    expect(verdict(moves, [t([1, 0, 0], 1)]).verdict.verdict).toBe("undecided");
  });
  it("for a single move, along its orbits", () => {
    const cat = [
      move(
        [
          [2, 1],
          [1, 1],
        ],
        r(1),
      ),
    ];
    // g = e_(1,0) + its image; f = g - g after the move is the first less the second image.
    expect(verdict(cat, [t([1, 0], 1), t([5, 3], -1)]).verdict.verdict).toBe("holds");
    expect(verdict(cat, [t([1, 0], 1), t([2, 1], -1), t([13, 8], 3), t([34, 21], -3)]).verdict.verdict).toBe("holds");
    expect(verdict(cat, [t([1, 0], 1)]).verdict.verdict).toBe("undecided");
  });
});

describe("differences of finite order", () => {
  // u = [[0, -1], [1, 0]] and v^-1 u with v = [[0, 1], [-1, -1]]: u (v^-1 u)^-1 = v has order 3, and both
  // moves have finite orbits on frequencies, so that neither alone determines g.
  const turns = [
    move(
      [
        [0, -1],
        [1, 0],
      ],
      half,
    ),
    move(
      [
        [-1, 1],
        [0, -1],
      ],
      half,
    ),
  ];
  it("are decided along a hyperbolic product of moves", () => {
    expect(differencesOf(walkOf(turns))).toMatchObject({
      moves: { type: "strongly irreducible" },
      group: { type: "finite" },
    });
    // g = cos(2 pi x_1) + cos(2 pi x_2) + cos(2 pi (x_1 + x_2)) is kept by v; after u it has (0, -1), (1, 0), (1, -1).
    const { verdict: answer, g } = verdict(turns, [t([1, 1], 1), t([1, -1], -1)]);
    expect(answer.verdict).toBe("holds");
    expect(g!.harmonics.map((h) => h.frequency.map(Number)).sort()).toEqual([
      [0, 1],
      [1, 0],
      [1, 1],
    ]);
  });
  it("leave other observables a variance above 0", () => {
    expect(verdict(turns, [t([1, 1], 1)]).verdict.verdict).toBe("fails");
    expect(verdict(turns, [t([1, 1], 1), t([1, -1], -2)]).verdict.verdict).toBe("fails");
    expect(verdict(turns, [t([1, 1], root2), t([1, -1], 0, 1)]).verdict.verdict).toBe("fails");
  });
});

describe("variance above 0", () => {
  it("for every observable but constants where the differences have no finite orbit", () => {
    const free = [
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
    expect(differencesOf(walkOf(free))!.group.type).toBe("strongly irreducible");
    expect(verdict(free, [t([1, 0], 1)]).verdict.verdict).toBe("fails");
    expect(verdict(free, [t([0, 0], 1)]).verdict.verdict).toBe("holds");
  });
  it("where the one line of frequencies leaves no g", () => {
    const pair = [
      move(
        [
          [2, 1],
          [1, 1],
        ],
        half,
      ),
      move(
        [
          [3, 1],
          [2, 1],
        ],
        half,
      ),
    ];
    expect(differencesOf(walkOf(pair))!.group).toMatchObject({ type: "rational line" });
    expect(verdict(pair, [t([1, 0], 1)]).verdict.verdict).toBe("fails");
    expect(verdict(pair, [t([1, 0], root2)]).verdict.verdict).toBe("fails");
  });
});
