import { averages } from "../../averages/averages.js";
import type { Gap } from "../../averages/gap.js";
import type { ObservableResult } from "../../averages/result.js";
import type { Question } from "../command.js";
import { block, cells, number, page, paragraph, table, verdict } from "../render.js";
import { realList, whole, yes } from "../values.js";

interface Values {
  readonly steps?: number;
  readonly replicates?: number;
  readonly generating?: readonly number[];
  readonly exact?: boolean;
}

const CORRELATIONS = 8;

function observable(o: ObservableResult): string {
  const { sampled } = o;
  const { statistic, pValue } = sampled.normalDistance;
  const findings = [
    ["limit of the time average", ...cells(o.mean)],
    ["variance (limit of n Var)", ...cells(o.variance)],
    ...(o.bracket === undefined ? [] : [["variance, proved bounds", ...cells(o.bracket)]]),
    ...(o.poisson === undefined
      ? []
      : [
          ["residual of f = g - P g, of |f|", ...cells(o.poisson.residual)],
          ["residual for the adjoint, of |f|", ...cells(o.poisson.adjointResidual)],
          ["|g|^2 - |P g|^2", ...cells(o.poisson.byNorms)],
          ...(o.poisson.decay === undefined ? [] : [["correlations shrink a move by", ...cells(o.poisson.decay)]]),
        ]),
    ...(o.startCost === undefined
      ? []
      : [
          ["moves beside the worst trap", ...cells(o.startCost.moves)],
          ["what they add to the sum", ...cells(o.startCost.sum)],
        ]),
    ["sampled: mean", ...cells(sampled.mean)],
    ["sampled: variance, over replicates", ...cells(sampled.variance)],
    ["sampled: variance, batch means", ...cells(sampled.batchMeansVariance)],
    ["sampled: intervals that cover the limit", ...cells(sampled.coverage)],
  ];
  const shownCorrelations = o.correlations.slice(0, CORRELATIONS);
  return [
    block(o.label, table(["", "value", "interval", "standing"], findings)),
    verdict("variance zero", o.degenerate),
    table(
      ["half-width of the error bar", "moves needed", "interval", "standing"],
      o.stepsFor.map((s) => [number(s.halfWidth), ...cells(s.steps, true)]),
    ),
    table(
      ["lag n", "<f, P^n f>", "interval", "standing"],
      shownCorrelations.map((q, n) => [String(n), ...cells(q)]),
    ) + (o.correlations.length > CORRELATIONS ? `\n  to lag ${o.correlations.length - 1} with --json` : ""),
    ...(o.generating === undefined
      ? []
      : [
          table(
            ["z", "sum of z^n <f, P^n f>", "interval", "standing"],
            o.generating.map((g) => [number(g.z, 6), ...cells(g.value)]),
          ),
        ]),
    statistic === null || pValue === null
      ? "  Distance to the normal law: not defined, the variance is 0."
      : `  Distance of the sampled averages to the normal law: ${number(statistic)}, p-value ${number(pValue, 3)}.`,
    `  From ${sampled.replicates} replicates of ${sampled.moves} moves.`,
    ...o.notes.map((note) => paragraph(note)),
  ].join("\n\n");
}

function gapText({ norm, spectralRadius, gap, kesten }: Gap): string {
  const rows = [
    ["norm of P on functions of mean 0", ...cells(norm)],
    ["its spectral radius", ...cells(spectralRadius)],
    ["gap, 1 less the spectral radius", ...cells(gap)],
    ...(kesten === undefined ? [] : [["Kesten's value of the norm", ...cells(kesten)]]),
  ];
  return block("How fast functions of mean 0 shrink", table(["", "value", "interval", "standing"], rows));
}

export const averagesQuestion: Question<Values> = {
  name: "averages",
  summary: "what time averages converge to, with which error bar, after how many moves",
  examples: ["torwend averages examples/tray.json --effort quick"],
  options: [
    { flags: "--steps <n>", text: "moves of each sampled replicate", read: whole },
    { flags: "--replicates <r>", text: "number of sampled replicates", read: whole },
    {
      flags: "--generating <z>",
      text: "sums of z^n <f, P^n f> over n >= 0, z in (0, 1], comma-separated",
      read: realList,
    },
    { flags: "--exact", text: "correlations as exact fractions (no translations, rational coefficients)", read: yes },
  ],
  ask: async ({ walk, values, common }) => {
    const result = await averages(walk, { ...common, ...values });
    const text = page(result.walk, [
      result.orbit &&
        `The start lies on a finite orbit of ${result.orbit.size} points (denominator ${result.orbit.denominator}): all findings are about the walk on it.`,
      ...result.observables.map(observable),
      result.gap && gapText(result.gap),
    ]);
    return { result, text, warnings: result.warnings };
  },
};
