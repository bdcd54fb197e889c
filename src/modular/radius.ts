/**
 * The radius of convergence of sum over n of z^n mu^n(e), mu the law of the moves on
 * PGL_2(Z): between a z at which the first-passage equations are proved to have a finite
 * solution, and one at which they are proved to have none (see passage.ts).
 *
 * Finite: any G >= 0 with Phi_z(G) <= G, rounded up, and R^n -> 0 for the returns at G.
 *
 * None: let x be below the least solution F. Phi is a quadratic map with non-negative
 * coefficients, so y = F - x has y >= r + Phi'(x) y, r = Phi(x) - x. Take h >= 0 and, where
 * h > 0, r >= c h with c > 0 and Phi'(x) h >= l h. If t is the largest number with y >= t h,
 * then t >= c + l t (two steps of Phi' at a time serve as well): so F >= x + c / (1 - l) h for l < 1, a long step where F is slowly
 * approached, and F is not finite for l >= 1. All of it is evaluated with rounding down.
 */
import type { Rational } from "../exact/rational.js";
import { above, below } from "../quantity/interval.js";
import { type Chain, chainOf, LETTERS } from "./chain.js";
import { LeastSolver } from "./solve.js";
import { derivative, each, filled, image, isAbove, largestStep, returns, supportOf, type Triple } from "./system.js";
import type { Matrix2 } from "./words.js";

export interface Radius {
  /** Proved: finite here, or 1, where sums of probabilities always are. */
  readonly finite: number;
  /** Whether finiteness was proved at `finite` by a certificate. */
  readonly certified: boolean;
  /** Proved: not finite here; Infinity where no such z was found. */
  readonly infinite: number;
  readonly states: number;
}

type Answer = { readonly type: "finite"; readonly rate: number } | { readonly type: "infinite" | "unknown" };

const LONG_STEPS = 20;
const ITERATIONS = 20;
/** Where a direction is taken up again. */
const FEW = 8;
/** Terms of the series behind the slack of the entries that h leaves out. */
const ROUNDS = 100;
/** Growth of an entry a move below which a finite solution is tried. */
const SETTLED = 1e-10;
/** Entries of a direction smaller than this, relatively, are left out. */
const NEGLIGIBLE = 1e-5;

const largestOf = (f: Triple) => LETTERS.reduce((m, x) => f[x].reduce((a, b) => Math.max(a, b), m), 0);

/** The direction in which F is approached slowest: any h will do for the proofs. */
function slowest(chain: Chain, x: Triple, from: Triple, rounds: number): Triple {
  let h = from;
  for (let k = 0; k < rounds; k++) {
    const next = derivative(chain, x, h, "low");
    const size = largestOf(next);
    if (!(size > 0)) return h;
    // Half of each: eigenvalues of the largest modulus other than the largest itself would make h swing.
    h = each(h, next, (a, b) => a / 2 + b / (2 * size));
  }
  return each(h, h, (a) => (a < NEGLIGIBLE ? 0 : a));
}

/** The largest c with f >= c h where h > 0, rounded down; 0 where h is 0. */
function smallestRatio(f: Triple, h: Triple): number {
  let least = Number.POSITIVE_INFINITY;
  for (const x of LETTERS) {
    for (let i = 0; i < h[x].length; i++) if (h[x][i]! > 0) least = Math.min(least, f[x][i]! / h[x][i]!);
  }
  return least < Number.POSITIVE_INFINITY ? below(least) : 0;
}

/** G = x + s h + small for the s that makes Phi(G) - G smallest along h, and smaller ones. */
function proveFinite(chain: Chain, x: Triple, rough: Triple, rate: number): boolean {
  const h = slowest(chain, x, rough, 2 * ITERATIONS);
  const none = filled(chain.n, 0);
  const [curved, straight] = [derivative(chain, h, h, "high"), derivative(chain, none, h, "high")];
  // Along h, Phi(x + s h) - x - s h = r - s (1 - rate) h + s^2 q h, nearly.
  let weight = 0;
  let bend = 0;
  for (const l of LETTERS) {
    for (let i = 0; i < h[l].length; i++) {
      weight += h[l][i]! ** 2;
      bend += (h[l][i]! * (curved[l][i]! - straight[l][i]!)) / 2;
    }
  }
  const best = bend > 0 ? ((1 - rate) / 2) * (weight / bend) : 1;
  const support = supportOf(chain);
  let small = support;
  let ended = false;
  // 1 + Phi' 1 + Phi' Phi' 1 + ...: what is left of its next term shrinks, but along h.
  for (let k = 0; k < ROUNDS; k++) {
    const next = each(derivative(chain, x, small, "high"), support, (a, b) => (a + 1) * b);
    const grown = largestStep(small, next);
    small = next;
    ended = grown < 0.5;
    if (ended) break;
  }
  const proves = (g: Triple): boolean => {
    if (!isAbove(chain, g, support)) return false;
    const r = returns(chain, g, "high");
    return new LeastSolver({ low: r, high: r }).contracts;
  };
  // Far from the radius that series is enough.
  for (let s = 1e-2; ended && s > 1e-12; s /= 100) {
    if (proves(each(x, small, (a, b) => a + s * b))) return true;
  }
  for (let s = Math.min(best, 1); s > 1e-12; s /= 4) {
    for (let epsilon = 1e-4; epsilon > 1e-9; epsilon /= 30) {
      const g = each(
        each(x, h, (a, b) => a + s * b),
        small,
        (a, b) => a + s * epsilon * b,
      );
      if (proves(g)) return true;
    }
  }
  return false;
}

