/** Chebyshev points of the cone's box with what the moves do there, as balls. */
import { type Ball, divideBalls } from "../../exact/ball.js";
import { logOfBall } from "../../exact/elementary.js";
import { chebyshevRoots } from "./chebyshev.js";
import type { PositiveCone } from "./cone.js";

/** One point u; for each move, where it goes and the logarithm of the stretch factor. */
export interface Sample {
  readonly at: readonly Ball[];
  readonly images: readonly (readonly Ball[])[];
  readonly logs: readonly Ball[];
}

function sampleAt(cone: PositiveCone, at: readonly Ball[], p: number): Sample {
  const images: Ball[][] = [];
  const logs: Ball[] = [];
  const one = 1n << BigInt(p);
  const n = cone.coordinates;
  const form = (row: readonly bigint[]): Ball => {
    let mid = row[n] * one;
    let rad = 0n;
    for (const [k, x] of at.entries()) {
      mid += row[k] * x.mid;
      rad += (row[k] < 0n ? -row[k] : row[k]) * x.rad;
    }
    return { mid, rad };
  };
  // The true image is inside [-1, 1]; a middle that rounding left outside moves in.
  const inside = ({ mid, rad }: Ball): Ball => ({ mid: mid > one ? one : mid < -one ? -one : mid, rad });
  for (const { rows } of cone.moves) {
    const factor = form(rows[n]);
    images.push(rows.slice(0, n).map((row) => inside(divideBalls(form(row), factor, p))));
    logs.push(logOfBall({ mid: factor.mid / cone.scale, rad: factor.rad / cone.scale + 2n }, p));
  }
  return { at, images, logs };
}

/** All points whose coordinates are roots of T_count. */
export function sampleGrid(cone: PositiveCone, count: number, p: number): Sample[] {
  const roots = chebyshevRoots(count, p);
  let points: Ball[][] = [[]];
  for (let j = 0; j < cone.coordinates; j++) points = points.flatMap((u) => roots.map((x) => [...u, x]));
  return points.map((at) => sampleAt(cone, at, p));
}

/** Sum of weight_i x_i over the total weight. */
export function average(cone: PositiveCone, values: readonly Ball[]): Ball {
  let mid = 0n;
  let rad = 0n;
  for (const [i, { weight }] of cone.moves.entries()) {
    mid += weight * values[i].mid;
    rad += weight * values[i].rad;
  }
  return { mid: mid / cone.total, rad: rad / cone.total + 2n };
}
