/** Words, first passages and Green's function against plain enumeration of the dual walk. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { Rational } from "../../src/exact/rational.js";
import { chainOf } from "../../src/modular/chain.js";
import { Green } from "../../src/modular/green.js";
import { passage } from "../../src/modular/passage.js";
import { type Matrix2, multiply2, productOf, reduceWord, SWAP, wordOf } from "../../src/modular/words.js";

const shear = fc.tuple(fc.boolean(), fc.integer({ min: -3, max: 3 }), fc.boolean(), fc.boolean());
const unimodular = fc.array(shear, { minLength: 1, maxLength: 4 }).map((steps) => {
  let m: Matrix2 = [1n, 0n, 0n, 1n];
  for (const [upper, q, swap, negative] of steps) {
    m = multiply2(m, upper ? [1n, BigInt(q), 0n, 1n] : [1n, 0n, BigInt(q), 1n]);
    if (swap) m = multiply2(m, SWAP);
    if (negative) m = m.map((x) => -x) as unknown as Matrix2;
  }
  return m;
});

describe("wordOf", () => {
  it("gives a reduced word whose matrix is the one asked for, with its sign", () => {
    fc.assert(
      fc.property(unimodular, (m) => {
        const w = wordOf(m);
        expect(reduceWord(w.letters)).toEqual(w.letters);
        const p = w.swap ? multiply2(productOf(w.letters), SWAP) : productOf(w.letters);
        expect(p.map((x) => x * BigInt(w.sign))).toEqual(m);
      }),
    );
  });
  it("refuses a word that would be too long", () => {
    expect(() => wordOf([1n, 10n ** 9n, 0n, 1n])).toThrow(/too long/);
  });
});

/** Sums of P(k -> j) and P(k -> -j) over the first n moves. */
function enumerate(
  moves: readonly Matrix2[],
  weights: readonly number[],
  k: [bigint, bigint],
  j: [bigint, bigint],
  n: number,
) {
  let now = new Map<string, number>([[k.join(), 1]]);
  let same = 0;
  let opposite = 0;
  for (let step = 0; step <= n; step++) {
    same += now.get(j.join()) ?? 0;
    opposite += now.get(`${-j[0]},${-j[1]}`) ?? 0;
    const next = new Map<string, number>();
    for (const [key, w] of now) {
      const [x, y] = key.split(",").map(BigInt) as [bigint, bigint];
      for (const [i, m] of moves.entries()) {
        const to = `${m[0] * x + m[1] * y},${m[2] * x + m[3] * y}`;
        next.set(to, (next.get(to) ?? 0) + w * weights[i]!);
      }
    }
    now = next;
  }
  return { same, opposite };
}

const sets: { name: string; moves: Matrix2[]; weights: number[] }[] = [
  {
    name: "a swap among the moves",
    moves: [
      [2n, 1n, 1n, 1n],
      [0n, 1n, 1n, 0n],
      [1n, -1n, 0n, 1n],
    ],
    weights: [0.5, 0.25, 0.25],
  },
  {
    name: "two of determinant -1",
    moves: [
      [0n, 1n, 1n, 1n],
      [0n, 1n, 1n, -1n],
    ],
    weights: [0.5, 0.5],
  },
  {
    name: "a change of sign",
    moves: [
      [1n, 2n, 1n, 3n],
      [3n, 1n, -1n, 0n],
      [-1n, 0n, 0n, 1n],
    ],
    weights: [0.25, 0.25, 0.5],
  },
  {
    name: "the identity among the moves",
    moves: [
      [1n, 0n, 0n, 1n],
      [2n, 1n, 1n, 1n],
      [1n, 0n, -3n, 1n],
      [-1n, 1n, 0n, 1n],
    ],
    weights: [0.25, 0.25, 0.25, 0.25],
  },
  {
    name: "positive moves only",
    moves: [
      [2n, 1n, 1n, 1n],
      [3n, 2n, 1n, 1n],
    ],
    weights: [0.5, 0.5],
  },
];

describe("Green", () => {
  for (const { name, moves, weights } of sets) {
    it(`bounds what enumeration approaches from below: ${name}`, () => {
      const p = weights.map((w) => Rational.fromNumber(w));
      const plain = new Green(passage(moves, p)!);
      const signed = new Green(passage(moves, p, { signs: true })!);
      for (const [k, j] of [
        [
          [1n, 0n],
          [1n, 0n],
        ],
        [
          [1n, 0n],
          [1n, 1n],
        ],
        [
          [2n, 0n],
          [0n, 2n],
        ],
        [
          [1n, 2n],
          [-1n, 0n],
        ],
      ] as [[bigint, bigint], [bigint, bigint]][]) {
        const few = enumerate(moves, weights, k, j, 6);
        const more = enumerate(moves, weights, k, j, 9);
        const both = plain.visits(k, j)!;
        const same = signed.visits(k, j, 1)!;
        const opposite = signed.visits(k, j, -1)!;
        for (const b of [both, same, opposite]) expect(b.high - b.low).toBeLessThan(1e-10);
        expect(same.high).toBeGreaterThanOrEqual(more.same * (1 - 1e-12));
        expect(opposite.high).toBeGreaterThanOrEqual(more.opposite * (1 - 1e-12));
        expect(same.low + opposite.low).toBeLessThanOrEqual(both.high);
        expect(same.high + opposite.high).toBeGreaterThanOrEqual(both.low);
        // What is missing decays: three more moves leave less than half of the first gap and something.
        const gap = both.high - few.same - few.opposite;
        const left = both.high - more.same - more.opposite;
        expect(left).toBeLessThanOrEqual(gap + 1e-10);
        expect(left).toBeLessThan(0.85 * gap + 1e-9);
      }
    });
  }
  it("proves nothing of a recurrent walk", () => {
    const half = [Rational.of(1, 2), Rational.of(1, 2)];
    expect(
      passage(
        [
          [1n, 1n, 0n, 1n],
          [1n, -1n, 0n, 1n],
        ],
        half,
      ),
    ).toBeUndefined();
    // First passages are bounded here, visits are not.
    expect(passage([[0n, -1n, 1n, 0n]], [Rational.ONE])!.visits.contracts).toBe(false);
    expect(new Green(passage([[0n, -1n, 1n, 0n]], [Rational.ONE])!).visits([1n, 0n], [1n, 0n])).toBeUndefined();
  });
});

describe("chainOf", () => {
  it("refuses many long words before it has written them out", () => {
    const n = 300;
    const shears = Array.from(
      { length: n },
      (_, i): Matrix2 => (i % 2 ? [1n, BigInt(i), 0n, 1n] : [1n, 0n, BigInt(i), 1n]),
    );
    const pairs = shears.flatMap((a) => shears.map((b) => multiply2(a, b)));
    const share = Rational.of(1n, BigInt(pairs.length));
    const options = { signs: false, z: 1, mostStates: 100 };
    expect(
      chainOf(
        pairs,
        pairs.map(() => share),
        options,
      ),
    ).toBeUndefined();
  });
});
