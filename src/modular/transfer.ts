/** The transfer operator of exponent.ts and its source, evaluated at a point with bounds of every rounding. */
import type { Real } from "../kernel/real.js";
import { chebyshev, dot } from "./chebyshev.js";
import type { Cylinder, Directions } from "./cylinders.js";
import type { Part, Side } from "./runs.js";
import { BoundedSums } from "./sums.js";

export class Operator {
  readonly n: number;
  /** By the part that T leads to. */
  readonly sides: Readonly<Record<Part, Side>>;

  constructor(
    readonly directions: Directions,
    private readonly probabilities: readonly number[],
    private readonly real: Real,
    sides: Record<Part, Side>,
  ) {
    this.n = directions.states;
    this.sides = sides;
  }

  /**
   * sum p_i log(|A_i v| / |v|) - shift at t = l + x on a piece for part B, at t = 1/(l + x) for
   * A (where the forms trade places). The argument's rounding is 2^-53 of it, so 2^-53 of each
   * logarithm's; a form rounds twice, logarithms by less than a unit: 2^-52 of their size.
   */
  growth(piece: number, part: Part, argument: number, shift: number): { value: number; error: number } {
    const { base, moved } = this.directions.cylinders[piece] as Cylinder;
    const log = (form: { alpha: number; beta: number }) =>
      this.real.log(part === "B" ? form.alpha * argument + form.beta : form.alpha + form.beta * argument);
    const from = log(base);
    let value = -shift;
    let size = Math.abs(shift) + Math.abs(from);
    for (const [i, form] of moved.entries()) {
      const to = log(form);
      value += this.probabilities[i]! * (to - from);
      size += this.probabilities[i]! * (Math.abs(to) + Math.abs(from));
    }
    return { value, error: (size * (moved.length + 4) + 4) * 2 ** -52 };
  }

  /** T (f - shift) at x, for each state, and bounds of the errors. */
  source(part: Part, x: number, shift: number): BoundedSums {
    const sums = new BoundedSums(this.n);
    const { rows, columns } = this.sides[part];
    for (const [piece, { powers }] of rows.entries()) {
      for (const [l, { mid, rad }] of powers.entries()) {
        const { value, error } = this.growth(piece, part, l + 1 + x, shift);
        const size = Math.abs(value);
        for (const k of columns) {
          const w = mid[k]!;
          sums.add(k, w * value, (w * (error + size * 2 ** -52) + rad[k]! * (size + error)) * (1 + 2 ** -40));
        }
      }
    }
    return sums;
  }

  /**
   * (T h)(x) for each state; h by coefficients of its functions on the other part. A value of
   * h_j is off by `rounding[j]` at most.
   */
  image(part: Part, x: number, h: readonly Float64Array[], rounding: readonly number[]): BoundedSums {
    const sums = new BoundedSums(this.n);
    const count = h[0]!.length;
    const basis = new Float64Array(count);
    const { powers, columns } = this.sides[part];
    for (const [l, { mid, rad }] of powers.entries()) {
      chebyshev(1 / (l + 1 + x), count, basis);
      for (let j = 0; j < this.n; j++) {
        const value = dot(h[j]!, basis);
        const size = Math.abs(value);
        for (const k of columns) {
          const w = mid[j * this.n + k]!;
          const r = rad[j * this.n + k]!;
          sums.add(k, w * value, (w * (rounding[j]! + size * 2 ** -52) + r * (size + rounding[j]!)) * (1 + 2 ** -40));
        }
      }
    }
    return sums;
  }
}
