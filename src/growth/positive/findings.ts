/** Findings of `growth` for moves of dimension 2 or 3 that are positive on a common cone: all of them enclosed. */
import { Rational } from "../../exact/rational.js";
import type { Real } from "../../kernel/real.js";
import { enclosedBetween, type Quantity } from "../../quantity/quantity.js";
import type { Session } from "../../session.js";
import type { Walk } from "../../walk/walk.js";
import type { WeightedMoves } from "../../walk/weights.js";
import type { GrowthWishes } from "../options.js";
import type { GrowthProof } from "../proof.js";
import { jobOf, type PositiveJob, positiveJob } from "./jobs.js";
import { type Enclosure, PositiveSet } from "./positive.js";
import { roundSpeeds } from "./rates.js";

/** Bits of what is reported to the digits of a double, by the number of coordinates of a direction. */
const BITS = [0, 64, 48];
/** Bits of the variance's parts: slopes of residuals cost some. */
const VARIANCE_BITS = 96;

/** Bits that a width of 10^-digits takes, with some to spare. */
const bitsFor = (digits: number) => Math.ceil((digits * 10) / 3) + 8;

const quantity = ({ low, high }: Enclosure, method: string, digits?: number): Quantity =>
  enclosedBetween(low, high, method, digits);

/** The walk of the inverses: its exponents are minus this walk's, in reverse order. */
function inverseOf({ dimension, moves }: WeightedMoves): WeightedMoves {
  return {
    dimension,
    moves: moves.map((m) => ({ ...m, matrix: inverseMatrix(m.matrix, m.determinant) })),
  };
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

/** The other exponents that follow: determinants are +-1. `back` is the first exponent of the inverses. */
function others(
  dimension: number,
  first: Enclosure,
  back: Enclosure | undefined,
  digits: number,
): (Quantity | undefined)[] {
  if (dimension === 2) return [quantity(negative(first), "minus the first: determinants are +-1", digits)];
  if (back === undefined) return [undefined, undefined];
  const middle = { low: back.low.sub(first.high), high: back.high.sub(first.low) };
  return [
    quantity(middle, "minus the two others: determinants are +-1"),
    quantity(negative(back), "minus the first of the inverses: their common cone"),
  ];
}

/** @returns undefined where the moves have no common cone, or contract it too slowly */
export async function provePositive(
  walk: Walk,
  wishes: GrowthWishes,
  session: Session,
  real: Real,
): Promise<GrowthProof | undefined> {
  const set = PositiveSet.of(walk, real);
  if (set === undefined) return undefined;
  session.checkStop();
  const plain = set.bitsWithin(BITS[set.cone.coordinates]);
  const asked = wishes.digits === undefined ? 0 : bitsFor(wishes.digits);
  const bits = set.bitsWithin(Math.max(plain, asked));
  const speeds = roundSpeeds(set);
  const inverse = walk.dimension === 2 ? undefined : inverseOf(walk);
  const jobs: PositiveJob[] = [
    jobOf(walk, { kind: "exponent", bits }),
    jobOf(walk, { kind: "variance", bits: set.bitsWithin(VARIANCE_BITS) }),
    ...wishes.pressure.map((s) => jobOf(walk, { kind: "pressure", s, bits: plain })),
    ...speeds.map((speed) => jobOf(walk, { kind: "rate", speed })),
    ...(inverse === undefined ? [] : [jobOf(inverse, { kind: "exponent", bits: BITS[2] })]),
  ];
  const found = (
    await session.pool.map(positiveJob, jobs, {
      signal: session.signal,
      onDone: (done) => session.progress("proofs on the common cone", done, jobs.length),
    })
  ).map((e) => e && { low: Rational.of(e.low.num, e.low.den), high: Rational.of(e.high.num, e.high.den) });
  const [first, variance] = found;
  if (first === undefined) return undefined;
  const pressures = new Map(wishes.pressure.map((s, i) => [s, found[2 + i]]));
  const rates = speeds.flatMap((speed, i) => {
    const rate = found[2 + wishes.pressure.length + i];
    return rate === undefined ? [] : [{ speed, rate: quantity(rate, RATE_METHOD) }];
  });
  const back = inverse && found.at(-1);
  const digits = Math.max(17, Math.min(wishes.digits ?? 0, Math.floor(bits * 0.3)) + 2);
  return {
    exponents: [
      quantity(first, "common cone: Poisson equation in Chebyshev's basis", digits),
      ...others(walk.dimension, first, back, digits),
    ],
    variance: variance && quantity(variance, "common cone: stationary mean of the martingale's squared increments"),
    pressure: (s) => {
      const value = pressures.get(s);
      return value && quantity(value, "common cone: quotients of the weighted operator's eigenfunction");
    },
    rates: rates.length === 0 ? undefined : rates,
    warnings:
      bits < asked
        ? [
            `the moves contract their cone slowly: the top exponent is enclosed to ${digits - 2} digits, not to the wanted ${wishes.digits}`,
          ]
        : [],
  };
}

const RATE_METHOD = "Legendre transform of the enclosed pressure, chords of the convex function";
