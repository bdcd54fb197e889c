/** Walks for tests of the sampled averages, made by hand. */
import { type ExactNumber, exactRational } from "../../src/exact/number.js";
import { Rational } from "../../src/exact/rational.js";
import type { Observable, Start, Walk } from "../../src/walk/walk.js";

export const fraction = (num: number | bigint, den: number | bigint = 1): ExactNumber =>
  exactRational(Rational.of(num, den));

export function wave(frequency: number[], cos: number, sin = 0): Observable {
  const terms = [{ frequency: frequency.map(BigInt), cos: fraction(cos), sin: fraction(sin) }];
  return { type: "terms", label: `wave ${frequency}`, terms };
}

export function box(low: [number, number][], high: [number, number][]): Observable {
  return { type: "box", label: "box", low: low.map((q) => fraction(...q)), high: high.map((q) => fraction(...q)) };
}

/** Equal weights; the matrices' determinants are 1. */
export function makeWalk(matrices: number[][][], start: Start, observables: Observable[]): Walk {
  const weight = Rational.of(1, matrices.length);
  return {
    title: "test",
    dimension: matrices[0]!.length,
    moves: matrices.map((m, i) => ({
      label: `move ${i}`,
      weight,
      probability: weight,
      matrix: m.map((row) => row.map(BigInt)),
      determinant: 1,
    })),
    start,
    observables,
    document: {},
  };
}

export const STROKES = [
  [
    [2, 1],
    [1, 1],
  ],
  [
    [3, 1],
    [2, 1],
  ],
];

/** Free generators and their inverses. */
export const FREE = [
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
