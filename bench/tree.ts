/** Long walks: the tree against its native and BigInt peers, its growth in time and memory. */
import { execFileSync } from "node:child_process";
import { cumulativeWeights, drawMoves, drawStartWords } from "../src/kernel/draws.js";
import { type Kernel, loadKernel } from "../src/kernel/kernel.js";
import { TreeRun } from "../src/kernel/tree.js";
import { windowTable } from "../src/trajectory/table.js";
import { type Comparison, comparison, medianTime } from "./compare.js";
import { hashWords, peer } from "./native.js";
import { bigintTree, plainBigInt } from "./tree-bigint.js";
import { trayWalk } from "./walks.js";

/** The choices and the digits of a uniform start, the same for every contender. */
async function task(steps: number) {
  const walk = trayWalk({ uniform: true });
  const { table } = windowTable(walk);
  const kernel = await loadKernel({ memoryLimit: 2 ** 31 });
  const choices = drawMoves(kernel, cumulativeWeights(walk.moves.map((m) => m.probability)), 1n, 0, 0, steps);
  const limbs = kernel.scoped(() => new TreeRun(kernel, table, choices, 1).limbs);
  const digits = [0, 1].map((j) => drawStartWords(kernel, 1n, 0, j, limbs).reverse());
  const starts = digits.map((words) =>
    BigInt(
      `0x${Array.from(words, (w) => w.toString(16).padStart(16, "0"))
        .reverse()
        .join("")}`,
    ),
  );
  const input = new BigUint64Array(2 + steps + 2 * limbs);
  input.set([BigInt(steps), BigInt(limbs)]);
  for (let k = 0; k < steps; k++) input[2 + k] = BigInt(choices[k] as number);
  input.set(digits[0] as BigUint64Array, 2 + steps);
  input.set(digits[1] as BigUint64Array, 2 + steps + limbs);
  return { table, choices, limbs, starts: starts as [bigint, bigint], input };
}

type Task = Awaited<ReturnType<typeof task>>;

/** The walk, every position to 64 bits. @returns the first `steps` positions where they are to be kept */
function treeWalk(kernel: Kernel, { table, choices, starts }: Task, keep?: BigUint64Array): void {
  kernel.scoped(() => {
    const run = new TreeRun(kernel, table, choices, 1);
    for (const block of run.walk(starts)) {
      if (block.first < choices.length) keep?.set(block.positions, 2 * block.first);
    }
  });
}

async function againstNative(steps: number): Promise<Comparison[]> {
  const given = await task(steps);
  const out = new BigUint64Array(2 * steps);
  const kernel = await loadKernel({ memoryLimit: 2 ** 31 });
  treeWalk(kernel, given, out);
  const answer = hashWords(0n, out);
  const name = `${steps.toLocaleString("en")} moves, all positions to 64 bits`;
  const ours = { label: "tree kernel, warm", milliseconds: await medianTime(5, () => treeWalk(kernel, given)), answer };
  const native = peer("tree.c", "gcc", ["-lgmp", "-lm"]);
  const rows = [ours];
  if (native !== undefined) {
    const { milliseconds, hash } = native.run(given.input, "5");
    rows.push({ label: "the same tree on libgmp, warm", milliseconds, answer: hash });
  }
  const start = performance.now();
  const slow = bigintTree(given.choices, given.starts, 64 * given.limbs);
  rows.push({ label: "the same tree in BigInt", milliseconds: performance.now() - start, answer: hashWords(0n, slow) });
  const comparisons = [comparison(name, rows)];
  if (native !== undefined) {
    comparisons.push(
      comparison(`${name}, whole process from a uniform start`, [
        { label: "torwend trajectory", milliseconds: inProcess(steps).elapsed },
        { label: "the same tree on libgmp", milliseconds: native.cold(given.input, "0") },
      ]),
    );
  }
  return comparisons;
}

async function againstPlain(steps: number): Promise<Comparison> {
  const given = await task(steps);
  const out = new BigUint64Array(2 * steps);
  const kernel = await loadKernel({ memoryLimit: 2 ** 31 });
  treeWalk(kernel, given, out);
  const milliseconds = await medianTime(5, () => treeWalk(kernel, given));
  const start = performance.now();
  const slow = plainBigInt(given.choices, given.starts, 64 * given.limbs);
  return comparison(`${steps.toLocaleString("en")} moves, all positions to 64 bits`, [
    { label: "tree kernel, warm", milliseconds, answer: hashWords(0n, out) },
    { label: "plain BigInt loop", milliseconds: performance.now() - start, answer: hashWords(0n, slow) },
  ]);
}

/** `trajectory` in a process of its own (the built package): its time, and how much it added to the process's memory. */
function inProcess(steps: number): { elapsed: number; walk: number; bytes: number } {
  const script = `
    import { trajectory } from ${JSON.stringify(new URL("../dist/node/index.js", import.meta.url).href)};
    const moves = [[[2, 1], [1, 1]], [[3, 1], [2, 1]]].map((matrix) => ({ matrix }));
    const walk = { torwend: 1, dimension: 2, moves, start: { uniform: true } };
    await trajectory(walk, { steps: 2, workers: 0 });
    const base = process.resourceUsage().maxRSS;
    const start = performance.now();
    await trajectory(walk, { steps: ${steps}, at: [${steps}], workers: 0 });
    console.log(performance.now() - start, 1024 * (process.resourceUsage().maxRSS - base));
  `;
  const start = performance.now();
  const printed = execFileSync(process.execPath, ["--input-type=module", "-e", script], { encoding: "utf8" });
  const elapsed = performance.now() - start;
  const [walk, bytes] = printed.trim().split(" ").map(Number) as [number, number];
  return { elapsed, walk, bytes };
}

function growth(): Comparison[] {
  const sizes = [1_000_000, 10_000_000].map((steps) => ({ steps, ...inProcess(steps) }));
  return [
    comparison(
      "time of trajectory, all positions to 64 bits",
      sizes.map(({ steps, walk }) => ({ label: `${steps.toLocaleString("en")} moves`, milliseconds: walk })),
    ),
    comparison(
      "memory that trajectory adds to its process (MB in the column of times)",
      sizes.map(({ steps, bytes }) => ({ label: `${steps.toLocaleString("en")} moves`, milliseconds: bytes / 1e6 })),
    ),
  ];
}

export async function suite(): Promise<Comparison[]> {
  return [...(await againstNative(1_000_000)), await againstPlain(100_000), ...growth()];
}
