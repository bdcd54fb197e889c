/**
 * Moves positive on a common cone: what the cone proves, in dimension 2 to any precision, in
 * dimension 3 to about that of doubles. One object a walk; grids and factorisations are shared by all that is asked of it.
 */
import type { Ball } from "../../exact/ball.js";
import { Rational } from "../../exact/rational.js";
import type { Real } from "../../kernel/real.js";
import type { WeightedMoves } from "../../walk/weights.js";
import { boxCone } from "./box.js";
import type { PositiveCone } from "./cone.js";
import { PressureGrid } from "./eigen.js";
import { type Ellipse, parameter, wideEllipse } from "./ellipse.js";
import { average } from "./grid.js";
import { planarCone } from "./interval.js";
import { type Observed, StationaryMeans } from "./mean.js";
import { encloseVariance } from "./variance.js";

/** Degrees of polynomials, by the number of coordinates: more cost more than other methods, or cannot be held. */
const MAX_SIZE = [0, 480, 24];
/** Coefficients times points times moves at most: some tenths of a second, each time a residual is taken. */
const MAX_WORK = 3e6;
/** Sets that need more for so many bits contract too slowly. */
const LEAST_BITS = 30;
/** Bits that rounding may cost: some units at a point, slopes, Lebesgue's constant. */
const GUARD = 24;
/** Degrees beyond those that the decay of coefficients asks for. */
const SPARE = [0, 6, 3];
/** Words of moves that are tried as moves where the moves themselves leave no box invariant. */
const WORDS = 40;

/** A real number between two fractions. */
export interface Enclosure {
  readonly low: Rational;
  readonly high: Rational;
}

export function enclosureOf({ mid, rad }: Ball, p: number): Enclosure {
  const one = 1n << BigInt(p);
  return { low: Rational.of(mid - rad, one), high: Rational.of(mid + rad, one) };
}

/** The walk that takes `length` moves at a time. */
function wordsOf(walk: WeightedMoves, length: number): WeightedMoves {
  let words = walk.moves;
  for (let n = 1; n < length; n++) {
    words = words.flatMap((w) =>
      walk.moves.map((m) => ({
        matrix: m.matrix.map((row) => row.map((_, k) => row.reduce((s, x, j) => s + x * w.matrix[j][k], 0n))),
        determinant: (m.determinant * w.determinant) as 1 | -1,
        probability: m.probability.mul(w.probability),
      })),
    );
  }
  return { ...walk, moves: words };
}

export class PositiveSet {
  private means: StationaryMeans | undefined;
  private readonly pressures = new Map<number, PressureGrid>();

  private constructor(
    readonly cone: PositiveCone,
    readonly ellipse: Ellipse,
    /** The cone's moves are words of so many of the walk's. */
    private readonly length: number,
    readonly real: Real,
  ) {}

  /** Undefined where no common cone was found, or the moves contract it too slowly. */
  static of(walk: WeightedMoves, real: Real): PositiveSet | undefined {
    if (walk.dimension - 1 >= MAX_SIZE.length) return undefined;
    // Words contract more, and have an invariant box where the moves, which do not know of boxes, have none.
    for (let length = 1; length === 1 || (walk.moves.length ** length <= WORDS && length <= 4); length++) {
      const words = length === 1 ? walk : wordsOf(walk, length);
      const cone = walk.dimension === 2 ? planarCone(words, real) : boxCone(words);
      // An interval is found for the moves or not at all.
      if (cone === undefined && walk.dimension === 2) return undefined;
      const found = PositiveSet.in(cone, length, real);
      if (found !== undefined) return found;
    }
    return undefined;
  }

  private static in(cone: PositiveCone | undefined, length: number, real: Real): PositiveSet | undefined {
    if (cone === undefined) return undefined;
    const ellipse = wideEllipse(cone, real);
    if (ellipse === undefined) return undefined;
    const set = new PositiveSet(cone, ellipse, length, real);
    return set.bitsWithin(LEAST_BITS) < LEAST_BITS ? undefined : set;
  }

