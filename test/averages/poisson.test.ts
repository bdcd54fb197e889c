/** The Poisson equation on a finite set of frequencies, where the variance is known. */
import { describe, expect, it } from "vitest";
import { poissonFit } from "../../src/averages/poisson.js";
import { isSelfAdjoint } from "../../src/dual/adjoint.js";
import { adjointMoves, forwardMoves } from "../../src/dual/moves.js";
import type { Move } from "../../src/walk/walk.js";
import { move, r, walkOf } from "../dual/naive.js";

const solved = (moves: Move[], terms: { k: number[]; re: number; im?: number }[], entries: number) => {
  const walk = walkOf(moves);
  const backward = isSelfAdjoint(walk) ? {} : { backward: adjointMoves(walk) };
  const list = terms.map(({ k, re, im = 0 }) => ({ frequency: k.map(BigInt), re, im }));
  return poissonFit({ forward: forwardMoves(walk), ...backward, terms: list, entries });
};

describe("poissonFit", () => {
  it("comes near 5/2 for cos(2 pi x_1) and the free walk of test/outside, the nearer the more frequencies", async () => {
    const free = [
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
    ].map((m) => move(m, r(1, 4)));
    const errors: number[] = [];
    for (const entries of [50, 500, 5000]) {
      const found = await solved(free, [{ k: [1, 0], re: 0.5 }], entries);
      errors.push(Math.abs(found.variance - 2.5));
      // |G| = 1 / (1 - sqrt(3) / 2): the stated bound of second order, and the plain one of first order.
      const g = 1 / (1 - Math.sqrt(3) / 2);
      expect(errors.at(-1)!).toBeLessThan(2 * found.residual * found.adjointResidual * g);
      expect(Math.abs(Math.sqrt(found.byNorms) - Math.sqrt(2.5))).toBeLessThan(found.residual * Math.sqrt(2 * g - 1));
      expect(found.frequencies).toBe(entries);
    }
    expect(errors[1]!).toBeLessThan(errors[0]! / 2);
    expect(errors[2]!).toBeLessThan(errors[1]! / 2);
    expect(errors[2]!).toBeLessThan(0.02);
  });

  it("finds g itself where f = g - P g, in dimension 3 with translations", async () => {
    const moves = [
      move(
        [
          [2, 1, 0],
          [1, 1, 0],
          [0, 1, 1],
        ],
        r(1, 2),
        1,
        [r(1, 4), r(0), r(1, 3)],
      ),
      move(
        [
          [1, 0, 1],
          [0, 1, 0],
          [1, 0, 2],
        ],
        r(1, 2),
        1,
        [r(1, 2), r(1, 5), r(0)],
      ),
    ];
    // g = cos(2 pi x_1), 1/2 at (1, 0, 0): images at (2, 1, 0) turned by a quarter, at (1, 0, 1) by a half.
    const terms = [
      { k: [1, 0, 0], re: 0.5 },
      { k: [2, 1, 0], re: 0, im: -0.25 },
      { k: [1, 0, 1], re: 0.25 },
    ];
    const found = await solved(moves, terms, 400);
    expect(found.residual).toBeLessThan(1e-9);
    expect(found.byNorms).toBeCloseTo(0.25, 9);
    expect(found.variance).toBeCloseTo(0.25, 9);
  });

  it("agrees with enumerated correlations where P is not its own adjoint, in dimension 3", async () => {
    const moves = [
      move(
        [
          [0, 1, 0],
          [0, 0, 1],
          [1, 0, 1],
        ],
        r(1, 2),
        1,
      ),
      move(
        [
          [1, 0, 0],
          [-1, 1, 0],
          [0, -2, 1],
        ],
        r(1, 2),
        1,
      ),
    ];
    const few = await solved(
      moves,
      [
        { k: [1, 0, 0], re: 0.5 },
        { k: [0, 1, 1], re: 0, im: 0.5 },
      ],
      200,
    );
    const more = await solved(
      moves,
      [
        { k: [1, 0, 0], re: 0.5 },
        { k: [0, 1, 1], re: 0, im: 0.5 },
      ],
      20_000,
    );
    expect(more.residual).toBeLessThan(few.residual);
    expect(Math.abs(more.variance - few.variance)).toBeLessThan(10 * few.residual * few.adjointResidual);
  });
});
