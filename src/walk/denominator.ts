/** When a walk stays on finitely many points: where its start and its translations are rational. */
import { gcdBig } from "../exact/rational.js";
import type { Walk } from "./walk.js";

/** The least common denominator of all translations; undefined where one is not proved rational. */
export function translationDenominator(walk: Walk): bigint | undefined {
  let q = 1n;
  for (const x of walk.moves.flatMap((m) => m.translation ?? [])) {
    if (x.rational === undefined) return undefined;
    q *= x.rational.den / gcdBig(q, x.rational.den);
  }
  return q;
}

/**
 * The least common denominator of the start and of every translation; undefined where the
 * start is no point or a number is not proved rational.
 */
export function commonDenominator(walk: Walk): bigint | undefined {
  if (walk.start.type !== "point") return undefined;
  let q = 1n;
  for (const x of [...walk.start.point, ...walk.moves.flatMap((m) => m.translation ?? [])]) {
    if (x.rational === undefined) return undefined;
    q *= x.rational.den / gcdBig(q, x.rational.den);
  }
  return q;
}
