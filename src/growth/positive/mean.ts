/**
 * The mean of a function under the stationary law of directions, enclosed: for any h,
 *     min (f + P h - h) <= mean of f <= max (f + P h - h)
 * over the cone's box. h is a polynomial in Chebyshev's basis, found by collocation, and
 * the bounds hold between the points because the residual is analytic around the box.
 */
import { addBalls, type Ball, negateBall } from "../../exact/ball.js";
import type { Real } from "../../kernel/real.js";
import {
  interpolationTail,
  lebesgue,
  type Polynomial,
  polynomial,
  truncated,
  units,
  valueAt,
  valueOnBalls,
} from "./chebyshev.js";
import type { PositiveCone } from "./cone.js";
import { type Ellipse, polynomialBound } from "./ellipse.js";
import { average, type Sample, sampleGrid } from "./grid.js";
import { chebyshevRow, refine, toDouble } from "./solve.js";

/** A function on the box: its values, and log2 of a bound on the ellipse. */
export interface Observed {
  readonly value: (sample: Sample) => Ball;
  readonly bound: number;
}

export interface EnclosedMean {
  /** Contains the stationary mean. */
  readonly mean: Ball;
  readonly h: Polynomial;
  /** At least the largest sum of |partial derivatives| of the residual f + P h - h on the box, units of 2^-p. */
  readonly slope: bigint;
}

/** Collocation at `size` points, certificates at more: shared by all means of one cone at one precision. */
export class StationaryMeans {
  private readonly points: readonly Sample[];
  private readonly matrix: number[][];
  private finer: readonly Sample[] = [];
  /** Roots in each coordinate of `finer`, the last certificate's grid. */
  private count = 0;

  constructor(
    readonly cone: PositiveCone,
    readonly ellipse: Ellipse,
    readonly size: number,
    readonly p: number,
    private readonly real: Real,
  ) {
    this.points = sampleGrid(cone, size, p);
    // Unknowns: the mean in place of the constant coefficient, which P h - h does not feel.
    this.matrix = this.points.map(({ at, images }) => {
      const here = chebyshevRow(
        at.map((x) => toDouble(x.mid, p)),
        size,
      );
      const there = images.map((y) =>
        chebyshevRow(
          y.map((x) => toDouble(x.mid, p)),
          size,
        ),
      );
      return Array.from(here, (t, k) =>
        k === 0
          ? 1
          : t - there.reduce((s, row, i) => s + Number(cone.moves[i].weight) * row[k], 0) / Number(cone.total),
      );
    });
  }

  /** The points of a certificate for functions bounded by 2^bound: tails below 2^-p. */
  private certificate(bound: number): readonly Sample[] {
    // Even, so that grids are often shared; never a grid that happens to be there: results have no history.
    const wanted = 2 * Math.ceil(Math.max(this.size + 1, (bound + this.p + 8) / this.ellipse.r) / 2);
    if (this.count !== wanted) {
      this.finer = sampleGrid(this.cone, wanted, this.p);
      this.count = wanted;
    }
    return this.finer;
  }

  log2(x: number): number {
    return this.real.log(x) / Math.LN2;
  }

  /** P h - h as a ball. */
  gain(h: Polynomial, sample: Sample): Ball {
    const there = average(
      this.cone,
      sample.images.map((y) => valueOnBalls(h, y, this.p)),
    );
    return addBalls(there, negateBall(valueOnBalls(h, sample.at, this.p)));
  }

  /** log2 of a bound of P h - h on the ellipse. */
  gainBound(h: Polynomial): number {
    const furthest = Math.max(this.ellipse.r, ...this.ellipse.moves.map((m) => m.image));
    return polynomialBound(h, furthest, this.p, this.real) + 1;
  }

  solve(f: Observed): Polynomial {
    const { size } = this;
    const values = this.points.map((s) => f.value(s).mid);
    const start = new Array<bigint>(this.points.length).fill(0n);
    const found = refine(
      this.matrix,
      start,
      (x, q) => {
        const cut = BigInt(this.p - q);
        const h = [0n, ...x.slice(1).map((c) => c >> cut)];
        const at = (u: readonly Ball[]) =>
          valueAt(
            h,
            size,
            u.map((y) => y.mid >> cut),
            q,
          );
        return this.points.map(({ at: here, images }, j) => {
          let there = 0n;
          for (const [i, u] of images.entries()) there += this.cone.moves[i].weight * at(u);
          return values[j] - x[0] + ((there / this.cone.total - at(here)) << cut);
        });
      },
      this.p,
    );
    return polynomial(truncated([0n, ...found.slice(1)], size), size);
  }

  enclose(f: Observed): EnclosedMean {
    const h = this.solve(f);
    const bound = Math.max(f.bound, this.gainBound(h)) + 1;
    const points = this.certificate(bound);
    const values = points.map((s) => addBalls(f.value(s), this.gain(h, s)));
    let [low, high] = [values[0].mid - values[0].rad, values[0].mid + values[0].rad];
    for (const { mid, rad } of values) {
      if (mid - rad < low) low = mid - rad;
      if (mid + rad > high) high = mid + rad;
    }
    const mid = (low + high) >> 1n;
    const most = high - mid + 1n;
    const count = this.count;
    const tail = interpolationTail(bound, this.ellipse.r, count, this.cone.coordinates, this.real);
    const between = (most * BigInt(Math.ceil(lebesgue(count, this.cone.coordinates) * 1024))) / 1024n + 1n;
    // The constant `mid` changes the residual's bound on the ellipse by a factor of 2 at most.
    return {
      mean: { mid, rad: between + units(tail.value + 1, this.p) },
      h,
      slope: between * BigInt(this.cone.coordinates * (count - 1) * (count - 1)) + units(tail.slope + 1, this.p),
    };
  }
}
