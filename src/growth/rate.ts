/**
 * The rate function of (1/n) log |A_n...A_1|, as the Legendre transform of the pressure:
 * at the speed x = Lambda'(s), the rate is s x - Lambda(s). Lambda is taken on an even grid
 * of s, its derivative by central differences, so speeds are where the grid puts them and
 * the error is of second order in the grid's step.
 */
import { estimatedQuantity, type Quantity, quantityNumber } from "../quantity/quantity.js";
import type { PressureEstimator } from "./pressure.js";

const STEP = 0.125;
const FIRST = -4; // s = -0.5: below -1 the norm's and a vector's moments part ways
const LAST = 16; // s = 2

export interface RateRow {
  readonly speed: number;
  readonly rate: Quantity;
}

/** Rows with increasing speeds; one row alone where the pressure is a straight line. */
export async function rateTable(estimator: PressureEstimator): Promise<RateRow[]> {
  const nodes = Array.from({ length: LAST - FIRST + 1 }, (_, i) => (FIRST + i) * STEP);
  const away = nodes.filter((s) => s !== 0);
  const estimates = await estimator.estimate(away);
  const values = nodes.map((s) => (s === 0 ? 0 : quantityNumber(estimates[away.indexOf(s)] as Quantity)));
  const method = `Legendre transform of the estimated pressure, s in steps of ${STEP}`;
  const rows: RateRow[] = [];
  for (let i = 1; i + 1 < nodes.length; i++) {
    const s = nodes[i] as number;
    const speed = ((values[i + 1] as number) - (values[i - 1] as number)) / (2 * STEP);
    const last = rows.at(-1);
    // Noise can turn the speeds back where the pressure is nearly straight: such rows say nothing new.
    if (last !== undefined && speed <= last.speed + 1e-9) continue;
    const rate = Math.max(0, s * speed - (values[i] as number));
    rows.push({ speed, rate: estimatedQuantity(rate, method) });
  }
  return rows;
}
