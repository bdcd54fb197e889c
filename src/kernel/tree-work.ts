/**
 * The time that a tree walk takes, foretold from its spans: for a truthful remaining time,
 * also in the long stretch before the first position.
 */
import { keepsTransforms, type Span } from "./tree-memory.js";

/** Seconds of each piece of work. */
export interface TreeCosts {
  buildLeaf(): number;
  walkLeaf(): number;
  multiply(span: Span): number;
  /** @param built whether the span's own product has been formed, its parts kept */
  apply(span: Span, built: boolean): number;
}

/**
 * Seconds of one transform, by length and its logarithm, and of a leaf's moves, by entries:
 * measured, with the digits of a start (src/trajectory/paths.ts), in one walk of ten million
 * moves. Only their ratios matter.
 */
const TRANSFORM = 0.85e-9;
const BUILD_MOVE = 2.3e-9;
const WALK_MOVE = 1.5e-9;

/** @param length of a span's transforms */
export function workCosts(
  d: number,
  inputs: number,
  leafMoves: number,
  keep: number,
  length: (span: Span) => number,
): TreeCosts {
  const transforms = (span: Span, count: number) => {
    const n = length(span);
    return TRANSFORM * count * n * (32 - Math.clz32(n));
  };
  return {
    buildLeaf: () => BUILD_MOVE * leafMoves * d * inputs,
    walkLeaf: () => WALK_MOVE * leafMoves * d * inputs,
    multiply: (span) => transforms(span, 2 * d * inputs + d * d),
    apply: (span, built) => transforms(span, inputs + d + (built && keepsTransforms(span, keep) ? 0 : d * inputs)),
  };
}

/** What a walk costs whose positions are wanted from leaf `firstLeaf` on. */
export function treeWork(root: Span, firstLeaf: number, costs: TreeCosts): number {
  const built = (span: Span): number => {
    if (span.halves === undefined) return costs.buildLeaf();
    const [left, right] = span.halves;
    return built(left) + built(right) + costs.multiply(span);
  };
  const walked = (span: Span, formed: boolean): number => {
    if (span.halves === undefined) return costs.walkLeaf();
    const [left, right] = span.halves;
    return (
      (formed ? 0 : built(left)) +
      costs.apply(span, formed) +
      (left.to > firstLeaf ? walked(left, true) : 0) +
      walked(right, formed)
    );
  };
  return walked(root, false);
}
