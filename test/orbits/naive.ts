/** Orbits and averages of (Z/q)^d the plain way, for comparison. */
import type { Walk } from "../../src/walk/walk.js";

/** Images of each point under each move, by BigInt. */
export function naiveTable(walk: Walk, q: number): number[][] {
  const d = walk.dimension;
  const n = BigInt(q);
  return Array.from({ length: q ** d }, (_, index) => {
    const x = Array.from({ length: d }, (_, i) => BigInt(Math.floor(index / q ** (d - 1 - i)) % q));
    return walk.moves.map(({ matrix, translation }) => {
      let image = 0;
      for (const [i, row] of matrix.entries()) {
        const b = translation?.[i]?.rational;
        let y = b === undefined ? 0n : (b.num * n) / b.den;
        for (let j = 0; j < d; j++) y += row[j]! * x[j]!;
        image = image * q + Number(((y % n) + n) % n);
      }
      return image;
    });
  });
}

/** Orbits by merging classes: each a sorted list of points. */
export function naiveOrbits(table: readonly (readonly number[])[]): number[][] {
  const parent = table.map((_, i) => i);
  const root = (i: number): number => (parent[i] === i ? i : (parent[i] = root(parent[i]!)));
  for (const [i, images] of table.entries()) for (const j of images) parent[root(i)] = root(j);
  const classes = new Map<number, number[]>();
  for (let i = 0; i < table.length; i++) classes.set(root(i), [...(classes.get(root(i)) ?? []), i]);
  return [...classes.values()];
}
