/** Walks for tests of conditions: labels, equal weights, no start. */
import { parseWalk } from "../../src/walk/parse.js";
import type { Walk } from "../../src/walk/walk.js";

export type Small = readonly (readonly number[])[];

export function walkOf(matrices: readonly Small[], more: Record<string, unknown> = {}, translation?: string[]): Walk {
  return parseWalk({
    torwend: 1,
    title: "test",
    dimension: (matrices[0] as Small).length,
    moves: matrices.map((matrix, i) => ({
      label: `m${i}`,
      matrix: matrix.map((row) => [...row]),
      ...(translation === undefined || i > 0 ? {} : { translation }),
    })),
    ...more,
  });
}

/** I + s E_ij. */
export function elementary(d: number, i: number, j: number, s = 1): number[][] {
  return unit(d).map((row, a) => row.map((x, b) => (a === i && b === j && i !== j ? s : x)));
}

export function unit(d: number): number[][] {
  return Array.from({ length: d }, (_, i) => Array.from({ length: d }, (_, j) => (i === j ? 1 : 0)));
}

export function times(a: Small, b: Small): number[][] {
  return a.map((row) => (b[0] as number[]).map((_, j) => row.reduce((sum, x, k) => sum + x * b[k][j], 0)));
}

/** Block diagonal. */
export function blocks(...parts: Small[]): number[][] {
  const d = parts.reduce((sum, part) => sum + part.length, 0);
  const out = Array.from({ length: d }, () => new Array<number>(d).fill(0));
  let at = 0;
  for (const part of parts) {
    part.forEach((row, i) => {
      row.forEach((x, j) => {
        out[at + i][at + j] = x;
      });
    });
    at += part.length;
  }
  return out;
}

/** Kronecker product. */
export function tensor(a: Small, b: Small): number[][] {
  return a.flatMap((row) => b.map((other) => row.flatMap((x) => other.map((y) => x * y))));
}

/** The inverse of a 2 x 2 matrix of determinant +-1. */
export function inverse2([[p, q], [r, s]]: Small): number[][] {
  const det = p * s - q * r;
  return [
    [det * s, -det * q],
    [-det * r, det * p],
  ];
}
