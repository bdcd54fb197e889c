/** The tree walk against plain BigInt, in every dimension, with signs, constants and cancelling moves. */
import { describe, expect, it } from "vitest";
import { type KernelTarget, loadKernel } from "../../src/kernel/kernel.js";
import type { WindowTable } from "../../src/kernel/trajectory.js";
import { TreeRun } from "../../src/kernel/tree.js";

/** Marsaglia's xorshift (2003), so that a failure repeats. */
function source(seed: number): () => number {
  let x = seed | 0 || 1;
  return () => {
    x ^= x << 13;
    x ^= x >>> 17;
    x ^= x << 5;
    return x >>> 0;
  };
}

/** A random matrix of determinant +-1: elementary steps and a change of sign. */
function unimodular(d: number, next: () => number, size: number): bigint[][] {
  const m = Array.from({ length: d }, (_, i) => Array.from({ length: d }, (_, j): bigint => (i === j ? 1n : 0n)));
  for (let s = 0; s < 2 * d; s++) {
    const i = next() % d;
    const j = (i + 1 + (next() % (d - 1))) % d;
    const f = BigInt((next() % (2 * size + 1)) - size);
    for (let c = 0; c < d; c++) m[i]![c]! += f * m[j]![c]!;
  }
  if (next() & 1) m[0] = m[0]!.map((x) => -x);
  return m;
}

interface Case {
  readonly d: number;
  readonly constants: number;
  readonly moves: bigint[][][];
}

function randomCase(d: number, constants: number, size: number, next: () => number): Case {
  const moves = [0, 1, 2].map(() =>
    unimodular(d, next, size).map((row, i) => [
      ...row,
      ...Array.from({ length: constants }, (_, c) => (i % constants === c ? 1n : 0n)),
    ]),
  );
  return { d, constants, moves };
}

function tableOf({ d, constants, moves }: Case): WindowTable {
  return {
    dimension: d,
    inputs: d + constants,
    matrices: BigInt64Array.from(moves.flat(2)),
    norms: Float64Array.from(moves, (m) =>
      Math.max(...m.map((row) => row.reduce((sum, x) => sum + Math.abs(Number(x)), 0))),
    ),
  };
}

/** Walks the case both ways and expects every word within one unit of the true floor. */
async function agree(
  c: Case,
  n: number,
  target: KernelTarget,
  leaf: number,
  seed: number,
  words = 1,
  comfort?: number,
): Promise<void> {
  const next = source(seed);
  const choices = Uint16Array.from({ length: n }, () => next() % c.moves.length);
  const kernel = await loadKernel({ target });
  const run = new TreeRun(kernel, tableOf(c), choices, words, leaf, comfort);
  const bits = 64 * run.limbs;
  const inputs = c.d + c.constants;
  const start = Array.from({ length: inputs }, () => {
    let hex = "0x0";
    for (let b = 0; b < bits; b += 32) hex += next().toString(16).padStart(8, "0");
    return BigInt.asUintN(bits, BigInt(hex));
  });
  // The true walk of these very fractions, with nothing dropped.
  let x = start.slice(0, c.d);
  const z = start.slice(c.d);
  let seen = 0;
  const shown = 64 * words;
  for (const block of run.walk(start)) {
    for (let r = 0; r < block.rows; r++, seen++) {
      expect(block.first + r).toBe(seen);
      for (let j = 0; j < c.d; j++) {
        let got = 0n;
        for (let w = 0; w < words; w++) got = (got << 64n) | block.positions[(r * c.d + j) * words + w]!;
        const off = BigInt.asIntN(shown, got - (x[j]! >> BigInt(bits - shown)));
        expect(off >= -1n && off <= 1n, `position ${seen}, coordinate ${j}: off by ${off}`).toBe(true);
      }
      if (seen < n) {
        const m = c.moves[choices[seen]!]!;
        x = m.map((row) => {
          let sum = 0n;
          for (let j = 0; j < inputs; j++) sum += row[j]! * (j < c.d ? x[j]! : z[j - c.d]!);
          return BigInt.asUintN(bits, sum);
        });
      }
    }
  }
  expect(seen).toBe(n + 1);
}

describe.each(["simd", "plain"] as KernelTarget[])("TreeRun (%s)", (target) => {
  for (let d = 2; d <= 8; d++) {
    it(`dimension ${d}, signed entries, determinants +-1`, async () => {
      await agree(randomCase(d, 0, 2, source(d)), 400, target, 16, 100 + d);
    });
    it(`dimension ${d} with translations`, async () => {
      await agree(randomCase(d, d === 2 ? 3 : 1, 2, source(40 + d)), 300, target, 24, 200 + d);
    });
  }
  it("in little memory, with transforms made again", async () => {
    await agree(randomCase(2, 0, 2, source(77)), 700, target, 20, 7, 1, 0);
    await agree(randomCase(3, 2, 2, source(78)), 700, target, 20, 8, 1, 100_000);
  });
  it("notices that it holds too few bits", async () => {
    for (const spare of [-128, -192, -512]) {
      const next = source(10);
      const kernel = await loadKernel({ target });
      const choices = Uint16Array.from({ length: 2000 }, () => next() % 3);
      const run = new TreeRun(kernel, tableOf(randomCase(2, 0, 2, next)), choices, 1, 100, undefined, spare);
      const start = [0, 1].map(() => BigInt.asUintN(64 * run.limbs, 0x9e3779b97f4a7c15n ** 99n));
      expect(() => Array.from(run.walk(start))).toThrow(/two ways to position \d+ disagree|failed its check/);
    }
  });
  it("takes its memory at once, as planned", async () => {
    for (const comfort of [0, 2 ** 18, 2 ** 30]) {
      const next = source(9);
      const kernel = await loadKernel({ target });
      const choices = Uint16Array.from({ length: 3000 }, () => next() % 3);
      const run = new TreeRun(kernel, tableOf(randomCase(2, 1, 2, next)), choices, 1, 16, comfort);
      const walk = run.walk(new Array(3).fill(1n));
      walk.next();
      const planned = kernel.u8(0, 1).buffer.byteLength;
      for (const _ of walk) expect(kernel.u8(0, 1).buffer.byteLength).toBe(planned);
    }
  });
  it("entries up to 2^40", async () => {
    await agree(randomCase(2, 0, 2 ** 20, source(7)), 300, target, 8, 300);
  });
  it("moves that cancel", async () => {
    const a = [
      [1n, 2n],
      [0n, 1n],
    ];
    const moves = [
      a,
      [
        [1n, -2n],
        [0n, 1n],
      ],
      [
        [1n, 0n],
        [2n, 1n],
      ],
      [
        [1n, 0n],
        [-2n, 1n],
      ],
    ];
    await agree({ d: 2, constants: 0, moves }, 3000, target, 64, 301);
  });
  it("one move, one leaf, two words", async () => {
    const c = randomCase(2, 1, 3, source(9));
    await agree(c, 1, target, 16, 302);
    await agree(c, 16, target, 16, 303, 2);
    await agree(c, 200, target, 16, 304, 2);
  });
});
