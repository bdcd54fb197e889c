/** The renormalised cocycle against the same loop in C. */
import { cumulativeWeights } from "../src/kernel/draws.js";
import { growthTable, sampleGrowth, startingFrame } from "../src/kernel/growth.js";
import { loadKernel } from "../src/kernel/kernel.js";
import { parseWalk } from "../src/walk/parse.js";
import { type Comparison, comparison, medianTime } from "./compare.js";
import { peer } from "./native.js";

const REPLICATES = 64;

/** Half each, or a quarter each: totals that are powers of two need no redraws. */
const cases: readonly [number, number[][][]][] = [
  [
    2,
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
    3,
    [
      [
        [1, 1, 0],
        [0, 1, 1],
        [1, 0, 0],
      ],
      [
        [1, 0, 0],
        [1, 1, 0],
        [0, 1, 1],
      ],
    ],
  ],
];

async function against(d: number, matrices: number[][][], count: number): Promise<Comparison> {
  const walk = parseWalk({ torwend: 1, dimension: d, moves: matrices.map((matrix) => ({ matrix })) });
  const kernel = await loadKernel();
  const cumulative = cumulativeWeights(walk.moves.map((m) => m.probability));
  const table = growthTable(
    walk.moves.map((m) => m.matrix),
    cumulative,
  );
  const run = { seed: 1n, firstReplicate: 0, replicates: REPLICATES, warmUp: 0, checkpoints: [count] };
  const exponents = d === 2 ? 1 : d;
  const starts = Array.from({ length: REPLICATES }, (_, r) => startingFrame(kernel, run, r, d));
  // The kernel counts from the start's own length; C from 0.
  const before = starts.map((q) => (d === 2 ? Math.log(Math.hypot(q[0]![0]!, q[1]![0]!)) : 0));
  const logs = sampleGrowth(kernel, table, run);
  let answer = 0n;
  for (let r = 0; r < REPLICATES; r++) {
    const log = BigInt(Math.round(1e3 * (logs[r * exponents]! + before[r]!)));
    answer = BigInt.asUintN(64, (answer ^ BigInt.asUintN(64, log)) * 1099511628211n);
  }
  const rows: { label: string; milliseconds: number; answer?: bigint }[] = [
    { label: "kernel", milliseconds: await medianTime(7, () => sampleGrowth(kernel, table, run)), answer },
  ];
  const native = peer("growth.c", "gcc", ["-lm"]);
  if (native !== undefined) {
    const head = [d, walk.moves.length, table.length, table.every, REPLICATES, count].map(BigInt);
    const doubles = Float64Array.from([
      ...table.entries,
      ...starts.flatMap((q) => (d === 2 ? [q[0]![0]!, q[1]![0]!] : q.flat())),
    ]);
    const input = BigUint64Array.from([...head, ...cumulative, ...new BigUint64Array(doubles.buffer)]);
    const { milliseconds, hash } = native.run(input, "7");
    rows.push({ label: "gcc -O3 -march=native, the same loop", milliseconds, answer: hash });
  }
  return comparison(`${REPLICATES} x ${count.toLocaleString("en")} moves of a product, dimension ${d}`, rows);
}

export async function suite(): Promise<Comparison[]> {
  const out: Comparison[] = [];
  for (const [d, matrices] of cases) out.push(await against(d, matrices, d === 2 ? 200_000 : 50_000));
  return out;
}
