/** Many short walks, and residue walks, against C. */
import { cumulativeWeights, drawMoves } from "../src/kernel/draws.js";
import { loadKernel } from "../src/kernel/kernel.js";
import { ResidueRun } from "../src/kernel/residue.js";
import { WindowRun } from "../src/kernel/trajectory.js";
import { startDigits } from "../src/trajectory/digits.js";
import { rationalWalk, residueTable, windowTable } from "../src/trajectory/table.js";
import { type Comparison, comparison, medianTime } from "./compare.js";
import { hashWords, peer } from "./native.js";
import { trayWalk } from "./walks.js";

async function ensemble(steps: number, replicates: number): Promise<Comparison> {
  const walk = trayWalk(["sqrt(2)-1", "sqrt(3)-1"]);
  const { table } = windowTable(walk);
  const kernel = await loadKernel();
  const weights = cumulativeWeights(walk.moves.map((m) => m.probability));
  const drawn = Array.from({ length: replicates }, (_, r) => drawMoves(kernel, weights, 1n, r, 0, steps));
  const run = new WindowRun(kernel, table, steps, 1);
  const limbs = Math.ceil((1.75 * steps) / 64) + 4;
  const digits = startDigits(walk.start.type === "point" ? walk.start.point : [], 2 * limbs);
  run.hold(digits);
  const walkAll = (last?: (positions: BigUint64Array) => void) => {
    for (const choices of drawn) {
      run.choices.set(choices);
      run.start(run.plan());
      run.advance();
      last?.(run.positions(steps));
    }
  };
  let answer = 0n;
  walkAll((positions) => {
    answer = hashWords(answer, positions, 2 * steps - 2, 2 * steps);
  });
  const rows: { label: string; milliseconds: number; answer: bigint }[] = [
    { label: "window kernel", milliseconds: await medianTime(5, () => walkAll()), answer },
  ];
  const bytes = new Uint8Array(8 * Math.ceil((steps * replicates) / 8));
  for (const [r, choices] of drawn.entries()) bytes.set(choices, r * steps);
  const input = new BigUint64Array(3 + bytes.length / 8 + 2 * limbs);
  input.set([BigInt(steps), BigInt(replicates), BigInt(limbs)]);
  input.set(new BigUint64Array(bytes.buffer), 3);
  for (let j = 0; j < 2; j++) {
    for (let i = 0; i < limbs; i++) {
      const [low, high] = [digits.values[4 * i + j], digits.values[4 * i + 2 + j]] as [number, number];
      input[3 + bytes.length / 8 + j * limbs + i] = (BigInt(high) << 32n) | BigInt(low);
    }
  }
  const native = peer("ensemble.c", "gcc", ["-lgmp"]);
  if (native !== undefined) {
    for (const [way, label] of [
      ["moves", "move by move, libgmp's mpn functions"],
      ["batches", "the same batches in C"],
    ] as const) {
      const { milliseconds, hash } = native.run(input, way, "5");
      rows.push({ label, milliseconds, answer: hash });
    }
  }
  return comparison(`${steps.toLocaleString("en")} moves x ${replicates.toLocaleString("en")} replicates`, rows);
}

async function residues(steps: number): Promise<Comparison> {
  const q = 1_000_000_007;
  const walk = trayWalk([`5/${q}`, `7/${q}`]);
  const run = new ResidueRun(await loadKernel(), residueTable(walk, rationalWalk(walk)!)!, steps);
  run.choices.set(new Uint16Array(steps).map((_, i) => ((i * 40_503) >> 7) & 1));
  const walkAll = () => {
    run.reset();
    run.run(steps, false);
  };
  walkAll();
  let answer = 0n;
  for (const x of run.numerators(steps + 1).subarray(2)) {
    answer = BigInt.asUintN(64, (answer ^ BigInt.asUintN(64, x)) * 1099511628211n);
  }
  const rows: { label: string; milliseconds: number; answer: bigint }[] = [
    { label: "residue kernel", milliseconds: await medianTime(15, walkAll), answer },
  ];
  const native = peer("residue.c", "gcc", []);
  if (native !== undefined) {
    const input = new BigUint64Array(1 + steps);
    input[0] = BigInt(steps);
    for (let k = 0; k < steps; k++) input[1 + k] = BigInt(run.choices[k] as number);
    for (const [way, label] of [
      ["given", "gcc -O3, q given when run"],
      ["known", "gcc -O3, q known when compiled"],
    ] as const) {
      const { milliseconds, hash } = native.run(input, way, "15");
      rows.push({ label, milliseconds, answer: hash });
    }
  }
  return comparison(`${steps.toLocaleString("en")} moves modulo 10^9 + 7, every numerator`, rows);
}

export async function suite(): Promise<Comparison[]> {
  return [await ensemble(1000, 20_000), await residues(1_000_000)];
}
