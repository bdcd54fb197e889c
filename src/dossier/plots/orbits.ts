/** Finite orbits: the second eigenvalue of the averaged operator against the modulus. */
import * as Plot from "@observablehq/plot";
import type { OrbitsResult } from "../../orbits/result.js";
import { quantityNumber } from "../../quantity/quantity.js";
import { type Html, html } from "../html.js";
import { figure } from "./figure.js";
import { axisX, axisY, MARGINS } from "./scales.js";

export function orbitsPlot(results: readonly OrbitsResult[]): Html | undefined {
  const rows = results.flatMap((r) =>
    r.orbits.map((o) => ({ modulus: r.modulus, size: o.size, second: quantityNumber(o.secondEigenvalue) })),
  );
  const kept = rows.filter((r) => Number.isFinite(r.second) && r.size > 1);
  if (kept.length < 3) return undefined;
  const moduli = [...new Set(kept.map((r) => r.modulus))].sort((a, b) => a - b);
  const [least, most] = [moduli[0] as number, moduli[moduli.length - 1] as number];
  const many = most - least > 40;
  const x: [number, number] = many ? [least / 1.1, most * 1.1] : [least - 0.6, most + 0.6];
  const y: [number, number] = [0, 1.04];
  const largest = Math.sqrt(Math.max(...kept.map((r) => r.size)));
  return figure({
    id: "plot-orbits",
    label: "Second eigenvalue of the averaged operator on each kind of finite orbit against the modulus.",
    caption: html`<b>How finite orbits mix.</b> Second eigenvalue (largest modulus but the constant's) on each kind of orbit of points with denominator <i>q</i>; larger circles are larger orbits. The distance to 1 (dashed) is the gap; at 1 the orbit does not mix at all, however long the walk.`,
    draw: (size) => ({
      ...MARGINS,
      height: size.narrow ? 220 : 270,
      x: many ? { type: "log", domain: x } : { domain: x },
      y: { domain: y },
      r: { type: "identity" },
      marks: [
        axisY({ label: "second eigenvalue", domain: y, size, ticks: [0, 0.2, 0.4, 0.6, 0.8, 1] }),
        axisX({
          label: "modulus q",
          domain: x,
          size,
          log: many,
          ...(many || moduli.length > 14 ? {} : { ticks: moduli, tickFormat: String }),
        }),
        Plot.ruleY([1], { stroke: "var(--c2)", strokeDasharray: "6 3" }),
        Plot.dot(kept, {
          x: "modulus",
          y: "second",
          stroke: "var(--c1)",
          strokeWidth: 1.5,
          fill: "var(--c1)",
          fillOpacity: 0.25,
          r: (o: { size: number }) => 2.2 + (5 * Math.sqrt(o.size)) / largest,
        }),
      ],
    }),
  });
}
