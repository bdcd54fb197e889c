/** Walks made for tests, and the naive exact walk that kernels are compared with. */
import type { ExactNumber } from "../../src/exact/number.js";
import { exactRational } from "../../src/exact/number.js";
import { floorDiv, Rational } from "../../src/exact/rational.js";
import { parseWalk } from "../../src/walk/parse.js";
import type { Walk } from "../../src/walk/walk.js";

export type Matrix = readonly (readonly bigint[])[];

/** A small generator of its own (splitmix64), so that failures can be replayed. */
export class Dice {
  constructor(private state: bigint) {}
  word(): bigint {
    this.state = BigInt.asUintN(64, this.state + 0x9e3779b97f4a7c15n);
    let z = this.state;
    z = BigInt.asUintN(64, (z ^ (z >> 30n)) * 0xbf58476d1ce4e5b9n);
    z = BigInt.asUintN(64, (z ^ (z >> 27n)) * 0x94d049bb133111ebn);
    return z ^ (z >> 31n);
  }
  below(n: number): number {
    return Number(this.word() % BigInt(n));
  }
}

/** The square root of a positive integer that is not a square. */
export function squareRoot(n: bigint): ExactNumber {
  const toFixed = (bits: number) => {
    const target = n << BigInt(2 * bits);
    let x = 1n << BigInt(Math.ceil(target.toString(2).length / 2));
    for (let y = x; ; x = y) {
      y = (x + target / x) >> 1n;
      if (y >= x) return x;
    }
  };
  return {
    text: `sqrt(${n})`,
    kind: "algebraic",
    polynomial: [-n, 0n, 1n],
    toFixed,
    toNumber: () => Math.sqrt(Number(n)),
  };
}

export function fraction(num: number | bigint, den: number | bigint = 1): ExactNumber {
  return exactRational(Rational.of(num, den));
}

type Point = readonly ExactNumber[];

/** A walk with equal weights, through its document. */
export function makeWalk(
  moves: readonly { readonly matrix: Matrix; readonly translation?: Point }[],
  start: Point | "uniform" | "density",
): Walk {
  const dimension = moves[0]!.matrix.length;
  const named = {
    uniform: { uniform: true },
    density: { density: [{ frequency: new Array(dimension).fill(0), cos: "1" }] },
  };
  const texts = (point: Point) => point.map((x) => x.text);
  return parseWalk({
    torwend: 1,
    title: "made for a test",
    dimension,
    moves: moves.map(({ matrix, translation }, i) => ({
      label: `m${i}`,
      matrix,
      ...(translation === undefined ? {} : { translation: texts(translation) }),
    })),
    start: typeof start === "string" ? named[start] : texts(start),
  });
}

/** A product of elementary matrices with factors up to `size`, determinant 1 or -1. */
export function randomUnimodular(dice: Dice, d: number, size: bigint, factors: number): { matrix: Matrix } {
  const m = Array.from({ length: d }, (_, i) => Array.from({ length: d }, (_, j): bigint => (i === j ? 1n : 0n)));
  for (let f = 0; f < factors; f++) {
    const i = dice.below(d);
    const j = (i + 1 + dice.below(d - 1)) % d;
    const c = (dice.word() % (2n * size + 1n)) - size;
    for (let k = 0; k < d; k++) m[i]![k]! += c * m[j]![k]!;
  }
  if (dice.below(2) === 1) m[0] = m[0]!.map((x) => -x);
  return { matrix: m };
}

/** Positions 0, ..., n as integers over 2^bits, within a whole walk's error of about |product| n 2^-bits. */
export function naiveWalk(walk: Walk, start: readonly bigint[], choices: ArrayLike<number>, bits: number): bigint[][] {
  const wrap = (x: bigint) => BigInt.asUintN(bits, x);
  const translations = walk.moves.map((m) => m.translation?.map((x) => wrap(x.toFixed(bits))));
  const out = [start.map(wrap)];
  for (let k = 0; k < choices.length; k++) {
    const x = out[k]!;
    const move = walk.moves[choices[k]!]!;
    const b = translations[choices[k]!];
    out.push(move.matrix.map((row, i) => wrap(row.reduce((s, a, j) => s + a * x[j]!, b?.[i] ?? 0n))));
  }
  return out;
}

/** Exact walk of fractions. */
export function rationalPath(walk: Walk, choices: ArrayLike<number>): Rational[][] {
  if (walk.start.type !== "point") throw new Error("a point is wanted");
  const out = [walk.start.point.map((x) => x.rational!.mod1())];
  for (let k = 0; k < choices.length; k++) {
    const x = out[k]!;
    const move = walk.moves[choices[k]!]!;
    out.push(
      move.matrix.map((row, i) =>
        row
          .reduce((s, a, j) => s.add(Rational.of(a).mul(x[j]!)), move.translation?.[i]?.rational ?? Rational.ZERO)
          .mod1(),
      ),
    );
  }
  return out;
}

/** Distance on the circle of two integers modulo 2^64. */
export function apart(a: bigint, b: bigint): bigint {
  const d = BigInt.asUintN(64, a - b);
  return d < 1n << 63n ? d : (1n << 64n) - d;
}

/** floor(2^64 x / 2^bits). */
export function top64(x: bigint, bits: number): bigint {
  return floorDiv(x, 1n << BigInt(bits - 64));
}
