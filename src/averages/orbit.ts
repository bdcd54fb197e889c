/**
 * The finite orbit of a rational start: its points as integers over the common denominator
 * q of the start and all translations, and what each move does to them. Moves are one-to-one,
 * so the orbit is one communicating class and the uniform measure on it is the stationary law.
 */
import { commonDenominator } from "../walk/denominator.js";
import type { Walk } from "../walk/walk.js";

export interface FiniteOrbit {
  readonly denominator: number;
  readonly dimension: number;
  readonly size: number;
  /** Coordinates of point s, from 0 to q - 1, at s d, ..., s d + d - 1. */
  readonly points: Int32Array<ArrayBuffer>;
  /** Move i takes point s to images[i][s]. */
  readonly images: readonly Int32Array<ArrayBuffer>[];
}

/** Products of two residues, and a coordinate, must add up exactly in doubles. */
const LARGEST_DENOMINATOR = 2n ** 25n;

/** The orbit; undefined where it has more than `most` points, or a denominator of more than 25 bits. */
export function finiteOrbit(walk: Walk, most: number): FiniteOrbit | undefined {
  const common = commonDenominator(walk);
  if (common === undefined || walk.start.type !== "point" || common > LARGEST_DENOMINATOR) return undefined;
  const q = Number(common);
  const d = walk.dimension;
  const residue = (a: bigint) => Number(((a % common) + common) % common);
  const scaled = (x: { num: bigint; den: bigint }) => residue(x.num * (common / x.den));
  const moves = walk.moves.map((m) => ({
    matrix: m.matrix.flatMap((row) => row.map(residue)),
    translation: Array.from({ length: d }, (_, j) => {
      const b = m.translation?.[j]?.rational;
      return b === undefined ? 0 : scaled(b);
    }),
  }));
  const name: (p: readonly number[]) => number | string =
    q ** d < 2 ** 53 ? (p) => p.reduce((key, x) => key * q + x, 0) : (p) => p.join();
  const start = walk.start.point.map((x) => scaled(x.rational!));
  const index = new Map<number | string, number>([[name(start), 0]]);
  const points: number[][] = [start];
  const images: number[][] = moves.map(() => []);
  for (let s = 0; s < points.length; s++) {
    const p = points[s] as number[];
    for (const [i, { matrix, translation }] of moves.entries()) {
      const image = translation.map((b, r) => {
        let sum = b;
        for (let c = 0; c < d; c++) sum = (sum + (matrix[r * d + c] as number) * (p[c] as number)) % q;
        return sum;
      });
      const key = name(image);
      let at = index.get(key);
      if (at === undefined) {
        at = points.length;
        if (at === most) return undefined;
        index.set(key, at);
        points.push(image);
      }
      (images[i] as number[]).push(at);
    }
  }
  return {
    denominator: q,
    dimension: d,
    size: points.length,
    points: Int32Array.from(points.flat()),
    images: images.map((list) => Int32Array.from(list)),
  };
}
