import { law } from "../../law/law.js";
import type { Question } from "../command.js";
import { block, cells, page, table } from "../render.js";
import { bigList, whole } from "../values.js";

interface Values {
  readonly frequency: readonly string[];
  readonly steps?: number;
}

const ROWS = 60;

export const lawQuestion: Question<Values> = {
  name: "law",
  summary: "how fast the law of the position forgets the start, by its Fourier coefficients",
  examples: ["torwend law examples/tray.json --frequency 1,0 --steps 20"],
  options: [
    { flags: "--frequency <k>", text: "d whole numbers separated by commas", read: bigList, required: true },
    { flags: "--steps <n>", text: "the last move wanted (default: as the effort allows, up to 40)", read: whole },
  ],
  ask: async ({ walk, values, common }) => {
    const { frequency, steps } = values;
    const result = await law(walk, { ...common, frequency, ...(steps === undefined ? {} : { steps }) });
    const rows = result.coefficients.slice(0, ROWS).map((c) => {
      const [re, reInterval, standing] = cells(c.real);
      const [im, imInterval] = cells(c.imag);
      return [String(c.step), re, reInterval, im, imInterval, standing];
    });
    const more = result.coefficients.length - rows.length;
    const text = page(result.walk, [
      block(
        `E exp(2 pi i k.x_n), k = (${result.frequency.join(", ")})`,
        table(["move n", "real part", "interval", "imaginary part", "interval", "standing"], rows) +
          (more > 0 ? `\n  and ${more} moves more: --json lists all` : ""),
      ),
      `Ended at move ${result.reached.step}: ${result.reached.reason}.`,
    ]);
    const { stoppedAt } = result;
    const stopped = stoppedAt && `stopped at move ${stoppedAt.step} of ${steps}: ${stoppedAt.reason}`;
    return { result, text, stopped };
  },
};
