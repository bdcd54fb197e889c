/**
 * Pressure of moves positive on a common cone, enclosed at any real s. For a positive h,
 *     min (L h) / h <= exp Lambda(s) <= max (L h) / h,   (L h)(u) = sum p_i f_i(u)^s h(A_i u),
 * f_i the stretch factors (Collatz and Wielandt: L is positive, and L^n h grows like
 * E |A_n...A_1|^s, as all norms of products are comparable on the cone). h is the leading
 * eigenfunction, nearly, a polynomial in Chebyshev's basis; what lies between the points is
 * bounded by interpolation, as for means.
 */
import { addBalls, type Ball, multiplyBalls, negateBall } from "../../exact/ball.js";
import { expOfBall, logOfBall } from "../../exact/elementary.js";
import { Rational } from "../../exact/rational.js";
import type { Real } from "../../kernel/real.js";
import {
  interpolationTail,
  lebesgue,
  type Polynomial,
  polynomial,
  roundingOf,
  truncated,
  units,
  valueAt,
  valueOnBalls,
} from "./chebyshev.js";
import type { PositiveCone } from "./cone.js";
import { type Ellipse, polynomialBound } from "./ellipse.js";
import { average, type Sample, sampleGrid } from "./grid.js";
import { chebyshevRow, refine, toDouble } from "./solve.js";

/** Power iterations in doubles at most: their error is what Newton's step starts from. */
const SWEEPS = 400;

interface Candidate {
  /** Lambda(s) in doubles: weights are divided by its exponential, so that the eigenvalue is near 1. */
  readonly log: number;
  readonly coefficients: Float64Array;
  /** The collocated operator in doubles, in Chebyshev's basis: row = point, column = T_k. */
  readonly operator: readonly Float64Array[];
  readonly basis: readonly Float64Array[];
}

/** Grids of one cone at one precision, for the pressure at many s. */
export class PressureGrid {
  private readonly points: readonly Sample[];
  /** For each point: T_k there, and at each image. */
  private readonly here: readonly Float64Array[];
  private readonly there: readonly (readonly Float64Array[])[];
  private readonly logs: readonly (readonly number[])[];
  private readonly weights: readonly number[];
  private finer: readonly Sample[] = [];
  /** Roots in each coordinate of `finer`, the last certificate's grid. */
  private count = 0;
  /** 2 for each coordinate in which T_k is not constant: discrete orthogonality at the roots. */
  private readonly norms: readonly number[];

  constructor(
    readonly cone: PositiveCone,
    readonly ellipse: Ellipse,
    readonly size: number,
    readonly p: number,
    private readonly real: Real,
  ) {
    this.points = sampleGrid(cone, size, p);
    this.here = this.points.map(({ at }) =>
      chebyshevRow(
        at.map((x) => toDouble(x.mid, p)),
        size,
      ),
    );
    this.there = this.points.map(({ images }) =>
      images.map((y) =>
        chebyshevRow(
          y.map((x) => toDouble(x.mid, p)),
          size,
        ),
      ),
    );
    this.logs = this.points.map(({ logs }) => logs.map((x) => toDouble(x.mid, p)));
    this.norms = this.points.map((_, index) => {
      let norm = 1;
      for (let rest = index; rest > 0; rest = Math.floor(rest / size)) norm *= rest % size === 0 ? 1 : 2;
      return norm;
    });
    this.weights = cone.moves.map((m) => Number(m.weight) / Number(cone.total));
  }

  /** Lambda(s) and the eigenfunction in doubles, by power iteration; undefined where it does not settle. */
  approximate(s: number): Candidate | undefined {
    const { real } = this;
    const n = this.points.length;
    let top = Number.NEGATIVE_INFINITY;
    for (const logs of this.logs) for (const x of logs) top = Math.max(top, s * x);
    const operator = this.there.map((images, j) => {
      const row = new Float64Array(n);
      for (const [i, t] of images.entries()) {
        const w = this.weights[i] * real.exp(s * this.logs[j][i] - top);
        for (let k = 0; k < n; k++) row[k] += w * t[k];
      }
      return row;
    });
    let c = new Float64Array(n);
    c[0] = 1;
    let log = 0;
    for (let sweep = 0; sweep < SWEEPS; sweep++) {
      const next = new Float64Array(n);
      for (let j = 0; j < n; j++) {
        const [row, here] = [operator[j], this.here[j]];
        let value = 0;
        for (let k = 0; k < n; k++) value += row[k] * c[k];
        for (let k = 0; k < n; k++) next[k] += value * here[k];
      }
      const scale = next[0] / n;
      if (!(scale > 0)) return undefined;
      let change = 0;
      for (let k = 0; k < n; k++) {
        next[k] *= this.norms[k] / (n * scale);
        change = Math.max(change, Math.abs(next[k] - c[k]));
      }
      [c, log] = [next, top + real.log(scale)];
      if (change < 1e-13) break;
    }
    return Number.isFinite(log) ? { log, coefficients: c, operator, basis: this.here } : undefined;
  }

  /** The weights f_i^s exp(-shift) at a point. */
  private factors({ logs }: Sample, s: Ball, shift: Ball): Ball[] {
    return logs.map((x) => expOfBall(addBalls(multiplyBalls(s, x, this.p), negateBall(shift)), this.p));
  }

  private at(h: Polynomial, { at }: Sample): bigint {
    return valueAt(
      h.coefficients,
      h.size,
      at.map((x) => x.mid),
      this.p,
    );
  }

