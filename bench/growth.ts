/** Growth of products: the kernel against plain TypeScript on the same drawn moves. */
import { cumulativeWeights, drawMoves } from "../src/kernel/draws.js";
import { growthTable, sampleGrowth } from "../src/kernel/growth.js";
import { type Kernel, loadKernel } from "../src/kernel/kernel.js";
import { loadReal, type Real } from "../src/kernel/real.js";
import { parseWalk } from "../src/walk/parse.js";
import type { Walk } from "../src/walk/walk.js";
import { type Comparison, compare } from "./compare.js";

const MOVES = 100_000;
const REPLICATES = 4;
const RUN = { seed: 1n, firstReplicate: 0, replicates: REPLICATES, warmUp: 1, checkpoints: [MOVES] };

function walkOf(matrices: number[][][]): Walk {
  const moves = matrices.map((matrix) => ({ matrix }));
  return parseWalk({ torwend: 1, title: "bench", dimension: matrices[0]!.length, moves });
}

/**
 * log |A_n...A_1 v| of a vector, rescaled every 64 moves. The start does not matter to the
 * digits that are compared; in dimension 3 the whole frame is carried, as the kernel does.
 */
function plain(kernel: Kernel, walk: Walk, cumulative: BigUint64Array, real: Real): number[] {
  const d = walk.dimension;
  const matrices = walk.moves.map((m) => Float64Array.from(m.matrix.flat(), Number));
  return Array.from({ length: REPLICATES }, (_, r) => {
    const draws = drawMoves(kernel, cumulative, 1n, r, 0, MOVES + 1);
    return d === 2 ? planar(matrices, draws, real) : spatial(matrices, draws, d, real);
  });
}

function planar(matrices: Float64Array[], draws: Uint16Array, real: Real): number {
  let [x, y] = [0.6, 0.8];
  let log = 0;
  for (let n = 0; n < draws.length; n++) {
    const m = matrices[draws[n]!]!;
    const u = m[0]! * x + m[1]! * y;
    y = m[2]! * x + m[3]! * y;
    x = u;
    if (n % 64 === 63) {
      const size = Math.sqrt(x * x + y * y);
      log += real.log(size);
      x /= size;
      y /= size;
    }
  }
  return log + real.log(Math.sqrt(x * x + y * y));
}

function spatial(matrices: Float64Array[], draws: Uint16Array, d: number, real: Real): number {
  let q = Float64Array.from({ length: d * d }, (_, k) => 1 / (1 + k + (k % d) * (k % 2)));
  let t = new Float64Array(d * d);
  const logs = new Float64Array(d);
  const growth = new Float64Array(d).fill(1);
  for (let n = 0; n < draws.length; n++) {
    const m = matrices[draws[n]!]!;
    for (let i = 0; i < d; i++) {
      for (let k = 0; k < d; k++) {
        let s = 0;
        for (let j = 0; j < d; j++) s += m[i * d + j]! * q[j * d + k]!;
        t[i * d + k] = s;
      }
    }
    [q, t] = [t, q];
    if (n % 4 !== 3 && n + 1 < draws.length) continue;
    for (let k = 0; k < d; k++) {
      for (let i = 0; i < k; i++) {
        let dot = 0;
        for (let j = 0; j < d; j++) dot += q[j * d + k]! * q[j * d + i]!;
        for (let j = 0; j < d; j++) q[j * d + k]! -= dot * q[j * d + i]!;
      }
      let square = 0;
      for (let j = 0; j < d; j++) square += q[j * d + k]! * q[j * d + k]!;
      const r = Math.sqrt(square);
      for (let j = 0; j < d; j++) q[j * d + k]! /= r;
      growth[k]! *= r;
      if (growth[k]! > 1e200 || growth[k]! < 1e-200 || n + 1 === draws.length) {
        logs[k]! += real.log(growth[k]!);
        growth[k] = 1;
      }
    }
  }
  return logs[0]!;
}

export async function suite(): Promise<Comparison[]> {
  const kernel = await loadKernel();
  const scalar = await loadKernel({ target: "plain" });
  const real = await loadReal();
  const cases: [string, number[][][]][] = [
    [
      "dimension 2",
      [
        [
          [2, 1],
          [1, 1],
        ],
        [
          [3, 1],
          [2, 1],
        ],
      ],
    ],
    [
      "dimension 3",
      [
        [
          [1, 1, 0],
          [0, 1, 0],
          [0, 0, 1],
        ],
        [
          [1, 0, 0],
          [0, 1, 1],
          [0, 0, 1],
        ],
        [
          [1, 0, 0],
          [0, 1, 0],
          [1, 0, 1],
        ],
      ],
    ],
  ];
  const out: Comparison[] = [];
  for (const [name, matrices] of cases) {
    const walk = walkOf(matrices);
    const cumulative = cumulativeWeights(walk.moves.map((m) => m.probability));
    const table = growthTable(
      walk.moves.map((m) => m.matrix),
      cumulative,
    );
    const top = (logs: ArrayLike<number>) => {
      const exponents = logs.length / REPLICATES;
      return Array.from({ length: REPLICATES }, (_, r) => logs[r * exponents]!);
    };
    out.push(
      await compare(
        `${REPLICATES} x ${MOVES} moves of a product, ${name}`,
        [
          { label: "kernel", run: () => top(sampleGrowth(kernel, table, RUN)) },
          { label: "kernel without SIMD", run: () => top(sampleGrowth(scalar, table, RUN)) },
          { label: "plain TypeScript, same draws", run: () => plain(kernel, walk, cumulative, real) },
        ],
        // Starts differ by a bounded factor, the logarithms by a few units in some 10^4.
        (a, b) => a.every((x, r) => Math.abs(x - b[r]!) < 20),
      ),
    );
  }
  return out;
}
