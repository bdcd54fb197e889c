/**
 * Proved bounds of a box's limit variance in dimension 2 without translations. f = s + r, s
 * the largest terms of its Fourier series: |sigma(f) - sigma(s)| <= sigma(r), and
 * sigma(r)^2 <= |r|^2 (1 + 2 sum over n >= 1 of |P^n|) <= |r|^2 (1 + |P|) / (1 - |P|).
 */

import { Rational } from "../exact/rational.js";
import { PlanarSums, type PlanarTerm, squareNorm } from "../modular/variance.js";
import { type Interval, minus, over, plus, point, root, times } from "../quantity/interval.js";
import type { ModularMove } from "./modular.js";

export interface BracketPayload {
  readonly moves: readonly ModularMove[];
  readonly states: number;
  readonly terms: readonly PlanarTerm[];
  /** <f, f> of the centred indicator. */
  readonly norm: Interval;
  /** A proved bound of |P| on functions of mean 0, below 1. */
  readonly contraction: number;
}

export function boxBracket({ moves, states, terms, norm, contraction }: BracketPayload): Interval | undefined {
  const list = moves.map(({ matrix, num, den }) => ({ matrix, probability: Rational.of(num, den) }));
  const smooth = new PlanarSums(list, 1, states).variance(terms);
  if (smooth === undefined) return undefined;
  const rest = Math.max(0, minus(norm, squareNorm(terms)).high);
  const factor = over(plus(point(1), point(contraction)), minus(point(1), point(contraction)));
  const width = root(times(point(rest), factor)).high;
  const sigma = root(smooth);
  const low = Math.max(0, minus(point(sigma.low), point(width)).low);
  const high = plus(point(sigma.high), point(width)).high;
  return { low: Math.max(0, times(point(low), point(low)).low), high: times(point(high), point(high)).high };
}