  private image(h: Polynomial, sample: Sample, factors: readonly Ball[]): Ball {
    const { p, cone } = this;
    return average(
      cone,
      sample.images.map((y, i) => multiplyBalls(factors[i], valueOnBalls(h, y, p), p)),
    );
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

  /** Lambda(s), or undefined where no positive eigenfunction was found. */
  enclose(s: number): Ball | undefined {
    const { p, real } = this;
    const start = this.approximate(s);
    if (start === undefined) return undefined;
    const exact = (x: number): Ball => {
      const r = Rational.fromNumber(x);
      return { mid: (r.num << BigInt(p)) / r.den, rad: 1n };
    };
    const [power, shift] = [exact(s), exact(start.log)];
    const scale = real.exp(-(start.log - Math.max(...this.logs.flat().map((x) => s * x))));
    // Newton's equations for the eigenvalue (in place of the first coefficient, which stays 1) and the rest.
    const matrix = start.operator.map((row, j) =>
      Array.from(row, (x, k) =>
        k === 0 ? start.basis[j].reduce((t, y, i) => t + y * start.coefficients[i], 0) : start.basis[j][k] - scale * x,
      ),
    );
    const factors = this.points.map((sample) => this.factors(sample, power, shift));
    const one = 1n << BigInt(p);
    const first = Array.from(start.coefficients, (c, k) =>
      k === 0 ? one : BigInt(Math.round(c * 2 ** 60)) << BigInt(p - 60),
    );
    const found = refine(
      matrix,
      first,
      (x) => {
        const h: Polynomial = { size: this.size, coefficients: [one, ...x.slice(1)], slope: 0n, bend: 0n };
        return this.points.map((sample, j) => {
          const image = this.image(h, sample, factors[j]).mid;
          return image - ((x[0] * this.at(h, sample)) >> BigInt(p));
        });
      },
      p,
    );
    return this.certify(
      polynomial(truncated([one, ...found.slice(1)], this.size), this.size),
      { mid: found[0], rad: 0n },
      s,
      power,
      shift,
    );
  }

  private certify(h: Polynomial, rate: Ball, s: number, power: Ball, shift: Ball): Ball | undefined {
    const { p, real, ellipse } = this;
    const log2 = (x: number) => real.log(x) / Math.LN2;
    // |f_i|^s on the ellipse, over exp(shift); |L h| + rate |h| is at most twice the larger part.
    const shifted = toDouble(shift.mid, p) / Math.LN2;
    const parts = ellipse.moves.map(({ image, least, most }) => {
      const factor = Math.max(s * log2(least), s * log2(most)) - shifted;
      return factor + polynomialBound(h, image, p, real);
    });
    const bound = Math.max(...parts, polynomialBound(h, ellipse.r, p, real) + log2(toDouble(rate.mid, p))) + 1.001;
    if (!Number.isFinite(bound)) return undefined;
    const points = this.certificate(bound);
    let most = 0n;
    for (const sample of points) {
      const image = this.image(h, sample, this.factors(sample, power, shift));
      const gap = addBalls(image, negateBall(multiplyBalls(rate, valueOnBalls(h, sample.at, p), p)));
      const size = (gap.mid < 0n ? -gap.mid : gap.mid) + gap.rad;
      if (size > most) most = size;
    }
    const tail = interpolationTail(bound, ellipse.r, this.count, this.cone.coordinates, real);
    const gap =
      (most * BigInt(Math.ceil(lebesgue(this.count, this.cone.coordinates) * 1024))) / 1024n +
      1n +
      units(tail.value, p);
    const least = positiveMinimum(h, this.cone.coordinates, p);
    if (least === undefined) return undefined;
    // |L h - rate h| <= gap: the quotients are within gap / least of the rate.
    const spread = (gap << BigInt(p)) / least + 1n;
    if (rate.mid <= spread) return undefined;
    return addBalls(logOfBall({ mid: rate.mid, rad: spread }, p), shift);
  }
}

/** Pieces that the search for the least value may look at. */
const PIECES = 4096;

interface Piece {
  readonly low: readonly bigint[];
  readonly high: readonly bigint[];
}

/**
 * A positive lower bound of h on the box, or undefined where none was proved. On a piece of
 * widths w_j, h is at least the least of the corners' values less sum_j bend_j w_j^2 / 8 (what
 * interpolation that is linear in each coordinate leaves out); pieces where that is below half
 * the least value are halved across.
 */
function positiveMinimum(h: Polynomial, coordinates: number, p: number): bigint | undefined {
  const one = 1n << BigInt(p);
  const rounding = roundingOf(h.size, coordinates);
  let least: bigint | undefined;
  const open: Piece[] = [
    { low: new Array<bigint>(coordinates).fill(-one), high: new Array<bigint>(coordinates).fill(one) },
  ];
  for (let n = 0; open.length > 0; n++) {
    const { low, high } = open.pop()!;
    let end: bigint | undefined;
    for (let corner = 0; corner < 2 ** coordinates; corner++) {
      const u = low.map((x, k) => ((corner >> k) & 1 ? high[k] : x));
      const value = valueAt(h.coefficients, h.size, u, p) - rounding;
      if (end === undefined || value < end) end = value;
    }
    if (end === undefined || end <= 0n || n > PIECES) return undefined;
    let width = 0n;
    let widest = 0;
    for (const [k, x] of low.entries()) {
      if (high[k] - x > width) [width, widest] = [high[k] - x, k];
    }
    const drop = ((((h.bend * width) >> BigInt(p)) * width) >> BigInt(p + 3)) + 2n;
    if (2n * drop <= end) {
      if (least === undefined || end - drop < least) least = end - drop;
      continue;
    }
    const middle = (low[widest] + high[widest]) >> 1n;
    open.push({ low, high: high.with(widest, middle) }, { low: low.with(widest, middle), high });
  }
  return least;
}
