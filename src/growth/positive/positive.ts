/**
 * Dimension 2, moves positive on a common cone: what the cone proves, to any precision.
 * One object a walk; grids and factorisations are shared by all that is asked of it.
 */
import type { Ball } from "../../exact/ball.js";
import { Rational } from "../../exact/rational.js";
import type { Real } from "../../kernel/real.js";
import type { Walk } from "../../walk/walk.js";
import { type PositiveCone, positiveCone } from "./cone.js";
import { PressureGrid } from "./eigen.js";
import { type Ellipse, parameter, wideEllipse } from "./ellipse.js";
import { average } from "./grid.js";
import { type Observed, StationaryMeans } from "./mean.js";
import { encloseVariance } from "./variance.js";

/** Polynomials of a higher degree cost more than the other methods: sets that contract too slowly. */
const MAX_SIZE = 480;
/** Bits that rounding may cost: a few units at a point, slopes, Lebesgue's constant. */
const GUARD = 24;

/** A real number between two fractions. */
export interface Enclosure {
  readonly low: Rational;
  readonly high: Rational;
}

export function enclosureOf({ mid, rad }: Ball, p: number): Enclosure {
  const one = 1n << BigInt(p);
  return { low: Rational.of(mid - rad, one), high: Rational.of(mid + rad, one) };
}

export class PositiveSet {
  private means: StationaryMeans | undefined;
  private readonly pressures = new Map<number, PressureGrid>();

  private constructor(
    readonly cone: PositiveCone,
    readonly ellipse: Ellipse,
    readonly real: Real,
  ) {}

  /** Undefined where no common cone was found, or the moves contract it too slowly. */
  static of(walk: Walk, real: Real): PositiveSet | undefined {
    const cone = positiveCone(walk, real);
    if (cone === undefined) return undefined;
    const ellipse = wideEllipse(cone, real);
    if (ellipse === undefined) return undefined;
    const set = new PositiveSet(cone, ellipse, real);
    return set.sizeFor(64) > MAX_SIZE ? undefined : set;
  }

  /** Degree of polynomials that follow functions analytic in |u| < reach to so many bits. */
  sizeFor(bits: number): number {
    return Math.ceil((bits * Math.LN2) / this.real.log(parameter(2 * this.cone.reach))) + 6;
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
    const most = Math.floor(((MAX_SIZE - 6) * this.real.log(parameter(2 * this.cone.reach))) / Math.LN2) - GUARD;
    return Math.min(wanted, most);
  }

  /** lambda_1 in an interval of width about 2^-bits. */
  exponent(bits: number): Enclosure {
    const means = this.meansFor(bits);
    return enclosureOf(means.enclose(this.logFactor).mean, means.p);
  }

  /** The limit of Var(log |A_n...A_1|) / n; undefined where the moves contract too slowly to say. */
  variance(bits: number): Enclosure | undefined {
    const means = this.meansFor(bits);
    const found = encloseVariance(means, this.logFactor);
    return found === undefined ? undefined : enclosureOf(found, means.p);
  }

  /** Lambda(s) in an interval of width about 2^-bits; undefined where no eigenfunction proved it. */
  pressure(s: number, bits: number): Enclosure | undefined {
    const p = bits + GUARD;
    // Far from 0 the weights vary more, and polynomials need a higher degree to follow.
    for (let size = this.sizeFor(p); size <= MAX_SIZE; size *= 2) {
      const grid = this.pressureGrid(size, p);
      const found = grid.enclose(s);
      if (found === undefined) continue;
      if (found.rad >> BigInt(GUARD) <= 1n || 2 * size > MAX_SIZE) return enclosureOf(found, p);
    }
    return undefined;
  }

  /** Lambda(s) in doubles. */
  approximatePressure(s: number, bits: number): number | undefined {
    const p = bits + GUARD;
    return this.pressureGrid(this.sizeFor(p), p).approximate(s)?.log;
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
