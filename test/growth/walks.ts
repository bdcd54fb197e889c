/** Walks for the tests of growth, from matrices and integer weights. */
import { cumulativeWeights } from "../../src/kernel/draws.js";
import { type GrowthTable, growthTable } from "../../src/kernel/growth.js";
import { parseWalk } from "../../src/walk/parse.js";
import type { Walk } from "../../src/walk/walk.js";

export type Numbers = readonly (readonly number[])[];

/** Determinant by expansion along the first row. */
export function determinant(m: readonly (readonly bigint[])[]): bigint {
  if (m.length === 1) return m[0]![0]!;
  return m[0]!.reduce((sum, x, j) => {
    const minor = m.slice(1).map((row) => row.filter((_, k) => k !== j));
    return sum + (j % 2 === 0 ? x : -x) * determinant(minor);
  }, 0n);
}

export function walkOf(matrices: readonly Numbers[], weights: readonly number[] = matrices.map(() => 1)): Walk {
  return parseWalk({
    torwend: 1,
    title: "a test",
    dimension: matrices[0]!.length,
    moves: matrices.map((matrix, i) => ({ weight: weights[i]!, matrix })),
  });
}

export function tableOf(walk: Walk): GrowthTable {
  return growthTable(
    walk.moves.map((m) => m.matrix),
    cumulativeWeights(walk.moves.map((m) => m.probability)),
  );
}

/** The unit matrix plus one at (i, j). */
export function shear(d: number, i: number, j: number): number[][] {
  return Array.from({ length: d }, (_, r) =>
    Array.from({ length: d }, (_, c) => (r === c || (r === i && c === j) ? 1 : 0)),
  );
}

export const RANDOM_FIBONACCI: readonly Numbers[] = [
  [
    [0, 1],
    [1, 1],
  ],
  [
    [0, 1],
    [1, -1],
  ],
];

export const POSITIVE_PAIR: readonly Numbers[] = [
  [
    [2, 1],
    [1, 1],
  ],
  [
    [3, 1],
    [2, 1],
  ],
];

/** Dimension 3, signs: sampled, whatever is proved of other sets. */
export const SIGNED: readonly Numbers[] = [
  [
    [0, 1, 0],
    [0, 0, 1],
    [1, 1, -1],
  ],
  [
    [1, -1, 0],
    [0, 1, 0],
    [1, 0, 1],
  ],
];
