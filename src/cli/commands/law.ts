import { law } from "../../law/law.js";
import type { DistanceToUniform } from "../../law/result.js";
import { decimalDown, decimalUp } from "../../quantity/decimal.js";
import { quantityNumber } from "../../quantity/quantity.js";
import type { Question } from "../command.js";
import { block, cells, number, page, paragraph, table } from "../render.js";
import { bigList, whole, yes } from "../values.js";

interface Values {
  readonly frequency: readonly string[];
  readonly steps?: number;
  readonly exact?: boolean;
}

const ROWS = 60;

function distanceBlock({ cutoff, steps }: DistanceToUniform): string {
  const rows = steps.map(({ step, largest, frequency, wasserstein }) => {
    const [low, high] = [wasserstein.low ?? wasserstein.value, wasserstein.high ?? wasserstein.value].map(Number);
    // Rounded outward: both ends are proved.
    const between = `${number(Number(decimalDown(low as number, 3)), 3)} to ${number(Number(decimalUp(high as number, 3)), 3)}`;
    return [
      String(step),
      number(quantityNumber(largest), 5),
      `(${frequency.join(", ")})`,
      between,
      cells(wasserstein)[2],
    ];
  });
  return block(
    `Distance to the uniform law: coefficients with every |k_j| <= ${cutoff}`,
    table(["move n", "largest", "at k", "Wasserstein-1", "standing"], rows.slice(0, ROWS)),
  );
}

export const lawQuestion: Question<Values> = {
  name: "law",
  summary: "how fast the law of the position forgets the start, by its Fourier coefficients",
  examples: ["torwend law examples/tray.json --frequency 1,0 --steps 20"],
  options: [
    { flags: "--frequency <k>", text: "d whole numbers separated by commas", read: bigList, required: true },
    { flags: "--exact", text: "exact fractions, for a density (no translations, rational coefficients)", read: yes },
    { flags: "--steps <n>", text: "the last move wanted (default: as the effort allows, up to 40)", read: whole },
  ],
  ask: async ({ walk, values, common }) => {
    const { steps } = values;
    const result = await law(walk, { ...common, ...values });
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
      result.decay &&
        `Decay of this coefficient, fitted over moves ${result.decay.from} to ${result.decay.to}: ${number(quantityNumber(result.decay.rate), 4)} per move, natural log (estimated).`,
      result.normBound &&
        paragraph(
          `Guaranteed rate: ${number(quantityNumber(result.normBound.rate), 6)} (proved, from the norm of the averaging operator). ${result.normBound.reading}`,
          0,
        ),
      result.distance && distanceBlock(result.distance),
      `Ended at move ${result.reached.step}: ${result.reached.reason}.`,
    ]);
    const { stoppedAt } = result;
    const stopped = stoppedAt && `stopped at move ${stoppedAt.step} of ${steps}: ${stoppedAt.reason}`;
    return { result, text, stopped };
  },
};
