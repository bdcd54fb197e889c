/** How the start is forgotten: moduli of E exp(2 pi i k.x_n) against n. */
import * as Plot from "@observablehq/plot";
import type { LawResult } from "../../law/result.js";
import { quantityNumber } from "../../quantity/quantity.js";
import { type Html, html, joined } from "../html.js";
import { figure, SERIES } from "./figure.js";
import { axisX, axisY, MARGINS, padded } from "./scales.js";

export interface Modulus {
  readonly step: number;
  readonly modulus: number;
}

/** |E exp(2 pi i k.x_n)|, n = 0, 1, ...; for plots and prose, from the coefficients' values. */
export function moduli(law: LawResult): Modulus[] {
  return law.coefficients
    .map(({ step, real, imag }) => {
      const [a, b] = [quantityNumber(real), quantityNumber(imag)];
      return { step, modulus: Math.sqrt(a * a + b * b) };
    })
    .filter((m) => Number.isFinite(m.modulus));
}

/** Only as many series as symbols: more would not be told apart. */
export function lawPlot(laws: readonly LawResult[]): Html | undefined {
  const series = laws
    .slice(0, SERIES.length)
    .map((law, i) => ({
      name: `(${law.frequency.map((k) => k.replace("-", "−")).join(", ")})`,
      look: SERIES[i] as (typeof SERIES)[number],
      rows: moduli(law).filter((m) => m.modulus > 1e-300),
    }))
    .filter((s) => s.rows.length >= 3);
  if (series.length === 0) return undefined;
  const everything = series.flatMap((s) => s.rows);
  const x: [number, number] = [0, Math.max(...everything.map((r) => r.step))];
  const y = padded([...everything.map((r) => r.modulus), 1], "log", 0.05);
  const words = { circle: "dots", square: "squares", triangle: "triangles", diamond: "diamonds" } as const;
  return figure({
    id: "plot-law",
    label: "Modulus of the law's coefficients against the number of moves, on a logarithmic scale.",
    caption: html`<b>How the start is forgotten.</b> |E exp(2π<i>i</i> <i>k</i>·<i>x<sub>n</sub></i>)|, computed from the law itself, not sampled, for ${joined(
      series.map((s) => html`<i>k</i> = ${s.name} (${words[s.look.symbol]})`),
      ", ",
    )}. All tend to 0 exactly where the walk equidistributes. A coefficient that is exactly 0 has no mark.`,
    draw: (size) => ({
      ...MARGINS,
      height: size.narrow ? 240 : 300,
      x: { domain: x },
      y: { type: "log", domain: y },
      symbol: { type: "identity" },
      marks: [
        axisY({ label: "modulus", log: true, domain: y, size }),
        axisX({ label: "moves n", domain: x, size, tickFormat: (v) => (Number.isInteger(v) ? String(v) : "") }),
        ...series.flatMap((s) => [
          Plot.line(s.rows, {
            x: "step",
            y: "modulus",
            stroke: s.look.colour,
            strokeWidth: 1.2,
            ...(s.look.dash === "" ? {} : { strokeDasharray: s.look.dash }),
          }),
          Plot.dot(s.rows, {
            x: "step",
            y: "modulus",
            fill: s.look.colour,
            symbol: s.look.symbol,
            r: s.look.symbol === "circle" ? 2.6 : 3,
          }),
        ]),
      ],
    }),
  });
}
