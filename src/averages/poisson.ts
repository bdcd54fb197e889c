/**
 * The Poisson equation f = g - P g, solved as well as a set of frequencies allows, in any
 * dimension: g0 = f + P f + ... as far as the set reaches, then least squares on |r|,
 * r = f - (g - P g), over all g on the set (conjugate gradients on the normal equations).
 * The same for P*: f = h - P* h + s.
 *
 * With G = 1 + P + P^2 + ..., <f, G f> = <f, g> + <h, r> + <s, G r>, so that
 *   2 (<f, g> + <h, r>) - <f, f>
 * is off the limit variance by at most 2 |r| |s| |G| (L2 norms on mean-zero functions): of
 * second order in the residuals, which are reported, but |G| is not bounded here.
 */
import type { DualMove, FrequencyTerm } from "../kernel/dual.js";
import { loadReal, type Real } from "../kernel/real.js";

export interface PoissonPayload {
  readonly forward: readonly DualMove[];
  /** The moves of P*; absent where P is its own adjoint. */
  readonly backward?: readonly DualMove[];
  /** Coefficients of e_k for one of k and -k each; the other's is the conjugate. */
  readonly terms: readonly FrequencyTerm[];
  /** Most frequencies (of +-k one) on which g lives. */
  readonly entries: number;
}

export interface PoissonFit {
  /** 2 (<f, g> + <h, r>) - <f, f>. */
  readonly variance: number;
  /** |g|^2 - |P g|^2, the variance of g - P g. */
  readonly byNorms: number;
  readonly norm: number;
  /** |r| and |s|. */
  readonly residual: number;
  readonly adjointResidual: number;
  readonly frequencies: number;
}

/** Frequencies reached, in order of steps, and what each move makes of the first of them. */
interface Reach {
  readonly index: ReadonlyMap<string, number>;
  /** Frequencies on which g lives: the first ones. */
  readonly inner: number;
  readonly moves: number;
  readonly target: Int32Array;
  /** Real and imaginary part of weight and phase; the image is conjugated where `flip` is 1. */
  readonly factor: Float64Array;
  readonly flip: Uint8Array;
}

const LARGEST = 2 ** 40;
const TURN = 2 * Math.PI;

function reach(moves: readonly DualMove[], terms: readonly FrequencyTerm[], entries: number, real: Real): Reach {
  const index = new Map<string, number>();
  const list: number[][] = [];
  const put = (k: number[]): number => {
    const name = k.join();
    let at = index.get(name);
    if (at === undefined) {
      at = list.length;
      index.set(name, at);
      list.push(k);
    }
    return at;
  };
  for (const { frequency } of terms) put(frequency.map(Number));
  const matrices = moves.map((m) => m.matrix.map((row) => row.map(Number)));
  const target: number[] = [];
  const factor: number[] = [];
  const flip: number[] = [];
  let inner = 0;
  // f's own frequencies belong to g, however many; then whole ones as they were reached.
  for (; inner < list.length && (inner < terms.length || inner < entries); inner++) {
    const k = list[inner] as number[];
    if (k.some((x) => Math.abs(x) > LARGEST)) break;
    for (const [i, move] of moves.entries()) {
      const image = (matrices[i] as number[][]).map((row) => row.reduce((s, a, j) => s + a * (k[j] as number), 0));
      const flipped = (image.find((x) => x !== 0) as number) < 0;
      target.push(put(flipped ? image.map((x) => 0 - x) : image));
      flip.push(flipped ? 1 : 0);
      const angle = move.translation === undefined ? 0 : TURN * fraction(k, move.translation);
      factor.push(move.weight * (angle === 0 ? 1 : real.cos(angle)), move.weight * (angle === 0 ? 0 : real.sin(angle)));
    }
  }
  return {
    index,
    inner,
    moves: moves.length,
    target: Int32Array.from(target),
    factor: Float64Array.from(factor),
    flip: Uint8Array.from(flip),
  };
}

/** k.b modulo 1. */
function fraction(k: readonly number[], b: readonly bigint[]): number {
  const sum = k.reduce((s, x, j) => s + BigInt(x) * (b[j] as bigint), 0n);
  return Number(BigInt.asUintN(128, sum) >> 64n) / 2 ** 64;
}

