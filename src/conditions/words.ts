/** Products of moves, with the moves that make them: what a reader can multiply again. */
import { type IntegerMatrix, multiply } from "../dual/matrix.js";
import type { Move } from "../walk/walk.js";
import { matrixKey, plain, plainMatrix, trace } from "./matrix.js";

/** The product A_{i_n} ... A_{i_1} of the moves i_1, ..., i_n: the first index acts first. */
export interface Word {
  readonly indices: readonly number[];
  readonly matrix: IntegerMatrix;
  readonly determinant: 1 | -1;
}

export function letters(moves: readonly Move[]): Word[] {
  return moves.map(({ matrix, determinant }, i) => ({ indices: [i], matrix, determinant }));
}

/** First `first`, then `next`. */
export function followed(first: Word, next: Word): Word {
  return {
    indices: [...first.indices, ...next.indices],
    matrix: multiply(next.matrix, first.matrix),
    determinant: first.determinant === next.determinant ? 1 : -1,
  };
}

export interface Products {
  /** Distinct products, shorter words first. */
  readonly words: readonly Word[];
  /** No further product exists: the moves generate a finite group, which is `words`. */
  readonly closed: boolean;
}

/**
 * The first `most` distinct products by length. A finite set of invertible matrices that is
 * closed under products is a group, so `closed` proves that the group is finite.
 */
export function productsOf(moves: readonly Move[], most: number): Products {
  const alphabet = letters(moves);
  const seen = new Set<string>();
  const words: Word[] = [];
  const add = (word: Word) => {
    const key = matrixKey(word.matrix);
    if (seen.has(key)) return;
    seen.add(key);
    words.push(word);
  };
  alphabet.forEach(add);
  for (let next = 0; next < words.length; next++) {
    for (const letter of alphabet) {
      if (words.length > most) return { words: words.slice(0, most), closed: false };
      add(followed(words[next], letter));
    }
  }
  return { words, closed: true };
}

/** `count` longer products, of up to 40 moves in a fixed irregular order, the same in every run. */
export function longProducts(moves: readonly Move[], count: number): Word[] {
  const alphabet = letters(moves);
  let state = 1;
  const next = () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return alphabet[(state >>> 12) % alphabet.length];
  };
  return Array.from({ length: count }, (_, i) => {
    let word = next();
    for (let n = 8 + (i % 33); n > 1; n--) word = followed(word, next());
    return word;
  });
}

/** A word as evidence: moves in the order in which they act, and their product. */
export function wordEvidence(word: Word, moves: readonly Move[]): Record<string, unknown> {
  return {
    moves: word.indices,
    labels: word.indices.map((i) => moves[i].label),
    matrix: plainMatrix(word.matrix),
    trace: plain(trace(word.matrix)),
    determinant: word.determinant,
  };
}
