/** A walk on PGL_2(Z) expanded letter by letter: see passage.ts for what is asked of it. */
import type { Rational } from "../exact/rational.js";
import type { Dense } from "./bounds.js";
import type { VectorBounds } from "./solve.js";
import { type Letter, type Matrix2, swapped, type Word, wordOf } from "./words.js";

/** Transitions by letters read, z and weights between bounds. */
export interface Chain {
  readonly n: number;
  /** Whether some move has determinant -1. */
  readonly swaps: boolean;
  readonly low: Readonly<Record<Letter | "e", Dense>>;
  readonly high: Readonly<Record<Letter | "e", Dense>>;
  /** Columns with the sign turned. */
  readonly turn: (m: Dense) => Dense;
  readonly initial: VectorBounds;
  /** Column: 1 at the state before a draw with that swap and that sign. */
  readonly drawn: (swap: boolean, sign: 1 | -1) => Float64Array;
}

export const LETTERS: readonly Letter[] = ["u", "v", "V"];

/** A draw of one of the moves that begin alike and go on alike. */
interface Draw {
  readonly letter: Letter | "e";
  /** The letters that are left, and whether the swap follows; "" where the next move is drawn at once. */
  readonly rest: string;
  /** Whether the swap follows at once: moves of at most one letter. */
  readonly swap: boolean;
  readonly turns: boolean;
  probability: Rational;
}

/** The rest of a word after `read` letters, as a state's name. */
function restOf(word: Word, read: number): string {
  const letters = word.letters.slice(read).join("");
  return letters === "" ? "" : `${letters}${word.swap ? "s" : ""}`;
}

function drawsOf(words: readonly Word[], probabilities: readonly Rational[], signs: boolean): Draw[] {
  const draws = new Map<string, Draw>();
  for (const [i, word] of words.entries()) {
    const probability = probabilities[i] as Rational;
    const rest = restOf(word, 1);
    const draw: Omit<Draw, "probability"> = {
      letter: word.letters[0] ?? "e",
      rest,
      swap: rest === "" && word.swap,
      turns: signs && word.sign < 0,
    };
    const key = `${draw.letter} ${rest} ${draw.swap} ${draw.turns}`;
    const before = draws.get(key);
    if (before === undefined) draws.set(key, { ...draw, probability });
    else before.probability = before.probability.add(probability);
  }
  return [...draws.values()];
}

/** The names of the states: "" before a draw, and the rests of words, each once. */
function positionsOf(words: readonly Word[]): string[] {
  const names = words.flatMap((w) => w.letters.map((_, j) => (j === 0 ? "" : restOf(w, j))));
  return [...new Set(["", ...names])];
}

/** z p between doubles; exact where p is a short dyadic fraction and z is 1. */
function weigh(p: Rational, z: number): { low: number; high: number } {
  const w = p.toNumber() * z;
  const exact = z === 1 && p.den <= 1n << 40n && (p.den & (p.den - 1n)) === 0n;
  return exact ? { low: w, high: w } : { low: w * (1 - 2 ** -51), high: w * (1 + 2 ** -51) };
}

/** The expanded chain of moves with the given words and probabilities. */
function expand(words: readonly Word[], draws: readonly Draw[], z: number, signs: boolean): Chain {
  const positions = positionsOf(words);
  const base = positions.length;
  const place = new Map(positions.map((name, i) => [name, i]));
  const swaps = words.some((w) => w.swap) ? 2 : 1;
  const n = base * swaps * (signs ? 2 : 1);
  const at = (sign: number, swap: number, rest: string) =>
    ((signs ? sign % 2 : 0) * swaps + swap) * base + (place.get(rest) as number);
  const zero = () => ({
    u: new Float64Array(n * n),
    v: new Float64Array(n * n),
    V: new Float64Array(n * n),
    e: new Float64Array(n * n),
  });
  const low = zero();
  const high = zero();
  for (let sign = 0; sign < (signs ? 2 : 1); sign++) {
    for (let swap = 0; swap < swaps; swap++) {
      // The swap of u is -u: with s u s = -u, each u read under a pending swap turns the sign.
      const turned = (x: string) => (swap && x === "u" ? 1 : 0);
      const under = (x: Letter | "e") => (x === "e" ? x : swap ? swapped(x) : x);
      for (const { letter, rest, swap: toggles, turns, probability } of draws) {
        const to = at(sign + (turns ? 1 : 0) + turned(letter), toggles ? 1 - swap : swap, rest);
        const cell = at(sign, swap, "") * n + to;
        const w = weigh(probability, z);
        low[under(letter)][cell] = w.low;
        high[under(letter)][cell] = w.high;
      }
      for (const name of positions) {
        if (name === "") continue;
        const letter = name[0] as Letter;
        const rest = name.slice(1);
        const last = rest === "" || rest === "s";
        const to = at(sign + turned(letter), last && rest === "s" ? 1 - swap : swap, last ? "" : rest);
        low[under(letter)][at(sign, swap, name) * n + to] = 1;
        high[under(letter)][at(sign, swap, name) * n + to] = 1;
      }
    }
  }
  const half = n / 2;
  const turn = (m: Dense): Dense => {
    if (!signs) return m;
    const out = new Float64Array(n * n);
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < n; j++) out[i * n + j] = m[i * n + ((j + half) % n)]!;
    }
    return out;
  };
  const initial = new Float64Array(n);
  initial[at(0, 0, "")] = 1;
  const drawn: (swap: boolean, sign: 1 | -1) => Float64Array = (swap, sign) => {
    const out = new Float64Array(n);
    if (!swap || swaps === 2) out[at(sign < 0 ? 1 : 0, swap ? 1 : 0, "")] = 1;
    return out;
  };
  return { n, swaps: swaps === 2, low, high, turn, initial: { low: initial, high: initial }, drawn };
}

/** The chain of moves that weigh z times their probability each; undefined where it has more than `mostStates` states. */
export function chainOf(
  matrices: readonly Matrix2[],
  probabilities: readonly Rational[],
  { signs, z, mostStates }: { readonly signs: boolean; readonly z: number; readonly mostStates: number },
): Chain | undefined {
  // Word by word: many long ones must not be written out before they are refused.
  const words: Word[] = [];
  const names = new Set([""]);
  let copies = signs ? 2 : 1;
  for (const matrix of matrices) {
    const word = wordOf(matrix);
    if (word.letters.length > mostStates) return undefined;
    if (word.swap && !words.some((w) => w.swap)) copies *= 2;
    words.push(word);
    for (let j = 1; j < word.letters.length; j++) names.add(restOf(word, j));
    if (names.size * copies > mostStates) return undefined;
  }
  return expand(words, drawsOf(words, probabilities, signs), z, signs);
}
