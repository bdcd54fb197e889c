/**
 * The walk in double precision, as a program that trusts doubles would run it, and its
 * distance from the exact one.
 */

import { Rational } from "../exact/rational.js";
import type { Walk } from "../walk/walk.js";
import { decimalValue } from "./numbers.js";

function fraction(x: number): number {
  const f = x - Math.floor(x);
  // A tiny negative number less its floor rounds up to 1.
  return f < 1 ? f : 0;
}

/**
 * Moves 0 to choices.length of the walk from `start`, in plain double arithmetic: row by
 * row, products summed from the left, the translation added last, then the fraction taken.
 */
export function doubleWalk(walk: Walk, start: readonly number[], choices: ArrayLike<number>): number[][] {
  const moves = walk.moves.map((m) => ({
    matrix: m.matrix.map((row) => row.map(Number)),
    translation: m.translation?.map((b) => b.toNumber()),
  }));
  let x = start.map(fraction);
  const points = [x];
  for (let n = 0; n < choices.length; n++) {
    const move = moves[choices[n] as number];
    if (move === undefined) throw new RangeError(`doubleWalk: move ${choices[n]} of ${moves.length}`);
    x = move.matrix.map((row, i) => {
      let sum = 0;
      for (let j = 0; j < row.length; j++) sum += (row[j] as number) * (x[j] as number);
      return fraction(sum + (move.translation?.[i] ?? 0));
    });
    points.push(x);
  }
  return points;
}

/** Largest difference of coordinates on the torus between an exact point (decimals) and a double one. */
export function torusDistance(exact: readonly string[], double: readonly number[]): number {
  let largest = 0;
  exact.forEach((text, i) => {
    const x = decimalValue(text);
    if (x === undefined) throw new RangeError(`torusDistance: ${text} is not a decimal`);
    const gap = x.sub(Rational.fromNumber(double[i] as number)).mod1();
    const back = Rational.ONE.sub(gap);
    largest = Math.max(largest, (gap.compare(back) < 0 ? gap : back).toNumber());
  });
  return largest;
}