/**
 * r + Phi'(x) r from below, r known from below. Rounding may have made entries of it negative:
 * Phi' r >= Phi' r+ - v Phi' 1 with v the size of the least of them.
 */
function twice(chain: Chain, x: Triple, r: Triple): Triple {
  const positive = each(r, r, (a) => Math.max(0, a));
  const least = LETTERS.reduce((m, l) => r[l].reduce((a, b) => Math.min(a, b), m), 0);
  const lost = derivative(chain, x, filled(chain.n, -least), "high");
  const gained = derivative(chain, x, positive, "low");
  return each(
    r,
    each(gained, lost, (a, b) => below(a - b)),
    (a, b) => below(a + b),
  );
}

function decide(chain: Chain): Answer {
  let x = filled(chain.n, 0);
  let h = filled(chain.n, 1);
  let rate = 0;
  for (let k = 0; k < LONG_STEPS; k++) {
    for (let i = 0; i < ITERATIONS; i++) {
      const next = image(chain, x, "low");
      x = each(x, next, Math.max);
    }
    const next = image(chain, x, "low");
    const left = largestStep(x, next);
    const r = each(x, next, (a, b) => Math.max(0, below(b - a)));
    if (!(left < 1e9)) return { type: "unknown" };
    h =
      k === 0
        ? slowest(chain, x, r, ITERATIONS)
        : slowest(
            chain,
            x,
            each(h, r, (a, b) => a + b),
            FEW,
          );
    // Two moves at a time, y >= r + Phi' r + Phi' Phi' y: some entries grow at every second only.
    const step2 = derivative(chain, x, derivative(chain, x, h, "low"), "low");
    const two = smallestRatio(step2, h);
    rate = Math.sqrt(Math.max(0, two));
    const c = smallestRatio(
      twice(
        chain,
        x,
        each(x, next, (a, b) => below(b - a)),
      ),
      h,
    );
    if (c > 0 && two >= 1) return { type: "infinite" };
    if (left < SETTLED) break;
    if (!(c > 0)) continue;
    const step = below(c / above(1 - two));
    x = each(x, h, (a, b) => Math.max(0, below(a + below(step * b))));
  }
  return proveFinite(chain, x, h, rate) ? { type: "finite", rate } : { type: "unknown" };
}

export interface RadiusOptions {
  readonly mostStates: number;
  /** Relative distance of the two ends at which to stop; by default 1e-7, and more for many states. */
  readonly tolerance?: number;
  /** Most z to look at. */
  readonly most?: number;
}

const FARTHEST = 64;
const nearness = (states: number) => (states <= 40 ? 1e-7 : states <= 64 ? 1e-6 : 1e-3);

/** Bounds of the radius; undefined where the chain has too many states. @throws RangeError for words too long */
export function radius(
  matrices: readonly Matrix2[],
  probabilities: readonly Rational[],
  { mostStates, tolerance, most }: RadiusOptions,
): Radius | undefined {
  const at = (z: number) => chainOf(matrices, probabilities, { signs: false, z, mostStates });
  const first = at(1);
  if (first === undefined) return undefined;
  const near = tolerance ?? nearness(first.n);
  const looks = most ?? (first.n <= 40 ? 24 : 14);
  let finite = 1;
  let infinite = Number.POSITIVE_INFINITY;
  /** (z, (1 - rate)^2): nearly a line near the radius, where it meets 0. */
  const seen: { z: number; m: number }[] = [];
  const look = (z: number): Answer => {
    const answer = decide(at(z) as Chain);
    if (answer.type === "finite") {
      finite = Math.max(finite, z);
      seen.push({ z, m: (1 - answer.rate) ** 2 });
    } else if (answer.type === "infinite") infinite = Math.min(infinite, z);
    return answer;
  };
  const certified = look(1).type === "finite";
  const end = (): Radius => ({ finite, certified, infinite, states: first.n });
  if (!certified) {
    look(1 + 1e-6);
    return end();
  }
  let z = 1;
  let looked = 1;
  while (infinite === Number.POSITIVE_INFINITY && z < FARTHEST) {
    z *= z < 2 ? 1.25 : 2;
    looked++;
    if (look(z).type === "unknown") break;
  }
  let refused = infinite;
  for (; looked < looks && refused > finite * (1 + near); looked++) {
    if (!(refused < Number.POSITIVE_INFINITY)) refused = z;
    const [a, b] = seen.slice(-2);
    let guess = (finite + refused) / 2;
    if (a !== undefined && b !== undefined && a.m > b.m && b.z > a.z) {
      const crossing = b.z + (b.m * (b.z - a.z)) / (a.m - b.m);
      const side = looked % 2 === 0 ? -1 : 1;
      const beside = crossing * (1 + (side * near) / 4);
      if (beside > finite && beside < refused) guess = beside;
    }
    if (look(guess).type !== "finite") refused = Math.min(refused, guess);
  }
  // Where no answer was found too near the radius, from farther away.
  for (let apart = near; apart < 0.1 && infinite > finite * (1 + 2 * apart); apart *= 4) {
    look(Math.min(refused, infinite) * (1 - apart));
    look(finite * (1 + apart));
  }
  return end();
}
