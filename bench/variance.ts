/** Limit variances in dimension 2: Green's function, which has all terms, against enumeration, which stops. */

import { Rational } from "../src/exact/rational.js";
import { DualTables } from "../src/kernel/dual.js";
import { loadKernel } from "../src/kernel/kernel.js";
import { radius } from "../src/modular/radius.js";
import { PlanarSums, type PlanarTerm } from "../src/modular/variance.js";
import type { Matrix2 } from "../src/modular/words.js";
import { type Comparison, compare, comparison, medianTime } from "./compare.js";

const SHEARS: readonly Matrix2[] = [
  [1n, 2n, 0n, 1n],
  [1n, -2n, 0n, 1n],
  [1n, 0n, 2n, 1n],
  [1n, 0n, -2n, 1n],
];
const QUARTER = Rational.of(1, 4);
const PROBE: PlanarTerm[] = [{ frequency: [1n, 0n], cos: { low: 1, high: 1 }, sin: { low: 0, high: 0 } }];
const STEPS = 12;

/** <f, f> + 2 sum of the correlations up to n = 2 STEPS: P = P* here. */
async function enumeration(): Promise<() => number> {
  const tables = new DualTables(await loadKernel(), { dimension: 2, width: 1, fold: "even" }, 3 ** STEPS, 3);
  const moves = tables.place(
    SHEARS.map(([a, b, c, d]) => ({
      matrix: [
        [a, c],
        [b, d],
      ],
      weight: 0.25,
    })),
  );
  return () => {
    tables.fill(0, [{ frequency: [1n, 0n], re: 0.5, im: 0 }]);
    let sum = 2 * tables.pair(0, 0).sum;
    for (let n = 0; n < STEPS; n++) {
      const [from, to] = [n & 1, 1 - (n & 1)];
      if (tables.evolve(from, to, moves) !== "done") throw new Error("the table is full");
      sum += 2 * 2 * (tables.pair(from, to).sum + tables.pair(to, to).sum);
    }
    return sum;
  };
}

function green(): number {
  const planar = new PlanarSums(
    SHEARS.map(([a, b, c, d]) => ({
      matrix: [
        [a, b],
        [c, d],
      ],
      probability: QUARTER,
    })),
  );
  const found = planar.variance(PROBE);
  if (found === undefined || !(found.low <= 2.5 && found.high >= 2.5)) throw new Error("5/2 is not enclosed");
  return (found.low + found.high) / 2;
}

export async function suite(): Promise<Comparison[]> {
  const enumerated = await enumeration();
  const norm = () => radius(SHEARS, [QUARTER, QUARTER, QUARTER, QUARTER], { mostStates: 40 });
  return [
    await compare(
      `variance of a wave, four shears: 5/2, and ${2 * STEPS} correlations of it`,
      [
        { label: "Green's function, enclosed", run: green },
        { label: "dual walk, a partial sum", run: enumerated },
      ],
      // What is left out after 24 correlations is some hundredths.
      (a, b) => Math.abs(a - b) < 0.05,
    ),
    comparison("norm of P by certificates, four shears", [
      { label: "within 1e-7", milliseconds: await medianTime(3, norm) },
    ]),
  ];
}
