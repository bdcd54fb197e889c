import { orbits } from "../../orbits/orbits.js";
import type { Question } from "../command.js";
import { block, cells, number, page, table } from "../render.js";
import { whole } from "../values.js";

const ROWS = 40;

/** Up to three denominators, then how many more. */
function few(list: readonly number[]): string {
  return list.length <= 3 ? list.join(", ") : `${list.slice(0, 3).join(", ")} and ${list.length - 3} more`;
}

export const orbitsQuestion: Question<{ modulus: number }> = {
  name: "orbits",
  summary: "the finite orbits of the points with denominator q, and how fast the walk mixes on them",
  examples: ["torwend orbits examples/tray.json --modulus 60"],
  options: [
    { flags: "--modulus <q>", text: "q: all points whose multiple by q is whole", read: whole, required: true },
  ],
  ask: async ({ walk, values, common }) => {
    const result = await orbits(walk, { ...common, modulus: values.modulus });
    const rows = result.orbits.slice(0, ROWS).map((o) => {
      const [second, , standing] = cells(o.secondEigenvalue);
      const [gap] = cells(o.gap);
      const point = `(${o.representative.join(", ")})`;
      const residual = o.residual === undefined ? "" : number(o.residual, 2);
      return [o.size, o.count, point, few(o.denominators), o.period, second, gap, standing, residual].map(String);
    });
    const more = result.orbits.length - rows.length;
    const head = ["points", "orbits", `a point, times ${result.modulus}`, "denominators", "period"];
    const text = page(result.walk, [
      block(
        `The ${result.points} points with denominator ${result.modulus} or a divisor, by kind of orbit`,
        table([...head, "second eigenvalue", "gap", "standing", "residual"], rows) +
          (more > 0 ? `\n  and ${more} kinds more: --json lists all` : ""),
      ),
      `The averaged operator is ${result.symmetric ? "symmetric" : "not symmetric"} on these points.`,
    ]);
    return { result, text, warnings: result.warnings };
  },
};
