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
import { clenshaw, interpolationTail, lebesgue, type Polynomial, polynomial, units, valueOnBall } from "./chebyshev.js";
import type { PositiveCone } from "./cone.js";
import { type Ellipse, polynomialBound } from "./ellipse.js";
import { average, type Sample, sampleGrid } from "./grid.js";
import { chebyshevRow, refine, toDouble } from "./solve.js";

/** Power iterations in doubles at most: their error is what Newton's step starts from. */
const SWEEPS = 400;

interface Candidate {
  /** Lambda(s) in doubles: weights are divided by its exponential, so that the eigenvalue is near 1. */
  readonly log: number;
  readonly coefficients: readonly number[];
  /** The collocated operator in doubles, in Chebyshev's basis: row = point, column = T_k. */
  readonly operator: readonly (readonly number[])[];
  readonly basis: readonly (readonly number[])[];
}

/** Grids of one cone at one precision, for the pressure at many s. */
export class PressureGrid {
  private readonly points: readonly Sample[];
  /** For each point: T_k there, and at each image. */
  private readonly here: readonly (readonly number[])[];
  private readonly there: readonly (readonly (readonly number[])[])[];
  private readonly logs: readonly (readonly number[])[];
  private readonly weights: readonly number[];
  private finer: readonly Sample[] = [];

  constructor(
    readonly cone: PositiveCone,
    readonly ellipse: Ellipse,
    readonly size: number,
    readonly p: number,
    private readonly real: Real,
  ) {
    this.points = sampleGrid(cone, size, p);
    this.here = this.points.map(({ at }) => chebyshevRow(toDouble(at.mid, p), size));
    this.there = this.points.map(({ images }) => images.map((y) => chebyshevRow(toDouble(y.mid, p), size)));
    this.logs = this.points.map(({ logs }) => logs.map((x) => toDouble(x.mid, p)));
    this.weights = cone.moves.map((m) => Number(m.weight) / Number(cone.total));
  }

  /** Lambda(s) and the eigenfunction in doubles, by power iteration; undefined where it does not settle. */
  approximate(s: number): Candidate | undefined {
    const { real, size } = this;
    const top = Math.max(...this.logs.flat().map((x) => s * x));
    const operator = this.there.map((images, j) => {
      const row = new Array<number>(size).fill(0);
      for (const [i, t] of images.entries()) {
        const w = this.weights[i] * real.exp(s * this.logs[j][i] - top);
        for (let k = 0; k < size; k++) row[k] += w * t[k];
      }
      return row;
    });
    let c = Array.from({ length: size }, (_, k) => (k === 0 ? 1 : 0) as number);
    let log = 0;
    for (let sweep = 0; sweep < SWEEPS; sweep++) {
      const values = operator.map((row) => row.reduce((t, x, k) => t + x * c[k], 0));
      // Discrete orthogonality at the roots.
      const next = c.map((_, k) => ((k === 0 ? 1 : 2) / size) * values.reduce((t, v, j) => t + v * this.here[j][k], 0));
      const scale = next[0];
      if (!(scale > 0)) return undefined;
      let change = 0;
      const image = next.map((x) => x / scale);
      for (const [k, x] of image.entries()) change = Math.max(change, Math.abs(x - c[k]));
      [c, log] = [image, top + real.log(scale)];
      if (change < 1e-13) break;
    }
    return Number.isFinite(log) ? { log, coefficients: c, operator, basis: this.here } : undefined;
  }

  /** The weights f_i^s exp(-shift) at a point. */
  private factors({ logs }: Sample, s: Ball, shift: Ball): Ball[] {
    return logs.map((x) => expOfBall(addBalls(multiplyBalls(s, x, this.p), negateBall(shift)), this.p));
  }

  private image(h: Polynomial, sample: Sample, factors: readonly Ball[]): Ball {
    const { p, cone } = this;
    return average(
      cone,
      sample.images.map((y, i) => multiplyBalls(factors[i], valueOnBall(h, y, p), p)),
    );
  }

  /** The points of a certificate for functions bounded by 2^bound: tails below 2^-p. */
  private certificate(bound: number): readonly Sample[] {
    const wanted = Math.max(this.size + 1, Math.ceil((bound + this.p + 8) / this.ellipse.r));
    if (this.finer.length < wanted) this.finer = sampleGrid(this.cone, wanted, this.p);
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
      row.map((x, k) =>
        k === 0 ? start.basis[j].reduce((t, y, i) => t + y * start.coefficients[i], 0) : start.basis[j][k] - scale * x,
      ),
    );
    const factors = this.points.map((sample) => this.factors(sample, power, shift));
    const one = 1n << BigInt(p);
    const first = start.coefficients.map((c, k) => (k === 0 ? one : BigInt(Math.round(c * 2 ** 60)) << BigInt(p - 60)));
    const found = refine(matrix, first, (x) => {
      const h = { ...polynomial([]), coefficients: [one, ...x.slice(1)] };
      return this.points.map((sample, j) => {
        const image = this.image(h, sample, factors[j]).mid;
        return image - ((x[0] * clenshaw(h.coefficients, sample.at.mid, p)) >> BigInt(p));
      });
    });
    return this.certify(polynomial([one, ...found.slice(1)]), { mid: found[0], rad: 0n }, s, power, shift);
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
      const gap = addBalls(image, negateBall(multiplyBalls(rate, valueOnBall(h, sample.at, p), p)));
      const size = (gap.mid < 0n ? -gap.mid : gap.mid) + gap.rad;
      if (size > most) most = size;
    }
    const tail = interpolationTail(bound, ellipse.r, points.length, real);
    const gap = (most * BigInt(Math.ceil(lebesgue(points.length) * 1024))) / 1024n + 1n + units(tail.value, p);
    const least = positiveMinimum(h, p);
    if (least === undefined) return undefined;
    // |L h - rate h| <= gap: the quotients are within gap / least of the rate.
    const spread = (gap << BigInt(p)) / least + 1n;
    if (rate.mid <= spread) return undefined;
    return addBalls(logOfBall({ mid: rate.mid, rad: spread }, p), shift);
  }
}

/** Pieces that the search for the least value may look at. */
const PIECES = 4096;

/**
 * A positive lower bound of h on [-1, 1], or undefined where none was proved. On a piece of
 * length w, h is at least the smaller end's value less bend w^2 / 8; pieces where that is
 * below half the smaller end's value are halved.
 */
function positiveMinimum(h: Polynomial, p: number): bigint | undefined {
  const one = 1n << BigInt(p);
  const below = (x: bigint) => clenshaw(h.coefficients, x, p) - BigInt(h.coefficients.length + 1);
  let least: bigint | undefined;
  const open = [{ a: -one, b: one, left: below(-one), right: below(one) }];
  for (let n = 0; open.length > 0; n++) {
    const { a, b, left, right } = open.pop()!;
    const rising = left < right;
    const end = rising ? left : right;
    if (end <= 0n || n > PIECES) return undefined;
    const width = b - a;
    const drop = ((((h.bend * width) >> BigInt(p)) * width) >> BigInt(p + 3)) + 2n;
    if (2n * drop <= end) {
      if (least === undefined || end - drop < least) least = end - drop;
      continue;
    }
    const middle = (a + b) >> 1n;
    const value = below(middle);
    open.push({ a, b: middle, left, right: value }, { a: middle, b, left: value, right });
  }
  return least;
}
