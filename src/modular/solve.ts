/**
 * Bounds on the least non-negative solution x of x = f + R x, with R and f known between
 * bounds. Floating point finds a candidate; one evaluation with rounding proves it:
 * y >= f + R y with y >= 0 proves x <= y. With f = 1 that also proves that R^n tends to 0,
 * and then y <= f + R y proves x >= y.
 */
import { LuDecomposition, Matrix } from "ml-matrix";
import { applyBound, type Dense, roundingFactor } from "./bounds.js";

export interface VectorBounds {
  readonly low: Float64Array;
  readonly high: Float64Array;
}

export interface MatrixBounds {
  readonly low: Dense;
  readonly high: Dense;
}

/** I - R factorised at both bounds, for several right-hand sides. */
export class LeastSolver {
  private readonly lower: LuDecomposition;
  private readonly upper: LuDecomposition;
  /** (I - R)^-1 1, nearly: the direction in which candidates are moved to prove them. */
  private readonly ones: Float64Array;
  /** Whether z >= 1 + R z has been proved for some z: R^n tends to 0. */
  readonly contracts: boolean;

  constructor(private readonly r: MatrixBounds) {
    this.lower = factorise(r.low);
    this.upper = factorise(r.high);
    this.ones = candidate(this.upper, new Float64Array(Math.round(Math.sqrt(r.low.length))).fill(1));
    const doubled = this.ones.map((x) => 2 * x);
    const image = applyBound(r.high, doubled, "high");
    const up = roundingFactor(2, "high");
    // Twice the solution for 1 is the solution for 2: room enough for every rounding.
    this.contracts = doubled.every((x, i) => x > 0 && x >= (1 + image[i]!) * up);
  }

  /** Bounds of the least solution, or undefined where none could be proved (a spectral radius of 1 or more). */
  solve(f: VectorBounds): VectorBounds | undefined {
    if (!this.contracts) return undefined;
    const low = this.proveLow(f.low);
    const high = this.proveHigh(f.high);
    return low === undefined || high === undefined ? undefined : { low, high };
  }

  private proveHigh(f: Float64Array): Float64Array | undefined {
    const y = candidate(this.upper, f);
    const scale = largest(y);
    const up = roundingFactor(2, "high");
    for (let slack = 2 ** -51; slack < 2 ** -8; slack *= 2) {
      const tried = y.map((x, i) => (Math.max(x, 0) + slack * scale * this.ones[i]!) * up);
      const image = applyBound(this.r.high, tried, "high");
      if (tried.every((x, i) => x >= (f[i]! + image[i]!) * up)) return tried;
    }
    return undefined;
  }

  private proveLow(f: Float64Array): Float64Array | undefined {
    const y = candidate(this.lower, f);
    const scale = largest(y);
    const down = roundingFactor(2, "low");
    for (let slack = 2 ** -51; slack < 2 ** -8; slack *= 2) {
      const tried = y.map((x, i) => Math.max(0, (x - slack * scale * this.ones[i]!) * down));
      const image = applyBound(this.r.low, tried, "low");
      // Entries cut to 0 are lower bounds by themselves, and keep the inequality for the others.
      if (tried.every((x, i) => x === 0 || x <= (f[i]! + image[i]!) * down)) return tried;
    }
    return undefined;
  }
}

function factorise(r: Float64Array): LuDecomposition {
  const n = Math.round(Math.sqrt(r.length));
  const m = Matrix.zeros(n, n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) m.set(i, j, (i === j ? 1 : 0) - r[i * n + j]!);
  }
  return new LuDecomposition(m);
}

/** A floating-point solution; NaN throughout where the matrix is singular, which no proof accepts. */
function candidate(lu: LuDecomposition, f: Float64Array): Float64Array {
  if (lu.isSingular()) return new Float64Array(f.length).fill(Number.NaN);
  return Float64Array.from(lu.solve(Matrix.columnVector(f)).to1DArray());
}

function largest(y: Float64Array): number {
  return y.reduce((a, b) => Math.max(a, b), 1e-200);
}
