/** Findings of `growth` for moves of dimension 2 that are positive on a common cone: all of them enclosed. */
import type { Real } from "../../kernel/real.js";
import { enclosedBetween, type Quantity } from "../../quantity/quantity.js";
import type { Session } from "../../session.js";
import type { Walk } from "../../walk/walk.js";
import type { GrowthWishes } from "../options.js";
import type { GrowthProof } from "../proof.js";
import { type Enclosure, PositiveSet } from "./positive.js";
import { positiveRates } from "./rates.js";

/** Bits of everything that is reported to the digits of a double. */
const BITS = 64;
/** Bits of the variance's parts: slopes of residuals cost some. */
const VARIANCE_BITS = 96;

/** Bits that a width of 10^-digits takes, with some to spare. */
const bitsFor = (digits: number) => Math.ceil((digits * 10) / 3) + 8;

const quantity = ({ low, high }: Enclosure, method: string, digits?: number): Quantity =>
  enclosedBetween(low, high, method, digits);

/** @returns undefined where the moves have no common cone, or contract it too slowly */
export function provePositive(walk: Walk, wishes: GrowthWishes, session: Session, real: Real): GrowthProof | undefined {
  const set = PositiveSet.of(walk, real);
  if (set === undefined) return undefined;
  session.checkStop();
  session.progress("common cone", 0, 1);
  const wanted = Math.max(BITS, bitsFor(wishes.digits ?? 0));
  const bits = set.bitsWithin(wanted);
  const digits = Math.max(17, Math.min(wishes.digits ?? 0, Math.floor(bits * 0.3)) + 2);
  const exponent = quantity(set.exponent(bits), "common cone: Poisson equation in Chebyshev's basis", digits);
  const warnings =
    bits < wanted
      ? [
          `the moves contract their cone slowly: the top exponent is enclosed to ${digits - 2} digits, not to the wanted ${wishes.digits}`,
        ]
      : [];
  session.checkStop();
  const variance = set.variance(set.bitsWithin(VARIANCE_BITS));
  return {
    exponent,
    variance: variance && quantity(variance, "common cone: stationary mean of the martingale's squared increments"),
    pressure: (s) => {
      session.checkStop();
      const found = set.pressure(s, BITS);
      return found && quantity(found, "common cone: quotients of the weighted operator's eigenfunction");
    },
    rates: () => {
      if (variance === undefined) return undefined;
      return positiveRates(set, variance.low.toNumber(), (done, total) => {
        session.checkStop();
        session.progress("rates of large deviations", done, total);
      });
    },
    warnings,
  };
}
