import { quantityNumber } from "../../quantity/quantity.js";
import { start } from "../../start/start.js";
import type { Question } from "../command.js";
import { block, cells, number, page, paragraph, quantity, table, verdict } from "../render.js";
import { whole } from "../values.js";

const KINDS: Readonly<Record<string, string>> = {
  rational: "rational: every coordinate is a fraction",
  algebraic: "algebraic: some coordinate is proved irrational",
  unproved: "unproved: no coordinate is proved irrational, and not all are proved rational",
  uniform: "uniform: drawn from Haar measure",
  density: "density: a trigonometric polynomial",
};

export const startQuestion: Question<{ denominators?: number }> = {
  name: "start",
  summary: "whether this start is safe, or near a rational trap",
  examples: ["torwend start examples/tray.json --denominators 500"],
  options: [
    {
      flags: "--denominators <q>",
      text: "largest denominator of traps looked for (default: 1000, at most 10^9)",
      read: whole,
    },
  ],
  ask: async ({ walk, values, common }) => {
    const result = await start(walk, { ...common, ...values });
    const rows = result.traps.map((t) => {
      const sampled = t.sampledHold;
      // The interval is far narrower than a reader needs: --json has it in full.
      const distance = number(quantityNumber(t.distance), 5);
      const standing = cells(t.distance)[2];
      const hold = cells(t.hold)[0];
      const seen =
        sampled === undefined
          ? ""
          : `${number(sampled.median, 3)} (${number(sampled.low, 3)} to ${number(sampled.high, 3)})`;
      const excess = t.excess === undefined ? "" : number(quantityNumber(t.excess), 3);
      const point = [String(t.denominator), `(${t.numerators.join(", ")})`, distance, standing];
      return [...point, hold, excess, cells(t.hold)[2], seen];
    });
    const head = ["denominator", "numerators", "distance", "standing"];
    head.push("hold in moves", "beyond the usual", "standing", "sampled hold");
    const cost =
      result.cost &&
      block(
        `What the first trap costs: averages over n moves are off by this over n (${number(quantityNumber(result.cost.moves), 3)} moves beside an orbit of ${result.cost.orbitSize} points, estimated)`,
        table(
          ["observable", "sum of f - mean"],
          result.cost.observables.map(({ label, sum }) => [label, number(quantityNumber(sum), 4)]),
        ),
      );
    const text = page(result.walk, [
      `The start is ${KINDS[result.kind] ?? result.kind}.`,
      verdict("equidistribution from this start", result.verdict),
      result.orbit &&
        `Denominator ${result.orbit.denominator}; points of its orbit: ${quantity(result.orbit.size, true)}.`,
      rows.length === 0 ? undefined : block("Rational traps, longest hold first", table(head, rows)),
      cost,
      result.search === undefined ? undefined : paragraph(`Looked for: ${result.search}.`, 0),
    ]);
    return { result, text };
  },
};