/** out += scale P g; vectors hold real and imaginary parts in turn. */
function addImage(out: Float64Array, { inner, moves, target, factor, flip }: Reach, g: Float64Array, scale: number) {
  for (let k = 0; k < inner; k++) {
    const re = g[2 * k]! * scale;
    const im = g[2 * k + 1]! * scale;
    if (re === 0 && im === 0) continue;
    for (let e = k * moves; e < (k + 1) * moves; e++) {
      const [c, s] = [factor[2 * e]!, factor[2 * e + 1]!];
      const at = 2 * target[e]!;
      out[at]! += re * c - im * s;
      const y = re * s + im * c;
      out[at + 1]! += flip[e] === 1 ? -y : y;
    }
  }
}

/** (1 - P)^* r on the inner frequencies. */
function gradient({ inner, moves, target, factor, flip }: Reach, r: Float64Array): Float64Array {
  const out = r.slice(0, 2 * inner);
  for (let k = 0; k < inner; k++) {
    for (let e = k * moves; e < (k + 1) * moves; e++) {
      const [c, s] = [factor[2 * e]!, factor[2 * e + 1]!];
      const at = 2 * target[e]!;
      const x = r[at]!;
      const y = flip[e] === 1 ? -r[at + 1]! : r[at + 1]!;
      out[2 * k]! -= x * c + y * s;
      out[2 * k + 1]! -= y * c - x * s;
    }
  }
  return out;
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < Math.min(a.length, b.length); i++) sum += a[i]! * b[i]!;
  return sum;
}

function add(to: Float64Array, a: Float64Array, scale: number): void {
  for (let i = 0; i < a.length; i++) to[i]! += scale * a[i]!;
}

const ITERATIONS = 80;
const SUMS = 200;

interface Solution {
  readonly reach: Reach;
  readonly f: Float64Array;
  readonly g: Float64Array;
  readonly r: Float64Array;
}

function solve(moves: readonly DualMove[], { terms, entries }: PoissonPayload, real: Real): Solution {
  const at = reach(moves, terms, entries, real);
  const size = 2 * at.index.size;
  const f = new Float64Array(size);
  for (const [i, { re, im }] of terms.entries()) f.set([re, im], 2 * i);
  const g = f.slice(0, 2 * at.inner);
  // g0: powers of P applied to f, cut to the set; each costs as much as an iteration below.
  let power = f;
  for (let n = 0; n < SUMS; n++) {
    const next = new Float64Array(size);
    addImage(next, at, power, 1);
    power = next.slice(0, 2 * at.inner);
    const small = dot(power, power) < 1e-6 * dot(f, f);
    add(g, power, 1);
    if (small) break;
  }
  const r = f.slice();
  add(r, g, -1);
  addImage(r, at, g, 1);
  let s = gradient(at, r);
  const p = s.slice();
  let gamma = dot(s, s);
  for (let n = 0; n < ITERATIONS && gamma > 1e-24 * dot(f, f); n++) {
    const q = new Float64Array(size);
    q.set(p);
    addImage(q, at, p, -1);
    const alpha = gamma / dot(q, q);
    add(g, p, alpha);
    add(r, q, -alpha);
    s = gradient(at, r);
    const next = dot(s, s);
    for (let i = 0; i < p.length; i++) p[i] = s[i]! + (next / gamma) * p[i]!;
    gamma = next;
  }
  return { reach: at, f, g, r };
}

/** <h, r>, each on its own frequencies; one of k and -k counted. */
function across(h: Float64Array, left: Reach, r: Float64Array, right: Reach): number {
  if (left === right) return dot(h, r);
  let sum = 0;
  for (const [name, i] of left.index) {
    const j = right.index.get(name);
    if (j === undefined || i >= left.inner) continue;
    sum += h[2 * i]! * r[2 * j]! + h[2 * i + 1]! * r[2 * j + 1]!;
  }
  return sum;
}

export async function poissonFit(payload: PoissonPayload): Promise<PoissonFit> {
  const real = await loadReal();
  const ahead = solve(payload.forward, payload, real);
  const back = payload.backward === undefined ? ahead : solve(payload.backward, payload, real);
  const { f, g, r } = ahead;
  const image = new Float64Array(f.length);
  addImage(image, ahead.reach, g, 1);
  // Both k and -k: twice each sum.
  const norm = 2 * dot(f, f);
  const pairing = 2 * (dot(f, g) + across(back.g, back.reach, r, ahead.reach));
  return {
    variance: Math.max(0, 2 * pairing - norm),
    byNorms: 2 * (dot(g, g) - dot(image, image)),
    norm: Math.sqrt(norm),
    residual: Math.sqrt(2 * dot(r, r)),
    adjointResidual: Math.sqrt(2 * dot(back.r, back.r)),
    frequencies: ahead.reach.inner,
  };
}
