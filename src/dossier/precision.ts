/** How long double precision lasts, from the growth rate. */
import type { GrowthResult } from "../growth/result.js";
import { estimatedQuantity, type Quantity, quantityNumber } from "../quantity/quantity.js";
import type { Answer, PrecisionResult } from "./result.js";
import { isAnswered } from "./result.js";

const BITS_OF_A_DOUBLE = 53;

/**
 * size / lambda; the rate of a single walk fluctuates about it, so that an interval is given
 * only where lambda itself is a statistical estimate.
 */
function lasts(size: number, lambda: Quantity, method: string): Quantity {
  const [low, high] = [lambda.low, lambda.high].map((end) => (end === undefined ? Number.NaN : Number(end)));
  const value = size / quantityNumber(lambda);
  if (lambda.standing !== "estimated" || !((low as number) > 0)) return estimatedQuantity(value, method);
  return estimatedQuantity(value, method, { low: size / (high as number), high: size / (low as number) }, lambda.level);
}

export function precisionOf(growth: Answer<GrowthResult>): Answer<PrecisionResult> {
  if (!isAnswered(growth)) return { skipped: "the growth rate was not answered" };
  const lambda = growth.exponents[0];
  if (lambda === undefined || !(quantityNumber(lambda) > 0) || Number(lambda.low ?? 1) <= 0) {
    return {
      skipped: "products are not known to grow exponentially, so no rate can be given at which digits are lost",
    };
  }
  return {
    movesOfDouble: lasts(BITS_OF_A_DOUBLE * Math.LN2, lambda, "53 ln 2 / lambda_1"),
    movesPerDigit: lasts(Math.LN10, lambda, "ln 10 / lambda_1"),
  };
}
