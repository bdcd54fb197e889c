/**
 * Kinds of orbits. Two orbits are of one kind where some bijection between them carries
 * each move to itself: then the averaged operators on them are one matrix, renumbered.
 */
import type { FinitePoints } from "../kernel/finite.js";
import type { Session } from "../session.js";

export interface Kind {
  readonly size: number;
  count: number;
  /** Index of the smallest point of the first orbit of the kind. */
  readonly representative: number;
  /** size x moves, the first orbit's own numbering. */
  readonly table: Uint32Array<ArrayBuffer>;
  /** Exact denominators of the points in the kind's orbits. */
  readonly denominators: Set<number>;
}

/** Comparisons a point's image, over the whole search for bijections. */
const EFFORT = 400;

function gcd(a: number, b: number): number {
  while (b !== 0) [a, b] = [b, a % b];
  return a;
}

/**
 * Sorted by size, largest first, then by representative. The search for bijections is
 * bounded: past the bound (`complete` is false) an orbit is given a row of its own
 * rather than compared further.
 */
export function sortOrbits(
  points: FinitePoints,
  session: Session,
  moves: number,
): { kinds: Kind[]; complete: boolean } {
  let budget = EFFORT * points.points * moves + 1e6;
  let complete = true;
  let seen = 0;
  const q = points.modulus;
  const bySize = new Map<number, number[]>();
  for (let o = 0; o < points.count; o++) {
    const size = points.sizeOf(o);
    const same = bySize.get(size);
    if (same === undefined) bySize.set(size, [o]);
    else same.push(o);
  }
  const exact = (index: number) => q / points.coordinates(index).reduce(gcd, q);
  const kinds: Kind[] = [];
  for (const [size, orbits] of [...bySize].sort((a, b) => b[0] - a[0])) {
    // One kind after another takes its orbits out of those that are left.
    for (let left = orbits; left.length > 0; ) {
      session.checkStop();
      const [first, ...others] = left as [number, ...number[]];
      const table = points.tableOf(first);
      const kind: Kind = {
        size,
        count: 1,
        representative: points.pointsOf(first)[0] as number,
        table,
        denominators: new Set(),
      };
      kinds.push(kind);
      const members = [first];
      left = others;
      if (others.length > 0 && budget > 0) {
        const match = points.matcher(table);
        left = others.filter((o) => {
          const { same, spent } = match(o, Math.max(0, budget));
          budget -= spent;
          if (same === undefined) complete = false;
          else if (same) members.push(o);
          return same !== true;
        });
      } else if (others.length > 0) complete = false;
      kind.count = members.length;
      for (const o of members) for (const p of points.pointsOf(o)) kind.denominators.add(exact(p));
      seen += members.length;
      session.progress("sorting orbits", seen, points.count);
    }
  }
  return { kinds, complete };
}

/**
 * The period of the walk on an orbit: the greatest common divisor of all return times. The
 * averaged operator has modulus-one eigenvalues exactly at the period's roots of unity
 * (Perron and Frobenius), since the walk reaches every point of an orbit.
 */
export function periodOf(table: Uint32Array, moves: number): number {
  const size = table.length / moves;
  const level = new Int32Array(size).fill(-1);
  level[0] = 0;
  // Points are numbered breadth first, so a point's level is known when its row comes.
  let period = 0;
  for (let i = 0; i < size; i++) {
    for (let m = 0; m < moves; m++) {
      const j = table[i * moves + m] as number;
      const next = (level[i] as number) + 1;
      if (level[j] === -1) level[j] = next;
      else period = gcd(period, Math.abs(next - (level[j] as number)));
    }
  }
  return period;
}
