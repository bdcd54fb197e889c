/**
 * Exact walks: the window kernel against the same walk in BigInt, which drops its bits in
 * the same way, and the residue kernel against plain numbers.
 */
import type { ExactNumber } from "../src/exact/number.js";
import { loadKernel } from "../src/kernel/kernel.js";
import { ResidueRun } from "../src/kernel/residue.js";
import { rationalWalk, residueTable } from "../src/trajectory/table.js";
import { prepareWalker } from "../src/trajectory/walker.js";
import { parseWalk } from "../src/walk/parse.js";
import type { Walk } from "../src/walk/walk.js";
import { type Comparison, compare } from "./compare.js";

const matrices = [
  [2, 1, 1, 1],
  [3, 1, 2, 1],
] as const;

function pair(start: readonly string[]): Walk {
  const moves = matrices.map(([a, b, c, d]) => ({
    matrix: [
      [a, b],
      [c, d],
    ],
  }));
  return parseWalk({ torwend: 1, title: "tray", dimension: 2, moves, start });
}

/**
 * The walk in BigInt: bits needed from each step on by a backward pass over row sums (all
 * entries are positive), dropped 64 at a time. Steps' numbers as the matrices' entries.
 */
function bigintWalk(choices: Uint16Array, x0: bigint, y0: bigint, held: number, out: BigUint64Array): BigUint64Array {
  const n = choices.length;
  const need = new Float64Array(n + 1);
  let [u, v, log] = [1, 1, 0]; // row sums of the product of the moves to come, and their common exponent
  let [s, t] = [1, 1];
  for (let k = n - 1; k >= 0; k--) {
    const [a, b, c, d] = matrices[choices[k] as number] as (typeof matrices)[number];
    // Rows of the product times [[a, b], [c, d]]: (u, s) and (v, t) are its two rows.
    [u, s] = [u * a + s * c, u * b + s * d];
    [v, t] = [v * a + t * c, v * b + t * d];
    const size = Math.max(u + s, v + t);
    need[k] = log + Math.log2(size);
    if (size > 1e100) {
      log += Math.log2(size);
      [u, s, v, t] = [u / size, s / size, v / size, t / size];
    }
  }
  const factors = matrices.map((m) => m.map(BigInt));
  let [x, y, bits] = [x0, y0, held];
  for (let k = 0; ; k++) {
    const spare = Math.floor((bits - 128 - (need[k] as number)) / 64);
    if (spare > 0) {
      x >>= BigInt(64 * spare);
      y >>= BigInt(64 * spare);
      bits -= 64 * spare;
    }
    const down = BigInt(bits - 64);
    out[2 * k] = x >> down;
    out[2 * k + 1] = y >> down;
    if (k === n) return out;
    const [a, b, c, d] = factors[choices[k] as number] as bigint[];
    [x, y] = [BigInt.asUintN(bits, a! * x + b! * y), BigInt.asUintN(bits, c! * x + d! * y)];
  }
}

async function windowAgainstBigInt(steps: number): Promise<Comparison> {
  const walk = pair(["sqrt(2)-1", "sqrt(3)-1"]);
  const walker = await prepareWalker(walk, { seed: 1n, steps });
  const choices = walker.run(0).choices.slice();
  const bits = Math.ceil(1.75 * steps) + 256;
  const { point } = walk.start as { point: readonly ExactNumber[] };
  const [x, y] = point.map((p) => p.toFixed(bits)) as [bigint, bigint];
  const out = new BigUint64Array(2 * steps + 2);
  return compare(
    `${steps.toLocaleString("en")} moves from an irrational start, every position to 64 bits`,
    [
      { label: "window kernel", run: () => walker.run(0, choices).positions },
      { label: "BigInt, bits dropped alike", run: () => bigintWalk(choices, x, y, bits, out) },
    ],
    (a, b) => a.every((p, i) => BigInt.asIntN(64, p - (b[i] as bigint)) ** 2n <= 1n),
  );
}

const q = 1_000_000_007;

function plainResidues(choices: Uint16Array, out: Float64Array): Float64Array {
  let [x, y] = [5, 7];
  for (let k = 0; ; k++) {
    out[2 * k] = x;
    out[2 * k + 1] = y;
    if (k === choices.length) return out;
    const [a, b, c, d] = matrices[choices[k] as number] as (typeof matrices)[number];
    [x, y] = [(a * x + b * y) % q, (c * x + d * y) % q];
  }
}

async function residuesAgainstNumbers(steps: number): Promise<Comparison> {
  const walk = pair([`5/${q}`, `7/${q}`]);
  const table = residueTable(walk, rationalWalk(walk)!)!;
  const run = new ResidueRun(await loadKernel(), table, steps);
  const choices = new Uint16Array(steps).map((_, i) => ((i * 40_503) >> 7) & 1);
  run.choices.set(choices);
  const out = new Float64Array(2 * steps + 2);
  return compare<ArrayLike<number | bigint>>(
    `${steps.toLocaleString("en")} moves modulo 10^9 + 7, every numerator`,
    [
      {
        label: "residue kernel",
        run: () => {
          run.reset();
          run.run(steps, false);
          return run.numerators(steps + 1);
        },
      },
      { label: "plain numbers", run: () => plainResidues(choices, out) },
    ],
    (a, b) => Array.from(a).every((x, i) => Number(x) === Number(b[i])),
  );
}

export async function suite(): Promise<Comparison[]> {
  return [await windowAgainstBigInt(1_000), await windowAgainstBigInt(10_000), await residuesAgainstNumbers(100_000)];
}
