/**
 * Sums of exact numbers with rational multipliers, kept as written: a rational part and
 * multiples of the irrational numbers met, told apart by their text. So sqrt(2) at k and
 * -sqrt(2) times the same number at -k cancel exactly.
 */
import type { ExactNumber } from "../exact/number.js";
import { Rational } from "../exact/rational.js";

const BITS = 256;

export interface RationalInterval {
  readonly low: Rational;
  readonly high: Rational;
}

export class ExactForm {
  private constructor(
    private readonly part: Rational,
    private readonly rest: ReadonlyMap<string, { readonly x: ExactNumber; readonly times: Rational }>,
  ) {}

  static readonly ZERO = new ExactForm(Rational.ZERO, new Map());

  static of(x: ExactNumber): ExactForm {
    if (x.rational !== undefined) return new ExactForm(x.rational, new Map());
    return new ExactForm(Rational.ZERO, new Map([[x.text, { x, times: Rational.ONE }]]));
  }

  static ofRational(x: Rational): ExactForm {
    return new ExactForm(x, new Map());
  }

  add(other: ExactForm): ExactForm {
    const rest = new Map(this.rest);
    for (const [text, { x, times }] of other.rest) {
      const sum = (rest.get(text)?.times ?? Rational.ZERO).add(times);
      if (sum.sign() === 0) rest.delete(text);
      else rest.set(text, { x, times: sum });
    }
    return new ExactForm(this.part.add(other.part), rest);
  }

  scale(factor: Rational): ExactForm {
    if (factor.sign() === 0) return ExactForm.ZERO;
    const rest = new Map([...this.rest].map(([text, { x, times }]) => [text, { x, times: times.mul(factor) }]));
    return new ExactForm(this.part.mul(factor), rest);
  }

  neg(): ExactForm {
    return this.scale(Rational.of(-1));
  }

  /** The value, where it is rational as written. */
  get rational(): Rational | undefined {
    return this.rest.size === 0 ? this.part : undefined;
  }

  /** Proved zero. */
  get isZero(): boolean {
    return this.rest.size === 0 && this.part.sign() === 0;
  }

  /** Bounds, a width of some 2^-250 times the multipliers apart; equal for a rational. */
  enclose(): RationalInterval {
    const scale = 1n << BigInt(BITS);
    let middle = this.part;
    let radius = Rational.ZERO;
    for (const { x, times } of this.rest.values()) {
      middle = middle.add(times.mul(Rational.of(x.toFixed(BITS), scale)));
      radius = radius.add(times.abs().mul(Rational.of(1n, scale)));
    }
    return { low: middle.sub(radius), high: middle.add(radius) };
  }

  /** Proved different from zero. */
  get isNonZero(): boolean {
    const { low, high } = this.enclose();
    return low.sign() > 0 || high.sign() < 0;
  }

  /** A double near the value, and a bound on its distance from it. */
  toDouble(): { readonly value: number; readonly error: number } {
    const { low, high } = this.enclose();
    const value = low.add(high).mul(Rational.of(1, 2)).toNumber();
    const x = Rational.fromNumber(value);
    const off = [x.sub(low).abs(), x.sub(high).abs()].reduce((a, b) => (a.compare(b) > 0 ? a : b));
    // The distance itself is rounded: a few units in its last place on top.
    return { value, error: off.toNumber() * (1 + 2 ** -40) };
  }
}
