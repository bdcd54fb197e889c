/**
 * Green's function of the dual walk in dimension 2: for frequencies k and j, the expected
 * number of n >= 0 with B_n ... B_1 k = j or -j, B_i the transposed moves. It is the sum
 * of expected visits over one or two cosets of the stabiliser of k, a parabolic cyclic
 * group; the reduced words of a coset share both ends and repeat one block, so the sum is
 * finitely many words and two geometric series of matrices.
 */
import { gcdBig } from "../exact/rational.js";
import { addBound, applyBound, type Dense, dotBound, multiplyBound, type Side } from "./bounds.js";
import type { Passage } from "./passage.js";
import { LeastSolver, type VectorBounds } from "./solve.js";
import { inverse2, type Letter, type Matrix2, multiply2, productOf, reduceWord, SWAP, wordOf } from "./words.js";

export interface Bounds {
  readonly low: number;
  readonly high: number;
}

type Frequency = readonly [bigint, bigint];

/** A matrix of determinant 1 with first column the primitive vector. */
function withColumn([a, c]: Frequency): Matrix2 {
  let [r0, s0, t0] = [a, 1n, 0n];
  let [r1, s1, t1] = [c, 0n, 1n];
  while (r1 !== 0n) {
    const q = r0 / r1;
    [r0, s0, t0, r1, s1, t1] = [r1, s1, t1, r0 - q * r1, s0 - q * s1, t0 - q * t1];
  }
  if (r0 < 0n) [s0, t0] = [-s0, -t0];
  return [a, -t0, c, s0]; // a s0 + c t0 = 1
}

const mirror: Matrix2 = [1n, 0n, 0n, -1n];
const shift = (t: bigint): Matrix2 => [1n, t, 0n, 1n];

function sameUpToSign(a: Matrix2, b: Matrix2): boolean {
  return a.every((x, i) => x === b[i]) || a.every((x, i) => x === -b[i]!);
}

/** Words prefix block^m suffix, m >= 0; `turns`: one more block turns the sign of word against matrix. */
interface Tail {
  readonly prefix: readonly Letter[];
  readonly block: readonly Letter[];
  readonly suffix: readonly Letter[];
  readonly turns: boolean;
}

/** One coset's words: t -> letters of left [[1, t], [0, 1]] right (times the swap where it has one). */
class Coset {
  constructor(
    private readonly left: Matrix2,
    private readonly right: Matrix2,
    readonly swap: boolean,
  ) {}

  matrix(t: bigint): Matrix2 {
    return multiply2(multiply2(this.left, shift(t)), this.right);
  }
  letters(t: bigint): readonly Letter[] {
    return wordOf(this.matrix(t)).letters;
  }
  /** The word's matrix is this sign times `matrix(t)`, which takes k to j itself. */
  sign(t: bigint): 1 | -1 {
    return wordOf(this.matrix(t)).sign;
  }

  /**
   * Where, going in direction `step` from t, words repeat a block: word(t + m step) =
   * prefix block^m suffix, reduced as written, for every m >= 0. Checked exactly: the
   * block, moved by the prefix, is the coset's own parabolic generator.
   */
  tail(t: bigint, step: 1n | -1n): Tail | undefined {
    const here = this.letters(t);
    const next = this.letters(t + step);
    if (next.length !== here.length + 2) return undefined;
    const generator = multiply2(multiply2(this.left, shift(step)), inverse2(this.left));
    for (let cut = 0; cut <= here.length; cut++) {
      const block = next.slice(cut, cut + 2);
      const prefix = here.slice(0, cut);
      const suffix = here.slice(cut);
      const joined = [...prefix, ...block, ...suffix];
      if (!joined.every((x, i) => x === next[i])) continue;
      const p = productOf(prefix);
      if (!sameUpToSign(multiply2(multiply2(p, productOf(block)), inverse2(p)), generator)) continue;
      const twice = [...prefix, ...block, ...block, ...suffix];
      if (reduceWord(twice).length !== twice.length) continue;
      return { prefix, block, suffix, turns: this.sign(t) !== this.sign(t + step) };
    }
    return undefined;
  }
}

const MOST_WORDS = 10_000;

/** Sums over cosets for one walk; keeps the end vectors and the blocks' solvers. */
export class Green {
  private readonly ends = new Map<string, VectorBounds>();
  private readonly blocks = new Map<string, LeastSolver>();

  /** @param walk first passages of the transposed moves */
  constructor(private readonly walk: Passage) {}

