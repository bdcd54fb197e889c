/**
 * Trajectories against decimal.js, a general-purpose arbitrary-precision library with its
 * own square root, and rational starts against brute force in plain integers.
 */
import { Decimal } from "decimal.js";
import { describe, expect, it } from "vitest";
import { trajectory } from "../../src/trajectory/trajectory.js";
import { prepareWalker } from "../../src/trajectory/walker.js";
import { fraction, makeWalk, squareRoot } from "../trajectory/walks.js";

const moves = [
  [
    [2, 1, 0],
    [1, 1, 0],
    [0, 1, 1],
  ],
  [
    [0, 1, 3],
    [0, 0, 1],
    [1, 2, 0],
  ],
  [
    [1, 0, -2],
    [0, -1, 0],
    [0, 0, 1],
  ],
];
const radicands = [2, 3, 5];
const translation = [7, 0, 11];

/** Positions by decimal.js, with `digits` digits carried throughout. */
function decimalPath(choices: readonly number[], digits: number): Decimal[][] {
  const Big = Decimal.clone({ precision: digits, toExpNeg: -9e15, toExpPos: 9e15 });
  const part = (x: Decimal) => x.sub(x.floor());
  const shift = translation.map((n) => new Big(n).sqrt());
  const out = [radicands.map((n) => part(new Big(n).sqrt()))];
  for (const c of choices) {
    const x = out[out.length - 1]!;
    out.push(
      moves[c]!.map((row, i) => part(row.reduce((s, a, j) => s.add(x[j]!.mul(a)), c === 1 ? shift[i]! : new Big(0)))),
    );
  }
  return out;
}

describe("trajectories against decimal.js", () => {
  it("agree in every digit shown, dimension 3, a determinant of -1, translations", async () => {
    const choices = Array.from({ length: 700 }, (_, i) => ((i * i * i) >> 3) % 3);
    const walk = makeWalk(
      moves.map((rows, i) => ({
        matrix: rows.map((row) => row.map(BigInt)),
        ...(i === 1 ? { translation: translation.map((n) => (n === 0 ? fraction(0) : squareRoot(BigInt(n)))) } : {}),
      })),
      radicands.map((n) => squareRoot(BigInt(n))),
    );
    for (const digits of [15, 60]) {
      const { positions, bitsConsumed } = await trajectory(walk, {
        choices,
        digits,
        at: [0, 1, 10, 99, 100, 350, 700],
      });
      // Digits consumed, those shown, and thirty for the roundings of 700 moves.
      const want = decimalPath(choices, Math.ceil(0.7 * bitsConsumed) + digits + 30);
      for (const { step, point } of positions) {
        for (const [j, text] of point.entries()) {
          const gap = new Decimal(0).add(want[step]![j]!.sub(text)).abs();
          expect(gap.lte(new Decimal(10).pow(-digits).mul(0.500001))).toBe(true);
        }
      }
    }
  });
});

const pair = [
  [
    [2, 1],
    [1, 1],
  ],
  [
    [3, 1],
    [2, 1],
  ],
];
const integral = (rows: readonly (readonly number[])[]) => rows.map((row) => row.map(BigInt));

describe("rational starts", () => {
  it("0 stays; (1/2, 0) runs through the three points of order 2 under one move", async () => {
    const both = pair.map((rows) => ({ matrix: integral(rows) }));
    const zero = makeWalk(both, [fraction(0), fraction(0)]);
    for (const { fractions } of (await trajectory(zero, { steps: 50 })).positions)
      expect(fractions).toEqual(["0", "0"]);
    // (2 x + y, x + y) of (1/2, 0) is (1, 1/2), of (0, 1/2) is (1/2, 1/2), of that (3/2, 1).
    const half = makeWalk([{ matrix: integral(pair[0]!) }], [fraction(1, 2), fraction(0)]);
    expect((await trajectory(half, { steps: 3 })).positions.map((p) => p.fractions)).toEqual([
      ["1/2", "0"],
      ["0", "1/2"],
      ["1/2", "1/2"],
      ["1/2", "0"],
    ]);
    // A fixed point of [[2,1],[1,1]] with the translation (1/3, 1/3): (I - A) x = b has x = (-1/3, 0).
    const fixed = makeWalk(
      [{ matrix: integral(pair[0]!), translation: [fraction(1, 3), fraction(1, 3)] }],
      [fraction(2, 3), fraction(0)],
    );
    const { positions } = await trajectory(fixed, { steps: 9 });
    for (const { fractions } of positions) expect(fractions).toEqual(["2/3", "0"]);
  });

  it("every denominator up to 60 against integers modulo it, in positions to the last bit", async () => {
    const steps = 60;
    for (let q = 1; q <= 60; q++) {
      for (const [a, b] of [
        [1, 0],
        [q - 1, 1],
        [Math.floor(q / 2), Math.floor(q / 3)],
      ] as const) {
        const walk = makeWalk(
          [{ matrix: integral(pair[0]!) }, { matrix: integral(pair[1]!), translation: [fraction(1, q), fraction(0)] }],
          [fraction(a, q), fraction(b, q)],
        );
        const { positions, choices } = (await prepareWalker(walk, { seed: BigInt(q), steps })).run(0);
        let [x, y] = [a % q, b % q];
        for (let k = 0; ; k++) {
          expect(positions[2 * k]).toBe((BigInt(x) << 64n) / BigInt(q));
          expect(positions[2 * k + 1]).toBe((BigInt(y) << 64n) / BigInt(q));
          if (k === steps) break;
          [x, y] = choices[k] === 0 ? [(2 * x + y) % q, (x + y) % q] : [(3 * x + y + 1) % q, (2 * x + y) % q];
        }
      }
    }
  });
});
