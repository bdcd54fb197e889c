/** Means and norms under Haar measure, from the observable itself. */
import { encloseRationals } from "../dual/enclose.js";
import type { RationalInterval } from "../dual/form.js";
import { ExactForm } from "../dual/form.js";
import { Rational } from "../exact/rational.js";
import { above, below, type Interval } from "../quantity/interval.js";
import { exactQuantity, type Quantity, quantityNumber } from "../quantity/quantity.js";
import type { Observable } from "../walk/walk.js";

export type Box = Observable & { readonly type: "box" };

/** Bounds of the box's volume, equal where its sides are rational. */
export function boxVolume(box: Box): RationalInterval {
  let low = Rational.ONE;
  let high = Rational.ONE;
  for (const [j, upper] of box.high.entries()) {
    const side = ExactForm.of(upper).add(ExactForm.of(box.low[j]!).neg()).enclose();
    low = low.mul(side.low.sign() > 0 ? side.low : Rational.ZERO);
    high = high.mul(side.high);
  }
  return { low, high };
}

function intervalQuantity(interval: RationalInterval, method: string): Quantity {
  return interval.low.equals(interval.high) ? exactQuantity(interval.low, method) : encloseRationals(interval, method);
}

export function boxMean(box: Box): Quantity {
  return intervalQuantity(boxVolume(box), "volume of the box");
}

/** <f, f> of the centred indicator: V (1 - V), monotone on each side of V = 1/2. */
export function boxSquareNorm(box: Box): Quantity {
  const { low, high } = boxVolume(box);
  const at = (v: Rational) => v.mul(Rational.ONE.sub(v));
  const [a, b] = [at(low), at(high)];
  const half = Rational.of(1, 2);
  const peak = low.compare(half) <= 0 && high.compare(half) >= 0;
  const [least, most] = a.compare(b) <= 0 ? [a, b] : [b, a];
  return intervalQuantity({ low: least, high: peak ? at(half) : most }, "V (1 - V) of the box's volume V");
}

export function isWholeTorus(box: Box): boolean {
  return box.low.every((x) => x.rational?.sign() === 0) && box.high.every((x) => x.rational?.equals(Rational.ONE));
}

/** Doubles around an exact or enclosed quantity. */
export function endsOf(q: Quantity): Interval {
  const value = quantityNumber(q);
  const [low, high] = [Number(q.low ?? value), Number(q.high ?? value)];
  // Reading a decimal, or a fraction, rounds to nearest: one unit more.
  return { low: below(below(low)), high: above(above(high)) };
}
