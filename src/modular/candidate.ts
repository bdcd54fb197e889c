/** Where the certificate of exponent.ts comes from: L and h, found in floating point. */
import type { Real } from "../kernel/real.js";
import { chebyshev, coefficients, dot, roots } from "./chebyshev.js";
import type { Part, Side } from "./runs.js";
import type { Operator } from "./transfer.js";

/** Coefficients of h: what it is analytic in lets them fall like 5.8^-k. */
export const DEGREE = 28;
const ITERATIONS = 200;

export interface Candidate {
  readonly value: number;
  readonly h: Readonly<Record<Part, readonly Float64Array[]>>;
}

/** A function a state, by its values at the roots. */
type Values = readonly Float64Array[];

/** One half of the operator on values at the roots, in floating point. */
function halfOperator(side: Side, n: number, real: Real): (h: Values) => Values {
  const nodes = roots(DEGREE, real);
  const table = Array.from(nodes, (x) => chebyshev(x, DEGREE, new Float64Array(DEGREE)));
  const bases = side.powers.map((_, l) =>
    Array.from(nodes, (x) => chebyshev(1 / (l + 1 + x), DEGREE, new Float64Array(DEGREE))),
  );
  return (h) => {
    const c = h.map((values) => coefficients(values, table));
    const out = Array.from({ length: n }, () => new Float64Array(DEGREE));
    const mixed = new Float64Array(DEGREE);
    for (const [l, { mid }] of side.powers.entries()) {
      for (const k of side.columns) {
        // (P^l)' on the states first: then one evaluation a state.
        mixed.fill(0);
        for (let j = 0; j < n; j++) {
          const w = mid[j * n + k]!;
          if (w === 0) continue;
          const from = c[j]!;
          for (let m = 0; m < DEGREE; m++) mixed[m]! += w * from[m]!;
        }
        const to = out[k]!;
        const at = bases[l]!;
        for (let i = 0; i < DEGREE; i++) to[i]! += dot(mixed, at[i]!);
      }
    }
    return out;
  };
}

const combine = (x: Values, y: Values, factor: number): Values =>
  x.map((values, k) => values.map((v, i) => v + factor * y[k]![i]!));

function inner(x: Values, y: Values): number {
  return x.reduce((sum, values, k) => sum + values.reduce((t, v, i) => t + v * y[k]![i]!, 0), 0);
}

/**
 * Finds L and h in floating point: nothing here need be right. Both h_A and h_B are brought up
 * to date in turn, once for the source T f and once for T 1; what then is left on B tends to a
 * multiple of one and the same function, and L is the quotient.
 */
export function search(operator: Operator, real: Real): Candidate {
  const { n, sides } = operator;
  const nodes = roots(DEGREE, real);
  const toA = halfOperator(sides.A, n, real);
  const toB = halfOperator(sides.B, n, real);
  const growth = (part: Part): Values => {
    const columns = Array.from(nodes, (x) => operator.source(part, x, 0));
    return Array.from({ length: n }, (_, k) => Float64Array.from(columns, (sums) => sums.value(k)));
  };
  const ones = (part: Part): Values =>
    Array.from({ length: n }, (_, k) =>
      new Float64Array(DEGREE).fill(
        sides[part].rows.reduce((s, { powers }) => s + powers.reduce((t, { mid }) => t + mid[k]!, 0), 0),
      ),
    );
  const sources = [
    { A: growth("A"), B: growth("B") },
    { A: ones("A"), B: ones("B") },
  ] as const;
  const zero = (): Values => Array.from({ length: n }, () => new Float64Array(DEGREE));
  let h = sources.map(() => ({ A: zero(), B: zero() }));
  let best: { left: number; found: Candidate } | undefined;
  let value = 0;
  for (let i = 0, stalled = 0; i < ITERATIONS && stalled < 6; i++) {
    const next = h.map(({ B }, which) => {
      const A = combine(sources[which]!.A, toA(B), 1);
      return { A, B: combine(sources[which]!.B, toB(A), 1) };
    });
    const [r, one] = next.map(({ B }, which) => combine(B, h[which]!.B, -1)) as [Values, Values];
    value = inner(r, one) / inner(one, one);
    const rest = combine(r, one, -value);
    const left = Math.sqrt(inner(rest, rest));
    if (best === undefined || left < 0.9 * best.left) stalled = 0;
    else stalled++;
    if (best === undefined || left < best.left) {
      // A is what the h_B of before gave: h_A and that h_B leave a residual on B only.
      const [f, g] = [next[0]!, next[1]!];
      const [fB, gB] = [h[0]!.B, h[1]!.B];
      const table = Array.from(nodes, (x) => chebyshev(x, DEGREE, new Float64Array(DEGREE)));
      const polynomials = (v: Values) => v.map((values) => coefficients(values, table));
      const found = {
        value,
        h: { A: polynomials(combine(f.A, g.A, -value)), B: polynomials(combine(fB, gB, -value)) },
      };
      best = { left, found };
    }
    h = next;
  }
  return (best as { found: Candidate }).found;
}
