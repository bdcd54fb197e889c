/** The equations F = Phi(F) of first passages (see passage.ts), rounded to either side. */
import { addBound, type Dense, multiplyBound, type Side } from "./bounds.js";
import { type Chain, LETTERS } from "./chain.js";
import type { Letter } from "./words.js";

export type Triple = Record<Letter, Dense>;

/** Phi(F), rounded to a side. */
export function image(chain: Chain, f: Triple, side: Side): Triple {
  const { n, turn } = chain;
  const t = side === "low" ? chain.low : chain.high;
  const mul = (a: Dense, b: Dense) => multiplyBound(a, b, n, side);
  const throughU = turn(mul(t.u, f.u));
  const detour = addBound(side, mul(t.v, f.V), mul(t.V, f.v));
  return {
    u: addBound(side, t.u, mul(t.e, f.u), mul(detour, f.u)),
    v: addBound(side, t.v, mul(t.e, f.v), mul(throughU, f.v), mul(t.V, f.V)),
    V: addBound(side, t.V, mul(t.e, f.V), mul(throughU, f.V), mul(t.v, f.v)),
  };
}

/** The derivative of Phi at F in direction H, rounded to a side. */
export function derivative(chain: Chain, f: Triple, h: Triple, side: Side): Triple {
  const { n, turn } = chain;
  const t = side === "low" ? chain.low : chain.high;
  const mul = (a: Dense, b: Dense) => multiplyBound(a, b, n, side);
  const add = (...terms: Dense[]) => addBound(side, ...terms);
  const detour = add(mul(t.v, f.V), mul(t.V, f.v));
  const detourH = add(mul(t.v, h.V), mul(t.V, h.v));
  const throughU = turn(mul(t.u, f.u));
  const throughUH = turn(mul(t.u, h.u));
  return {
    u: add(mul(t.e, h.u), mul(detour, h.u), mul(detourH, f.u)),
    v: add(mul(t.e, h.v), mul(throughU, h.v), mul(throughUH, f.v), mul(t.V, h.V)),
    V: add(mul(t.e, h.V), mul(throughU, h.V), mul(throughUH, f.V), mul(t.v, h.v)),
  };
}

export function each(f: Triple, g: Triple, body: (a: number, b: number) => number): Triple {
  const out = filled(Math.round(Math.sqrt(f.u.length)), 0);
  for (const x of LETTERS) {
    const [to, a, b] = [out[x], f[x], g[x]];
    for (let i = 0; i < to.length; i++) to[i] = body(a[i]!, b[i]!);
  }
  return out;
}

/** The largest growth of an entry from f to g. */
export function largestStep(f: Triple, g: Triple): number {
  let most = 0;
  for (const x of LETTERS) for (let i = 0; i < f[x].length; i++) most = Math.max(most, g[x][i]! - f[x][i]!);
  return most;
}

export function filled(n: number, value: number): Triple {
  const matrix = () => new Float64Array(n * n).fill(value);
  return { u: matrix(), v: matrix(), V: matrix() };
}

/** 1 where the least solution is positive, 0 where it is 0: of the equations' structure, whatever the weights. */
export function supportOf(chain: Chain): Triple {
  let support = filled(chain.n, 0);
  for (;;) {
    const next = each(image(chain, support, "low"), support, (a, b) => (a > 0 || b > 0 ? 1 : 0));
    if (largestStep(support, next) === 0) return support;
    support = next;
  }
}

/**
 * Whether Phi(G) <= G, proved: then the least solution is at most G. G is 0 off the
 * support, where Phi(G) is 0 then too (what is computed there is rounding).
 */
export function isAbove(chain: Chain, g: Triple, support: Triple): boolean {
  const mapped = image(chain, g, "high");
  return LETTERS.every((x) => mapped[x].every((value, i) => support[x][i] === 0 || value <= g[x][i]!));
}

/** The probabilities R of coming back to the identity for the first time, by states at both ends. */
export function returns(chain: Chain, f: Triple, side: Side): Dense {
  const t = side === "low" ? chain.low : chain.high;
  const mul = (a: Dense, b: Dense) => multiplyBound(a, b, chain.n, side);
  return addBound(side, t.e, chain.turn(mul(t.u, f.u)), mul(t.v, f.V), mul(t.V, f.v));
}
