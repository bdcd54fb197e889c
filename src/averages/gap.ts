/** How fast mean-zero functions shrink under the averaging operator, in dimension 2: `gap` of the result. */
import { Rational } from "../exact/rational.js";
import { type Certificate, type GapBounds, gapBounds } from "../modular/gap.js";
import { certifyFree, type Freedom } from "../modular/ping-pong.js";
import { transposed } from "../modular/variance.js";
import { type Interval, minus, point } from "../quantity/interval.js";
import { closedForm, enclosedQuantity, type Quantity } from "../quantity/quantity.js";
import type { Walk } from "../walk/walk.js";
import { type ModularMove, movesOf } from "./modular.js";

export interface Gap {
  /** Norm of f -> P f on functions of mean 0 in L2. */
  readonly norm: Quantity;
  /** Its spectral radius there: |<f, P^n g>|^(1/n) ends at or below it for all f and g. */
  readonly spectralRadius: Quantity;
  /** 1 less the spectral radius. */
  readonly gap: Quantity;
  /** Kesten's value of the norm, where the moves are proved to be free generators and their inverses, equally weighed. */
  readonly kesten?: Quantity;
  readonly evidence: Readonly<Record<string, unknown>>;
}

export interface GapPayload {
  readonly moves: readonly ModularMove[];
  readonly states: number;
}

export interface GapFinding {
  readonly bounds?: GapBounds;
  readonly free?: Freedom;
}

export function findGap({ moves, states }: GapPayload): GapFinding {
  const list = moves.map(({ matrix, num, den }) => ({ matrix, probability: Rational.of(num, den) }));
  const bounds = gapBounds(list, states);
  if (bounds === undefined) return {};
  const equal = list.every((m) => m.probability.equals(list[0]!.probability));
  const free = equal && bounds.symmetric ? certifyFree(list.map((m) => transposed(m.matrix))) : undefined;
  return { bounds, ...(free === undefined ? {} : { free }) };
}

export function gapPayload(walk: Walk, states: number): GapPayload {
  return { moves: movesOf(walk), states };
}

function shown({ of, radius }: Certificate) {
  return {
    of,
    states: radius.states,
    ...(radius.certified ? { finiteAt: radius.finite } : {}),
    ...(Number.isFinite(radius.infinite) ? { notFiniteAt: radius.infinite } : {}),
  };
}

const texts = (m: readonly bigint[]) => [m.slice(0, 2).map(String), m.slice(2).map(String)];

/** Undefined where nothing below 1 was proved. */
export function gapOf(walk: Walk, { bounds, free }: GapFinding): Gap | undefined {
  if (bounds === undefined) return undefined;
  const translated = walk.moves.some((m) => m.translation !== undefined);
  const { least, freeSemigroup } = bounds;
  const norm = translated ? { low: least, high: bounds.norm.high } : bounds.norm;
  const radius = translated
    ? { low: freeSemigroup ? least : 0, high: bounds.spectralRadius.high }
    : bounds.spectralRadius;
  const method = `radii of convergence on the modular group by certificates${translated ? "; from above, since translations only add phases, and from below the root of the sum of squared probabilities" : ""}`;
  // Of a mere upper bound, the bound is what a reader wants to see.
  const quantity = ({ low, high }: Interval, how = method) => {
    const q = enclosedQuantity(low, high, how);
    return low === 0 ? { ...q, value: high } : q;
  };
  const { low, high } = minus(point(1), radius);
  const radiusMethod = bounds.freeSemigroup
    ? "the root of the sum of squared probabilities: the moves generate a free semigroup (rapid decay, Haagerup 1978)"
    : `${method}; |P^m|^(1/m), the least found`;
  const k = (free?.generators.length ?? 0) as number;
  return {
    norm: quantity(norm),
    spectralRadius: quantity(radius, bounds.symmetric ? method : radiusMethod),
    gap: {
      ...enclosedQuantity(Math.max(0, low), Math.min(1, high), "1 less the spectral radius"),
      ...(radius.low === 0 ? { value: Math.max(0, low) } : {}),
    },
    ...(free === undefined || translated
      ? {}
      : {
          kesten: closedForm(
            `sqrt(${2 * k - 1})/${k}`,
            Math.sqrt(2 * k - 1) / k,
            "Kesten 1959: the moves are free generators and their inverses, by ping-pong",
          ),
        }),
    evidence: {
      reading:
        "At the z called finite some G >= 0 has Phi_z(G) <= G in the equations of first passages, so that the sum over n of z^n times the probability of return converges; at the one called not finite no G has. |P^m|^2 is the inverse of the radius of convergence for P*^m P^m.",
      certificates: bounds.certificates.map(shown),
      ...(free === undefined
        ? {}
        : {
            pingPong: free.arcs.map(({ matrix, from, to }) => ({
              transposedMove: texts(matrix),
              from: from.map(String),
              to: to.map(String),
            })),
          }),
    },
  };
}
