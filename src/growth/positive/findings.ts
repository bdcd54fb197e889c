/** Findings of `growth` for moves of dimension 2 or 3 that are positive on a common cone: all of them enclosed. */
import type { Real } from "../../kernel/real.js";
import { enclosedBetween, type Quantity } from "../../quantity/quantity.js";
import type { Session } from "../../session.js";
import type { Walk } from "../../walk/walk.js";
import type { GrowthWishes } from "../options.js";
import type { GrowthProof } from "../proof.js";
import { type Enclosure, PositiveSet } from "./positive.js";
import { positiveRates } from "./rates.js";

/** Bits of what is reported to the digits of a double, by the number of coordinates of a direction. */
const BITS = [0, 64, 48];
/** Bits of the variance's parts: slopes of residuals cost some. */
const VARIANCE_BITS = 96;

/** Bits that a width of 10^-digits takes, with some to spare. */
const bitsFor = (digits: number) => Math.ceil((digits * 10) / 3) + 8;

const quantity = ({ low, high }: Enclosure, method: string, digits?: number): Quantity =>
  enclosedBetween(low, high, method, digits);

/** The walk of the inverses: its exponents are minus this walk's, in reverse order. */
function inverseOf(walk: Walk): Walk {
  const moves = walk.moves.map((m) => ({ ...m, matrix: inverseMatrix(m.matrix, m.determinant) }));
  return { ...walk, moves };
}

/** Adjugate over the determinant +-1, dimension 3. */
function inverseMatrix(a: readonly (readonly bigint[])[], determinant: number): bigint[][] {
  const at = (i: number, j: number) => a[i % 3][j % 3];
  return [0, 1, 2].map((i) =>
    [0, 1, 2].map(
      (j) => BigInt(determinant) * (at(j + 1, i + 1) * at(j + 2, i + 2) - at(j + 1, i + 2) * at(j + 2, i + 1)),
    ),
  );
}

const negative = ({ low, high }: Enclosure): Enclosure => ({ low: high.neg(), high: low.neg() });

/** The other exponents that follow from the first: determinants are +-1. */
function others(walk: Walk, first: Enclosure, digits: number, real: Real): (Quantity | undefined)[] {
  const opposite = quantity(negative(first), "minus the first: determinants are +-1", digits);
  if (walk.dimension === 2) return [opposite];
  const inverses = PositiveSet.of(inverseOf(walk), real);
  if (inverses === undefined) return [undefined, undefined];
  const back = inverses.exponent(inverses.bitsWithin(BITS[2]));
  const middle = { low: back.low.sub(first.high), high: back.high.sub(first.low) };
  return [
    quantity(middle, "minus the two others: determinants are +-1"),
    quantity(negative(back), "minus the first of the inverses: their common cone"),
  ];
}

/** @returns undefined where the moves have no common cone, or contract it too slowly */
export function provePositive(walk: Walk, wishes: GrowthWishes, session: Session, real: Real): GrowthProof | undefined {
  const set = PositiveSet.of(walk, real);
  if (set === undefined) return undefined;
  session.checkStop();
  session.progress("common cone", 0, 1);
  const plain = BITS[set.cone.coordinates];
  const wanted = Math.max(plain, bitsFor(wishes.digits ?? 0));
  const bits = set.bitsWithin(wanted);
  const digits = Math.max(17, Math.min(wishes.digits ?? 0, Math.floor(bits * 0.3)) + 2);
  const first = set.exponent(bits);
  const exponent = quantity(first, "common cone: Poisson equation in Chebyshev's basis", digits);
  const warnings =
    bits < bitsFor(wishes.digits ?? 0)
      ? [
          `the moves contract their cone slowly: the top exponent is enclosed to ${digits - 2} digits, not to the wanted ${wishes.digits}`,
        ]
      : [];
  session.checkStop();
  const variance = set.variance(set.bitsWithin(VARIANCE_BITS));
  return {
    exponents: [exponent, ...others(walk, first, digits, real)],
    variance: variance && quantity(variance, "common cone: stationary mean of the martingale's squared increments"),
    pressure: (s) => {
      session.checkStop();
      const found = set.pressure(s, set.bitsWithin(plain));
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