  private get spare(): number {
    return SPARE[this.cone.coordinates] ?? 0;
  }

  private get mostSize(): number {
    const n = this.cone.coordinates;
    let size = MAX_SIZE[n];
    while (size ** (2 * n) * this.cone.moves.length > MAX_WORK) size--;
    return size;
  }

  /** Degree of polynomials that follow functions analytic in |u| < reach to so many bits. */
  sizeFor(bits: number): number {
    return Math.ceil((bits * Math.LN2) / this.real.log(parameter(2 * this.cone.reach))) + this.spare;
  }

  /** Grids for results of so many bits. */
  meansFor(bits: number): StationaryMeans {
    const p = bits + GUARD;
    if (this.means?.p !== p) this.means = new StationaryMeans(this.cone, this.ellipse, this.sizeFor(p), p, this.real);
    return this.means;
  }

  /** psi(u): the mean logarithm of the stretch factor. */
  get logFactor(): Observed {
    const logs = this.ellipse.moves.map(
      ({ least, most }) =>
        // |log w| <= |log |w|| + pi/2 on the right half plane.
        Math.max(Math.abs(this.real.log(least)), Math.abs(this.real.log(most))) + 2,
    );
    return {
      value: ({ logs }) => average(this.cone, logs),
      bound: this.real.log(Math.max(...logs)) / Math.LN2 + 1e-6,
    };
  }

  /** The number of bits, at most those asked for, that polynomials of the largest degree can follow. */
  bitsWithin(wanted: number): number {
    const most =
      Math.floor(((this.mostSize - this.spare) * this.real.log(parameter(2 * this.cone.reach))) / Math.LN2) - GUARD;
    return Math.min(wanted, most);
  }

  /** lambda_1 in an interval of width about 2^-bits. */
  exponent(bits: number): Enclosure {
    const means = this.meansFor(bits);
    return this.perMove(means.enclose(this.logFactor).mean, means.p);
  }

  /** The limit of Var(log |A_n...A_1|) / n; undefined where the moves contract too slowly to say. */
  variance(bits: number): Enclosure | undefined {
    const means = this.meansFor(bits);
    const found = encloseVariance(means, this.logFactor);
    return found === undefined ? undefined : this.perMove(found, means.p);
  }

  /** Lambda(s) in an interval of width about 2^-bits; undefined where no eigenfunction proved it. */
  pressure(s: number, bits: number): Enclosure | undefined {
    const p = bits + GUARD;
    // Far from 0 the weights vary more, and polynomials need a higher degree to follow.
    for (let size = this.sizeFor(p); size <= this.mostSize; size *= 2) {
      const grid = this.pressureGrid(size, p);
      const found = grid.enclose(s);
      if (found === undefined) continue;
      if (found.rad >> BigInt(GUARD) <= 1n || 2 * size > this.mostSize) return this.perMove(found, p);
    }
    return undefined;
  }

  /** Lambda(s) in doubles. */
  approximatePressure(s: number, bits: number): number | undefined {
    const p = bits + GUARD;
    const found = this.pressureGrid(this.sizeFor(p), p).approximate(s);
    return found && found.log / this.length;
  }

  /** All rates are reported per move of the walk. */
  private perMove(ball: Ball, p: number): Enclosure {
    const { low, high } = enclosureOf(ball, p);
    const by = Rational.of(this.length);
    return { low: low.div(by), high: high.div(by) };
  }

  private pressureGrid(size: number, p: number): PressureGrid {
    const key = size * 65536 + p;
    let grid = this.pressures.get(key);
    if (grid === undefined) {
      grid = new PressureGrid(this.cone, this.ellipse, size, p, this.real);
      this.pressures.set(key, grid);
    }
    return grid;
  }
}