  /** Expected visits to the identity before a draw with that swap and sign, by the state of the walk that stands there. */
  private end(swap: boolean, sign: 1 | -1): VectorBounds | undefined {
    const key = `${swap}${sign}`;
    const known = this.ends.get(key);
    if (known !== undefined) return known;
    const f = this.walk.drawn(swap, sign);
    const found = this.walk.visits.solve({ low: f, high: f });
    if (found !== undefined) this.ends.set(key, found);
    return found;
  }

  private read(letters: readonly Letter[], x: VectorBounds): VectorBounds {
    let { low, high } = x;
    for (let i = letters.length - 1; i >= 0; i--) {
      const f = this.walk.first[letters[i]!];
      low = applyBound(f.low, low, "low");
      high = applyBound(f.high, high, "high");
    }
    return { low, high };
  }

  private block(letters: readonly Letter[]): LeastSolver {
    const key = letters.join("");
    let solver = this.blocks.get(key);
    if (solver === undefined) {
      const n = this.walk.states;
      const product = (side: Side): Dense =>
        letters.map((x) => this.walk.first[x][side]).reduce((a, b) => multiplyBound(a, b, n, side));
      solver = new LeastSolver({ low: product("low"), high: product("high") });
      this.blocks.set(key, solver);
    }
    return solver;
  }

  private start(x: VectorBounds): Bounds {
    const { initial } = this.walk;
    return { low: dotBound(initial.low, x.low, "low"), high: dotBound(initial.high, x.high, "high") };
  }

  /** Expected visits to the coset's elements that take k to target j (any of both: 0). */
  private cosetSum(coset: Coset, target: 1 | -1 | 0): Bounds | undefined {
    const endAt = (sign: 1 | -1) => this.end(coset.swap, target === -1 ? (-sign as 1 | -1) : target === 0 ? 1 : sign);
    const ends = { plus: endAt(1), minus: endAt(-1) };
    if (ends.plus === undefined || ends.minus === undefined) return undefined;
    const endOf = (sign: 1 | -1) => (sign === 1 ? ends.plus : ends.minus) as VectorBounds;
    const parts: Bounds[] = [this.start(this.read(coset.letters(0n), endOf(coset.sign(0n))))];
    for (const step of [1n, -1n] as const) {
      let t: bigint = step;
      for (let k = 0; ; k++, t += step) {
        if (k > MOST_WORDS) return undefined;
        const end = endOf(coset.sign(t));
        const tail = coset.tail(t, step);
        if (tail === undefined) {
          parts.push(this.start(this.read(coset.letters(t), end)));
          continue;
        }
        const series = this.series(tail, end, endOf(-coset.sign(t) as 1 | -1));
        if (series === undefined) return undefined;
        parts.push(this.start(this.read(tail.prefix, series)));
        break;
      }
    }
    return total(parts);
  }

  /** sum over m of block^m suffix, ending in turn at `end` and, where signs turn, at `other`. */
  private series(tail: Tail, end: VectorBounds, other: VectorBounds): VectorBounds | undefined {
    const first = this.read(tail.suffix, end);
    if (!tail.turns || !this.walk.signed) return this.block(tail.block).solve(first);
    const second = this.read([...tail.block, ...tail.suffix], other);
    return this.block([...tail.block, ...tail.block]).solve({
      low: addBound("low", first.low, second.low),
      high: addBound("high", first.high, second.high),
    });
  }

  /**
   * Expected number of n >= 0 with B_n ... B_1 k = target j, or in {j, -j} for target 0
   * (the only one without signs); undefined where a bound could not be proved. k and j
   * are not zero.
   */
  visits(k: Frequency, j: Frequency, target: 1 | -1 | 0 = 0): Bounds | undefined {
    if (this.walk.signed === (target === 0)) {
      throw new RangeError(
        `Green.visits: target ${target} on first passages ${this.walk.signed ? "with" : "without"} signs`,
      );
    }
    const dk = gcdBig(k[0], k[1]);
    if (dk !== gcdBig(j[0], j[1])) return { low: 0, high: 0 };
    const from = inverse2(withColumn([k[0] / dk, k[1] / dk]));
    const to = withColumn([j[0] / dk, j[1] / dk]);
    const parts: Bounds[] = [];
    for (const swap of this.walk.swaps ? [false, true] : [false]) {
      // Elements of determinant -1 are [[1, t], [0, -1]] between the same two; the swap goes to the word's end.
      const sum = this.cosetSum(new Coset(to, swap ? multiply2(multiply2(mirror, from), SWAP) : from, swap), target);
      if (sum === undefined) return undefined;
      parts.push(sum);
    }
    return total(parts);
  }
}

/** The sum of non-negative numbers between bounds. */
function total(parts: readonly Bounds[]): Bounds {
  const side = (s: Side) => addBound(s, ...parts.map((b) => Float64Array.of(b[s])))[0] as number;
  return { low: side("low"), high: side("high") };
}
