/** Chebyshev points of the cone's interval with what the moves do there, as balls. */
import { type Ball, divideBalls } from "../../exact/ball.js";
import { logOfBall } from "../../exact/elementary.js";
import { chebyshevRoots } from "./chebyshev.js";
import type { PositiveCone } from "./cone.js";

/** One point u; for each move, where it goes and the logarithm of the stretch factor. */
export interface Sample {
  readonly at: Ball;
  readonly images: readonly Ball[];
  readonly logs: readonly Ball[];
}

export function sampleAt(cone: PositiveCone, at: Ball, p: number): Sample {
  const images: Ball[] = [];
  const logs: Ball[] = [];
  const one = 1n << BigInt(p);
  const form = (x: bigint, y: bigint): Ball => ({ mid: x * at.mid + y * one, rad: (x < 0n ? -x : x) * at.rad });
  for (const { a, b, c, d } of cone.moves) {
    const factor = form(c, d);
    const image = divideBalls(form(a, b), factor, p);
    // The true image is inside [-1, 1]; a middle that rounding left outside moves in.
    const mid = image.mid > one ? one : image.mid < -one ? -one : image.mid;
    images.push({ mid, rad: image.rad });
    logs.push(logOfBall({ mid: factor.mid / cone.scale, rad: factor.rad / cone.scale + 2n }, p));
  }
  return { at, images, logs };
}

export function sampleGrid(cone: PositiveCone, count: number, p: number): Sample[] {
  return chebyshevRoots(count, p).map((at) => sampleAt(cone, at, p));
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
