/** The job of `law`: the moduli of some coefficients, step by step. */
import { defineJob } from "../kernel/jobs.js";
import { above, below, type Interval, plus, point, root, times } from "../quantity/interval.js";
import { type Quantity, quantityNumber } from "../quantity/quantity.js";
import { commonDenominator } from "../walk/denominator.js";
import { parseWalk } from "../walk/parse.js";
import { follow } from "./follow.js";
import type { ComplexQuantity } from "./readers.js";

export interface ModuliPayload {
  readonly document: unknown;
  readonly memoryLimit: number;
  readonly frequencies: readonly (readonly bigint[])[];
  readonly steps: number;
  /** For each frequency. */
  readonly entries: number;
  readonly products: number;
}

function intervalOf(q: Quantity): Interval {
  if (q.low === undefined || q.high === undefined) return point(quantityNumber(q));
  return { low: below(Number(q.low)), high: above(Number(q.high)) };
}

/** |re + i im|; at most 1, since it is a mean of numbers of modulus 1. */
export function modulusOf({ real, imag }: ComplexQuantity): Interval {
  if (real.value === 0 && imag.value === 0 && real.standing === "exact" && imag.standing === "exact") return point(0);
  const squared = (x: Interval): Interval => {
    const { low, high } = times(x, x);
    return { low: x.low <= 0 && x.high >= 0 ? 0 : Math.max(0, low), high };
  };
  const { low, high } = root(plus(squared(intervalOf(real)), squared(intervalOf(imag))));
  return { low: Math.min(1, low), high: Math.min(1, high) };
}

/** For each frequency |E exp(2 pi i k.x_n)| for n = 0, 1, ..., as far as its budget allows. */
export async function moduliOf(payload: ModuliPayload): Promise<Interval[][]> {
  const walk = parseWalk(payload.document as object);
  const denominator = commonDenominator(walk);
  const out: Interval[][] = [];
  for (const frequency of payload.frequencies) {
    const { coefficients } = await follow(walk, { ...payload, frequency, denominator });
    out.push(coefficients.map(modulusOf));
  }
  return out;
}

export const moduliJob = defineJob("law.moduli", moduliOf);
