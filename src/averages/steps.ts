/** How many moves an interval of a given half-width takes. */
import { estimatedQuantity, type Quantity, quantityNumber } from "../quantity/quantity.js";
import { twoSidedNormal } from "../statistics/distributions.js";

const HALF_WIDTHS = [0.1, 0.01, 0.001];

/**
 * z sqrt(variance / n) <= h from n = z^2 variance / h^2 on, z the normal quantile of the level.
 * Where sums stay bounded (`spread`), the average is within h of the mean from spread / h on, surely.
 */
export function stepsFor(
  variance: Quantity,
  level: number,
  spread: number | undefined,
): { halfWidth: number; steps: Quantity }[] {
  const z = twoSidedNormal(level);
  return HALF_WIDTHS.map((halfWidth) => {
    if (spread !== undefined) {
      const steps = Math.max(1, Math.ceil(spread / halfWidth));
      return {
        halfWidth,
        steps: estimatedQuantity(steps, "variance 0: bound on the sums over the half-width; fewer may do"),
      };
    }
    const steps = (v: number) => Math.max(1, Math.ceil((z * z * v) / (halfWidth * halfWidth)));
    const interval =
      variance.standing === "estimated" && variance.low !== undefined && variance.high !== undefined
        ? { low: steps(Number(variance.low)), high: steps(Number(variance.high)) }
        : undefined;
    return {
      halfWidth,
      steps: estimatedQuantity(
        steps(quantityNumber(variance)),
        `normal approximation at level ${level} from the variance above`,
        interval,
        level,
      ),
    };
  });
}
