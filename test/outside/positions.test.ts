/**
 * Positions to the last bit, from the window, the tree, BigInt with nothing dropped and
 * decimal.js (a general-purpose library): random walks of every dimension.
 */
import { Decimal } from "decimal.js";
import { describe, expect, it } from "vitest";
import { openPath } from "../../src/trajectory/paths.js";
import type { Walk } from "../../src/walk/walk.js";
import { Dice, makeWalk, naiveWalk, randomUnimodular, squareRoot, top64 } from "../trajectory/walks.js";

const primes = [2n, 3n, 5n, 7n, 11n, 13n, 17n, 19n];
const roots = primes.map(squareRoot);

async function positions(walk: Walk, choices: Uint16Array, treeBits: number): Promise<bigint[]> {
  const path = await openPath(walk, {
    seed: 1n,
    steps: choices.length,
    choices,
    digits: 15,
    memoryLimit: 2 ** 28,
    treeBits,
  });
  expect(path.method).toMatch(treeBits === 0 ? /divide and conquer/ : /window/);
  const out: bigint[] = [];
  for (const block of path.blocks(0)) if (block !== undefined) out.push(...block.fixed());
  return out;
}

/** floor(x 2^64) of every coordinate of every position, in decimals. */
function decimals(moves: Moves, choices: Uint16Array, digits: number): bigint[] {
  const Big = Decimal.clone({ precision: digits, rounding: Decimal.ROUND_DOWN });
  const part = (x: Decimal) => x.sub(x.floor());
  const unit = new Big(2).pow(64);
  let x = moves.start.map((n) => part(new Big(n.toString()).sqrt()));
  const out = [...x];
  for (const choice of choices) {
    const { matrix, translation } = moves.list[choice]!;
    x = matrix.map((row, i) =>
      part(
        row.reduce(
          (s, a, j) => s.add(new Big(a.toString()).mul(x[j]!)),
          translation === undefined ? new Big(0) : new Big(translation[i]!.toString()).sqrt(),
        ),
      ),
    );
    out.push(...x);
  }
  return out.map((y) => BigInt(y.mul(unit).floor().toFixed(0)));
}

/** Starts and translations are square roots of these. */
interface Moves {
  readonly start: readonly bigint[];
  readonly list: readonly {
    readonly matrix: readonly (readonly bigint[])[];
    readonly translation?: readonly bigint[];
  }[];
}

describe("positions to the last bit: window, tree, BigInt and decimal.js", () => {
  for (const d of [2, 3, 4, 5, 6, 7, 8]) {
    it.each([
      [1n, false],
      [1n, true],
      [1n << 40n, true],
    ])(`dimension ${d}, factors up to %i, translations: %s`, async (size, translated) => {
      const dice = new Dice(1000n * BigInt(d) + (size % 1000n) + (translated ? 1n : 0n));
      const steps = size === 1n ? 120 : 60;
      const list = Array.from({ length: 3 }, (_, i) => ({
        ...randomUnimodular(dice, d, size, size === 1n ? d : 1),
        ...(translated && i !== 1 ? { translation: primes.slice(0, d).map((_, j) => primes[(i + j + 1) % 8]!) } : {}),
      }));
      // The first with a row turned round: one of the two has determinant -1.
      list[2] = { ...list[2]!, matrix: list[0]!.matrix.map((row, i) => (i === 0 ? row.map((a) => -a) : row)) };
      const moves: Moves = { start: primes.slice(0, d), list };
      const walk = makeWalk(
        list.map((m) => ({
          matrix: m.matrix,
          ...("translation" in m ? { translation: m.translation!.map(squareRoot) } : {}),
        })),
        roots.slice(0, d),
      );
      const choices = Uint16Array.from({ length: steps }, () => dice.below(3));
      const window = await positions(walk, choices, Number.POSITIVE_INFINITY);
      const bits = 192 + steps * Math.max(...list.flatMap((m) => m.matrix.map(rowBits)));
      const naive = naiveWalk(
        walk,
        roots.slice(0, d).map((x) => x.toFixed(bits)),
        choices,
        bits,
      );
      expect(window).toEqual(naive.flat().map((x) => top64(x, bits)));
      expect(await positions(walk, choices, 0)).toEqual(window);
      expect(decimals(moves, choices, Math.ceil(bits * 0.302) + 20)).toEqual(window);
    });
  }
});

function rowBits(row: readonly bigint[]): number {
  return row.reduce((s, a) => s + (a < 0n ? -a : a), 1n).toString(2).length;
}
