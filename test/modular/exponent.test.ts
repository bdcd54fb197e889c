/** The enclosure of the top exponent against what must be the same number: inverses, transposes, other bases, squares. */
import { describe, expect, it } from "vitest";
import { Rational } from "../../src/exact/rational.js";
import { exactLogNorms } from "../../src/growth/products.js";
import { loadReal } from "../../src/kernel/real.js";
import { encloseExponent } from "../../src/modular/exponent.js";
import { determinant2, inverse2, type Matrix2, multiply2 } from "../../src/modular/words.js";
import type { Interval } from "../../src/quantity/interval.js";
import { parseWalk } from "../../src/walk/parse.js";

const real = await loadReal();

interface Walk {
  readonly matrices: readonly Matrix2[];
  readonly weights: readonly Rational[];
}

function enclose({ matrices, weights }: Walk): Interval {
  const found = encloseExponent(matrices, weights, real);
  if (found === undefined) throw new Error("no enclosure");
  return found;
}

function expectSame(a: Interval, b: Interval, factor = 1): void {
  expect(a.low * factor).toBeLessThanOrEqual(b.high);
  expect(a.high * factor).toBeGreaterThanOrEqual(b.low);
}

const map = ({ matrices, weights }: Walk, change: (m: Matrix2) => Matrix2): Walk => ({
  matrices: matrices.map(change),
  weights,
});
const transposed = ([a, b, c, d]: Matrix2): Matrix2 => [a, c, b, d];

/** Marsaglia's xorshift (2003), so that a failure repeats. */
function source(seed: number): (below: number) => number {
  let x = seed | 0 || 1;
  return (below) => {
    x ^= x << 13;
    x ^= x >>> 17;
    x ^= x << 5;
    return (x >>> 0) % below;
  };
}

/** Two or three products of elementary matrices, of determinants of both signs, with uneven weights. */
function randomWalk(seed: number): Walk {
  const next = source(seed);
  const matrices = Array.from({ length: 2 + next(2) }, (): Matrix2 => {
    let m: Matrix2 = next(2) === 0 ? [1n, 0n, 0n, 1n] : [0n, 1n, 1n, 0n];
    for (let i = 0; i < 3; i++) {
      const q = BigInt(next(5) - 2);
      m = multiply2(m, i % 2 === 0 ? [1n, q, 0n, 1n] : [1n, 0n, q, 1n]);
    }
    return m;
  });
  const shares = matrices.map(() => 1 + next(5));
  const total = shares.reduce((a, b) => a + b, 0);
  return { matrices, weights: shares.map((s) => Rational.of(BigInt(s), BigInt(total))) };
}

/** Walks whose group moves every finite set of directions, so that the exponent is positive. */
const seeds = [3, 4, 8, 11, 12, 14, 17, 19, 20];
const walks = seeds
  .map((seed) => [seed, randomWalk(seed)] as const)
  .filter(([, w]) => {
    const found = encloseExponent(w.matrices, w.weights, real, 1e9);
    return found !== undefined && found.low > 0.01;
  });

describe("the top exponent of random sets", () => {
  it("is enclosed for most of them, with determinants of both signs", () => {
    expect(walks.length).toBeGreaterThanOrEqual(6);
    const signs = new Set(walks.flatMap(([, w]) => w.matrices.map(determinant2)));
    expect([...signs].sort()).toEqual([-1n, 1n]);
  });
  it.each(walks)("is narrow, and the same for inverses, transposes and another basis (seed %i)", (_, walk) => {
    const found = enclose(walk);
    expect(found.high - found.low).toBeLessThan(1e-10);
    expectSame(found, enclose(map(walk, inverse2)));
    expectSame(found, enclose(map(walk, transposed)));
    const basis: Matrix2 = [2n, 1n, 1n, 1n];
    expectSame(found, enclose(map(walk, (m) => multiply2(multiply2(basis, m), inverse2(basis)))));
  });
  it("doubles for two moves at a time", () => {
    const walk = walks[0]![1];
    const pairs = walk.matrices.flatMap((a, i) =>
      walk.matrices.map((b, j) => ({ matrix: multiply2(a, b), weight: walk.weights[i]!.mul(walk.weights[j]!) })),
    );
    const two = { matrices: pairs.map((p) => p.matrix), weights: pairs.map((p) => p.weight) };
    expectSame(enclose(walk), enclose(two), 2);
  });
  it("takes lazy moves and moves up to sign", () => {
    const walk: Walk = {
      matrices: [
        [2n, 1n, 1n, 1n],
        [-3n, -1n, -2n, -1n],
      ],
      weights: [Rational.of(1n, 2n), Rational.of(1n, 2n)],
    };
    const lazy = {
      matrices: [...walk.matrices, [-1n, 0n, 0n, -1n] as const],
      weights: [1n, 1n, 2n].map((w) => Rational.of(w, 4n)),
    };
    expectSame(enclose(lazy), enclose(walk), 2);
  });
});

describe("what it does not lead to", () => {
  it("a recurrent walk, words that are too long, too much work", () => {
    const half = [Rational.of(1n, 2n), Rational.of(1n, 2n)];
    const shears: Matrix2[] = [
      [1n, 1n, 0n, 1n],
      [1n, -1n, 0n, 1n],
    ];
    expect(encloseExponent(shears, half, real)).toBeUndefined();
    const long: Matrix2[] = [
      [1n, 10n ** 9n, 0n, 1n],
      [1n, 0n, 1n, 1n],
    ];
    expect(encloseExponent(long, half, real)).toBeUndefined();
    const pair: Matrix2[] = [
      [2n, 1n, 1n, 1n],
      [1n, -1n, 0n, 1n],
    ];
    expect(encloseExponent(pair, half, real, 100)).toBeUndefined();
  });
});

describe("pairs with an elliptic product", () => {
  const elliptic: [Matrix2, Matrix2][] = [
    // Both are hyperbolic; their product has trace 1, hence order 6.
    [
      [5n, 3n, 3n, 2n],
      [-3n, -5n, 5n, 8n],
    ],
    [
      [5n, 3n, 3n, 2n],
      [3n, -1n, -5n, 2n],
    ],
  ];
  it.each(elliptic)("agree with exact products (pair %#)", async (a, b) => {
    const [p, , , q] = multiply2(a, b);
    expect(p + q).toBe(1n);
    const half = Rational.of(1n, 2n);
    const found = enclose({ matrices: [a, b], weights: [half, half] });
    expect(found.high - found.low).toBeLessThan(1e-10);
    const walk = parseWalk({
      torwend: 1,
      dimension: 2,
      moves: [a, b].map(([p, q, r, s]) => ({
        matrix: [
          [String(p), String(q)],
          [String(r), String(s)],
        ],
      })),
    });
    const steps = 2000;
    const logs = await exactLogNorms(walk, 5n, 200, [steps / 2, steps], real);
    const rates = logs.map(([early, late]) => (late! - early!) / (steps / 2));
    const mean = rates.reduce((x, y) => x + y, 0) / rates.length;
    const deviation = Math.sqrt(rates.reduce((x, y) => x + (y - mean) ** 2, 0) / (rates.length - 1) / rates.length);
    expect(Math.abs(mean - (found.low + found.high) / 2)).toBeLessThan(5 * deviation);
    expect(deviation).toBeLessThan(0.003);
  });
});
