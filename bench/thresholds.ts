/**
 * Where one way overtakes another: what LEAF_BITS (src/kernel/tree.ts) and TREE_BITS
 * (src/trajectory/paths.ts) are set by. Below the transform the window multiplies by 31-bit
 * products; a leaf is as long as it is quicker than one level of transforms more.
 * Run by name: npm run bench thresholds.
 */
import { cumulativeWeights, drawMoves } from "../src/kernel/draws.js";
import { loadKernel } from "../src/kernel/kernel.js";
import { WindowRun } from "../src/kernel/trajectory.js";
import { TreeRun } from "../src/kernel/tree.js";
import { startDigits } from "../src/trajectory/digits.js";
import { windowTable } from "../src/trajectory/table.js";
import { type Comparison, comparison, medianTime } from "./compare.js";
import { trayWalk } from "./walks.js";

const walk = trayWalk({ uniform: true });
const { table } = windowTable(walk);
const cumulative = cumulativeWeights(walk.moves.map((m) => m.probability));

async function leaves(steps: number): Promise<Comparison> {
  const kernel = await loadKernel({ memoryLimit: 2 ** 31 });
  const choices = drawMoves(kernel, cumulative, 1n, 0, 0, steps);
  const rows: { label: string; milliseconds: number }[] = [];
  for (const leaf of [250, 500, 1000, 2000, 4000]) {
    const milliseconds = await medianTime(5, () =>
      kernel.scoped(() => {
        const run = new TreeRun(kernel, table, choices, 1, leaf);
        const start = [1n, 2n].map((x) => BigInt.asUintN(64 * run.limbs, x * 0x9e3779b97f4a7c15n ** 40n));
        for (const _ of run.walk(start));
      }),
    );
    rows.push({ label: `leaves of ${leaf} moves`, milliseconds });
  }
  return comparison(`the tree at ${steps.toLocaleString("en")} moves, by the size of its leaves`, rows);
}

async function breakEven(steps: number): Promise<Comparison> {
  const kernel = await loadKernel({ memoryLimit: 2 ** 31 });
  const choices = drawMoves(kernel, cumulative, 1n, 0, 0, steps);
  const window = await medianTime(5, () =>
    kernel.scoped(() => {
      const run = new WindowRun(kernel, table, steps, 1, 8192);
      run.choices.set(choices);
      const limbs = run.plan();
      run.reserve(limbs);
      run.hold(startDigits([undefined, undefined], limbs));
      run.startUniform(limbs, 1n, 0);
      for (let made = 0; made < steps; ) made += run.advance();
    }),
  );
  const tree = await medianTime(5, () =>
    kernel.scoped(() => {
      const run = new TreeRun(kernel, table, choices, 1);
      const start = [1n, 2n].map((x) => BigInt.asUintN(64 * run.limbs, x * 0x9e3779b97f4a7c15n ** 40n));
      for (const _ of run.walk(start));
    }),
  );
  return comparison(`${steps.toLocaleString("en")} moves (some ${Math.round(1.65 * steps)} bits)`, [
    { label: "window", milliseconds: window },
    { label: "tree", milliseconds: tree },
  ]);
}

export async function suite(): Promise<Comparison[]> {
  const out = [await leaves(300_000)];
  for (const steps of [20_000, 40_000, 60_000, 80_000, 120_000]) out.push(await breakEven(steps));
  return out;
}
