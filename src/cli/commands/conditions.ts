import { conditions } from "../../conditions/conditions.js";
import type { Question } from "../command.js";
import { block, page, verdict } from "../render.js";

export const conditionsQuestion: Question<Record<string, never>> = {
  name: "conditions",
  summary: "whether the conditions of the limit theorems hold",
  examples: ["torwend conditions examples/tray.json"],
  options: [],
  ask: async ({ walk, common }) => {
    const result = await conditions(walk, common);
    const text = page(result.walk, [
      block(
        "Conditions",
        [
          verdict("strongly irreducible", result.stronglyIrreducible),
          verdict("proximal", result.proximal),
          verdict("exponential moment", result.exponentialMoment),
        ].join("\n"),
      ),
      block(
        "What follows",
        [
          verdict("equidistribution", result.equidistribution),
          verdict("central limit theorem", result.centralLimit),
        ].join("\n"),
      ),
      "The evidence, to be checked by hand, is in the output of --json.",
    ]);
    return { result, text };
  },
};
