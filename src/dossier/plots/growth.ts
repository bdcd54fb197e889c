/** Plots of growth: (1/n) log |A_n...A_1| against n, the pressure, the rate of large deviations. */
import * as Plot from "@observablehq/plot";
import type { GrowthResult } from "../../growth/result.js";
import { type Quantity, quantityNumber } from "../../quantity/quantity.js";
import { type Html, html } from "../html.js";
import { percent, shown } from "../numbers.js";
import { figure, smallFigure } from "./figure.js";
import { axisX, axisY, MARGINS, padded } from "./scales.js";

const finite = (...values: number[]) => values.every((v) => Number.isFinite(v));

function ends(q: Quantity): { low: number; high: number } {
  const at = quantityNumber(q);
  return { low: q.low === undefined ? at : Number(q.low), high: q.high === undefined ? at : Number(q.high) };
}

/** Of points evenly spaced in n, the later ones would run together on a logarithmic axis: a dozen for each power of ten is kept. */
function thinned<T extends { readonly moves: number }>(rows: readonly T[]): T[] {
  const kept: T[] = [];
  for (const [i, row] of rows.entries()) {
    const last = kept[kept.length - 1];
    if (last === undefined || row.moves >= 1.2 * last.moves || i === rows.length - 1) kept.push(row);
  }
  return kept;
}

/** Undefined where there are too few points to plot. */
export function growthCurve(growth: GrowthResult, level: number): Html | undefined {
  const rows = thinned(growth.curve.filter((r) => r.moves >= 1 && finite(r.mean, r.low, r.high)));
  const lambda = growth.exponents[0];
  if (rows.length < 2 || lambda === undefined) return undefined;
  const limit = quantityNumber(lambda);
  const x = padded(
    rows.map((r) => r.moves),
    "log",
    0.01,
  );
  const y = padded([...rows.flatMap((r) => [r.low, r.high]), limit], "linear", 0.12);
  return figure({
    id: "plot-growth",
    label: `Mean of log norm over n against the number of moves n, approaching lambda 1 = ${shown(lambda).value}.`,
    caption: html`<b>Growth of products.</b> Mean of (1/<i>n</i>) log |<i>A<sub>n</sub></i>…<i>A</i><sub>1</sub>| over ${growth.replicates} independent products (points and line) with its ${percent(level)} interval (band). The dashed line is λ<sub>1</sub>, the limit.`,
    draw: (size) => ({
      ...MARGINS,
      height: size.narrow ? 230 : 300,
      x: { type: "log", domain: x },
      y: { domain: y },
      marks: [
        axisY({ label: "natural logs per move", domain: y, size }),
        axisX({ label: "moves n", log: true, domain: x, size }),
        Plot.areaY(rows, { x: "moves", y1: "low", y2: "high", fill: "var(--c1)", fillOpacity: 0.2 }),
        Plot.ruleY([limit], { stroke: "var(--c2)", strokeDasharray: "6 3", strokeWidth: 1.5 }),
        Plot.lineY(rows, { x: "moves", y: "mean", stroke: "var(--c1)", strokeWidth: 1.5 }),
        Plot.dot(rows, { x: "moves", y: "mean", fill: "var(--c1)", r: 2.5 }),
        Plot.text([limit], {
          x: () => x[1],
          y: (d: number) => d,
          text: () => `λ₁ = ${shown(lambda).value}`,
          textAnchor: "end",
          dy: rows[0] !== undefined && rows[0].mean > limit ? 11 : -9,
          dx: -4,
          fill: "var(--c2)",
        }),
      ],
    }),
  });
}

interface Point {
  readonly at: number;
  readonly value: number;
  readonly low: number;
  readonly high: number;
}

function points(rows: readonly { at: number; q: Quantity }[]): Point[] {
  return rows
    .map(({ at, q }) => ({ at, value: quantityNumber(q), ...ends(q) }))
    .filter((p) => finite(p.at, p.value, p.low, p.high))
    .sort((a, b) => a.at - b.at);
}

