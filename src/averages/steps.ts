/** How many moves an interval of a given half-width takes. */
import { estimatedQuantity, type Quantity, quantityNumber } from "../quantity/quantity.js";
import { twoSidedNormal } from "../statistics/distributions.js";

const HALF_WIDTHS = [0.1, 0.01, 0.001];

export interface StepsInput {
  /** lim n Var(time average). */
  readonly variance: Quantity;
  readonly level: number;
  /** A bound on |sum over positions - n mean|, where there is one. */
  readonly spread?: number | undefined;
  /** What the start adds to that sum in the end, estimated. */
  readonly startSum?: number | undefined;
}

/**
 * z sqrt(variance / n) + |start's sum| / n <= h, z the normal quantile of the level, from
 * n = (z s + sqrt(z^2 s^2 + 4 h b))^2 / (4 h^2) on, s^2 the variance, b the start's sum.
 * Where sums stay bounded (`spread`), the average is within h of the mean from spread / h on, surely.
 */
export function stepsFor({
  variance,
  level,
  spread,
  startSum = 0,
}: StepsInput): { halfWidth: number; steps: Quantity }[] {
  const z = twoSidedNormal(level);
  return HALF_WIDTHS.map((halfWidth) => {
    if (spread !== undefined) {
      const steps = Math.max(1, Math.ceil(spread / halfWidth));
      return {
        halfWidth,
        steps: estimatedQuantity(steps, "variance 0: bound on the sums over the half-width; fewer may do"),
      };
    }
    const steps = (v: number) => {
      const width = z * Math.sqrt(v);
      const root = (width + Math.sqrt(width * width + 4 * halfWidth * Math.abs(startSum))) / (2 * halfWidth);
      return Math.max(1, Math.ceil(root * root));
    };
    const interval =
      variance.standing !== "exact" && variance.low !== undefined && variance.high !== undefined
        ? { low: steps(Math.max(0, Number(variance.low))), high: steps(Number(variance.high)) }
        : undefined;
    const known = interval !== undefined && interval.low < interval.high ? interval : undefined;
    const start = startSum === 0 ? "" : ", and what the start adds to the sums";
    return {
      halfWidth,
      steps: estimatedQuantity(
        steps(quantityNumber(variance)),
        `normal approximation at level ${level} from the variance above${start}`,
        known,
        level,
      ),
    };
  });
}
