/** Runs every suite of this folder (or those named on the command line) and prints one table. */
import Table from "cli-table3";
import type { Comparison } from "./compare.js";

const suites: Record<string, () => Promise<{ suite: () => Promise<Comparison[]> }>> = {
  draws: () => import("./draws.js"),
  exact: () => import("./exact.js"),
  growth: () => import("./growth.js"),
  positive: () => import("./positive.js"),
  sampling: () => import("./sampling.js"),
  dual: () => import("./dual.js"),
  variance: () => import("./variance.js"),
  orbits: () => import("./orbits.js"),
  trajectory: () => import("./trajectory.js"),
  tree: () => import("./tree.js"),
  ensemble: () => import("./ensemble.js"),
  cocycle: () => import("./cocycle.js"),
  thresholds: () => import("./thresholds.js"),
};

const wanted = process.argv.slice(2);
const table = new Table({
  style: { head: [], border: [], compact: true },
  head: ["comparison", "contender", "median ms", "ratio to the first"],
});
for (const [name, load] of Object.entries(suites)) {
  // Thresholds are for whoever sets them: by name only.
  if (wanted.length > 0 ? !wanted.includes(name) : name === "thresholds") continue;
  process.stderr.write(`${name} ...\n`);
  for (const comparison of await (await load()).suite()) {
    for (const row of comparison.rows) {
      table.push([comparison.name, row.label, row.milliseconds.toPrecision(4), row.ratio.toPrecision(3)]);
    }
  }
}
process.stdout.write(`${table.toString()}\n`);