export function pressurePlot(growth: GrowthResult): Html | undefined {
  const rows = points(growth.pressure.map((p) => ({ at: p.s, q: p.value })));
  if (rows.length < 3) return undefined;
  const slope = growth.exponents[0] === undefined ? undefined : quantityNumber(growth.exponents[0]);
  const x = padded(rows.map((r) => r.at));
  const y = padded(rows.flatMap((r) => [r.value, r.low, r.high]));
  // The tangent at 0 leaves the frame where the curve bends away from it: cut it there.
  const reach = slope === undefined || slope === 0 ? x[1] : Math.min(x[1], y[1] / slope);
  const back = slope === undefined || slope === 0 ? x[0] : Math.max(x[0], y[0] / slope);
  return smallFigure({
    id: "plot-pressure",
    label: "Pressure Lambda of s against the exponent s.",
    caption: html`<b>Pressure.</b> Λ(<i>s</i>) = lim (1/<i>n</i>) log E |<i>A<sub>n</sub></i>…<i>A</i><sub>1</sub>|<sup><i>s</i></sup>, at the values of <i>s</i> computed (points; bars: intervals). Dashed: the tangent at 0, of slope λ<sub>1</sub>; how far the curve rises above it measures how unevenly products grow.`,
    draw: (size) => ({
      ...MARGINS,
      height: size.narrow ? 230 : 280,
      x: { domain: x },
      y: { domain: y },
      marks: [
        axisY({ label: "Λ(s), natural logs per move", domain: y, size }),
        axisX({ label: "exponent s", domain: x, size }),
        ...(slope === undefined
          ? []
          : [
              Plot.line(
                [
                  [back, slope * back],
                  [reach, slope * reach],
                ],
                { stroke: "var(--c2)", strokeDasharray: "6 3" },
              ),
            ]),
        Plot.line(rows, { x: "at", y: "value", stroke: "var(--c1)", strokeWidth: 1.2, curve: "monotone-x" }),
        Plot.ruleX(rows, { x: "at", y1: "low", y2: "high", stroke: "var(--c1)", strokeWidth: 1.5 }),
        Plot.dot(rows, { x: "at", y: "value", fill: "var(--c1)", r: 3 }),
      ],
    }),
  });
}

export function ratePlot(growth: GrowthResult): Html | undefined {
  const rows = points(growth.rate.map((p) => ({ at: p.speed, q: p.rate })));
  const lambda = growth.exponents[0];
  if (rows.length < 3 || lambda === undefined) return undefined;
  const typical = quantityNumber(lambda);
  const x = padded([...rows.map((r) => r.at), typical]);
  const y: [number, number] = [0, padded(rows.flatMap((r) => [0, r.value, r.high]))[1]];
  // What a normal law of the log norm's variance would give, as far as the frame goes.
  const variance = quantityNumber(growth.logNormVariance);
  const reach = Math.sqrt(2 * variance * y[1]);
  const [from, to] = [Math.max(x[0], typical - reach), Math.min(x[1], typical + reach)];
  const normal = Array.from({ length: variance > 0 ? 41 : 0 }, (_, k) => {
    const at = from + ((to - from) * k) / 40;
    return { at, value: (at - typical) ** 2 / (2 * variance) };
  });
  return smallFigure({
    id: "plot-rate",
    label: "Rate of large deviations against speed, zero at lambda 1.",
    caption: html`<b>Large deviations.</b> The chance that (1/<i>n</i>) log |<i>A<sub>n</sub></i>…<i>A</i><sub>1</sub>| is near a speed other than λ<sub>1</sub> (dashed) falls like exp(−<i>n</i> × rate).${normal.length > 0 && html` Dotted: the rate of a normal law with the log norm's variance, right near λ<sub>1</sub> only.`}`,
    draw: (size) => ({
      ...MARGINS,
      height: size.narrow ? 220 : 260,
      x: { domain: x },
      y: { domain: y },
      marks: [
        axisY({ label: "rate, natural logs per move", domain: y, size }),
        axisX({ label: "speed, natural logs per move", domain: x, size }),
        Plot.ruleX([typical], { stroke: "var(--c2)", strokeDasharray: "6 3" }),
        Plot.text([typical], {
          x: (d: number) => d,
          y: () => y[1],
          text: () => "λ₁",
          dx: 10,
          dy: 6,
          fill: "var(--c2)",
        }),
        Plot.line(normal, { x: "at", y: "value", stroke: "var(--c3)", strokeDasharray: "2 3" }),
        Plot.line(rows, { x: "at", y: "value", stroke: "var(--c1)", curve: "monotone-x" }),
        Plot.dot(rows, { x: "at", y: "value", fill: "var(--c1)", r: 3 }),
      ],
    }),
  });
}
