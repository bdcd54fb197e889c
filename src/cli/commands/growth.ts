import { growth } from "../../growth/growth.js";
import type { Question } from "../command.js";
import { block, cells, number, page, quantity, table } from "../render.js";
import { real, realList, whole } from "../values.js";

interface Values {
  readonly tolerance?: number;
  readonly digits?: number;
  readonly pressure?: readonly number[];
  readonly steps?: number;
}

export const growthQuestion: Question<Values> = {
  name: "growth",
  summary: "how fast products of the matrices grow",
  examples: ["torwend growth examples/tray.json", "torwend growth examples/tray.json --pressure 1,2 --json"],
  options: [
    { flags: "--tolerance <t>", text: "wanted half-width of the top exponent's interval", read: real },
    { flags: "--digits <d>", text: "wanted decimals of the top exponent", read: whole },
    {
      flags: "--pressure <s>",
      text: "the s of Lambda(s), from -64 to 64, separated by commas (default: 0.5,1,2,4)",
      read: realList,
    },
    { flags: "--steps <n>", text: "moves of a replicate", read: whole },
  ],
  ask: async ({ walk, values, common }) => {
    const result = await growth(walk, { ...common, ...values });
    const first = result.exponents[0];
    const row = (name: string, q: Parameters<typeof cells>[0]) => [name, ...cells(q)];
    const text = page(result.walk, [
      block(
        "Lyapunov exponents (natural logarithm per move)",
        table(
          ["", "value", "interval", "standing"],
          result.exponents.map((q, i) => row(`lambda_${i + 1}`, q)),
        ),
      ),
      values.digits === undefined || first?.standing !== "enclosed"
        ? undefined
        : block("lambda_1 lies between", `  ${first.low}\n  ${first.high}`),
      result.enclosure && `Proved: lambda_1 = ${quantity(result.enclosure)}.`,
      result.upperBound &&
        `Proved: lambda_1 is at most ${quantity(result.upperBound.value)}, the mean log norm of ${result.upperBound.moves} moves over their number.`,
      `Variance of the log norm per move: ${quantity(result.logNormVariance)}`,
      block(
        "Pressure Lambda(s) = lim 1/n log E norm(A_n...A_1)^s",
        table(
          ["s", "value", "interval", "standing"],
          result.pressure.map((p) => row(number(p.s, 6), p.value)),
        ),
      ),
      result.rate.length === 0
        ? undefined
        : block(
            "Large deviations: rate at which a mean growth per move becomes unlikely",
            table(
              ["growth per move", "rate", "interval", "standing"],
              result.rate.map((r) => row(number(r.speed, 6), r.rate)),
            ),
          ),
      result.sampled === undefined
        ? `From ${result.replicates} replicates of ${result.moves} moves.`
        : `Sampled beside the proof, ${result.replicates} replicates of ${result.moves} moves: lambda_1 = ${quantity(result.sampled)}.`,
    ]);
    return { result, text, warnings: result.warnings };
  },
};
