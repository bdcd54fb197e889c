/**
 * The arena that a tree walk takes at its worst moment, foretold from the spans' bounds:
 * what src/kernel/tree.ts allocates, in its order, without doing it.
 */

/** A node of the recursion over leaves [from, to). */
export interface Span {
  readonly from: number;
  readonly to: number;
  /** Bits of the point at its first move. */
  readonly need: number;
  /** Bits of its product's row-sum norm. */
  readonly size: number;
  readonly halves?: readonly [Span, Span];
}

/** Bytes of what a span takes. */
export interface SpanCosts {
  /** Its right half's point. */
  point(span: Span): number;
  /** Its product's entries. */
  entries(span: Span): number;
  /** The transforms of its left half's entries. */
  transforms(span: Span): number;
  /** The work space in which its product is formed. */
  multiply(span: Span): number;
  /** The work space in which its left half's product is applied. */
  apply(span: Span): number;
}

/** Whether a span's product is formed with transforms that are kept (else the left half's entries are). */
export function keepsTransforms(span: Span, keep: number): boolean {
  return span.to - span.from <= keep;
}

/** @param keep leaves of the largest span whose transforms are kept */
export function treeMemory(root: Span, keep: number, costs: SpanCosts): number {
  const keptOf = new Map<Span, number>();
  const own = (span: Span, left: Span) => (keepsTransforms(span, keep) ? costs.transforms(span) : costs.entries(left));
  /** What stays of a formed product's parts. */
  const kept = (span: Span): number => {
    if (span.halves === undefined) return 0;
    let bytes = keptOf.get(span);
    if (bytes === undefined) {
      const [left, right] = span.halves;
      bytes = kept(left) + kept(right) + own(span, left);
      keptOf.set(span, bytes);
    }
    return bytes;
  };
  const build = (span: Span): number => {
    if (span.halves === undefined) return 0;
    const [left, right] = span.halves;
    const below = kept(left) + own(span, left);
    const again = keepsTransforms(span, keep) ? 0 : costs.transforms(span);
    return Math.max(build(left), below + build(right), below + kept(right) + again + costs.multiply(span));
  };
  const walk = (span: Span, built: boolean): number => {
    if (span.halves === undefined) return 0;
    const [left, right] = span.halves;
    const again = built && keepsTransforms(span, keep) ? 0 : costs.transforms(span);
    const below = built ? 0 : kept(left);
    return (
      costs.point(span) +
      Math.max(built ? 0 : build(left), below + again + costs.apply(span), below + walk(left, true), walk(right, built))
    );
  };
  return walk(root, false);
}
