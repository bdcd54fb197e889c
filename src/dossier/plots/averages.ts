/** Plots of one observable: its correlations, one running average, the averages' histogram. */
import * as Plot from "@observablehq/plot";
import type { ObservableResult } from "../../averages/result.js";
import { quantityNumber } from "../../quantity/quantity.js";
import { type Html, html } from "../html.js";
import { brief, percent, shown } from "../numbers.js";
import { figure, smallFigure } from "./figure.js";
import { axisX, axisY, MARGINS, padded } from "./scales.js";

/** <f, P^n f> against n: on a logarithmic scale, the sign told by the mark. */
export function correlationsPlot(o: ObservableResult, index: number): Html | undefined {
  const all = o.correlations.map((q, n) => ({ n, value: quantityNumber(q) }));
  const rows = all
    .filter((r) => Number.isFinite(r.value) && r.value !== 0)
    .map((r) => ({ ...r, size: Math.abs(r.value) }));
  if (rows.length < 3) return undefined;
  const zeros = all.filter((r) => r.value === 0).map((r) => r.n);
  const x: [number, number] = [0, Math.max(4, all.length - 1)];
  const y = padded(
    rows.map((r) => r.size),
    "log",
    0.08,
  );
  const negative = rows.some((r) => r.value < 0);
  const missing =
    zeros.length > 0 ? html` Exactly zero at ${zeros.length} of the ${all.length} lags (no mark there).` : undefined;
  return figure({
    id: `plot-correlations-${index}`,
    label: `Correlations of the observable ${o.label} against the lag n, on a logarithmic scale.`,
    caption: html`<b>Correlations</b> ⟨<i>f</i>, <i>P<sup>n</sup> f</i>⟩ of “${o.label}”, centred.${negative ? " Filled dots: positive; open squares: negative." : ""}${missing} The variance is the first of them plus twice the sum of the others.`,
    draw: (size) => ({
      ...MARGINS,
      height: 230,
      x: { domain: x },
      y: { type: "log", domain: y },
      marks: [
        axisY({ label: "|correlation|", log: true, domain: y, size }),
        axisX({ label: "lag n, moves", domain: x, size, tickFormat: (v) => (Number.isInteger(v) ? String(v) : "") }),
        Plot.line(rows, { x: "n", y: "size", stroke: "var(--c1)", strokeWidth: 0.8, strokeOpacity: 0.6 }),
        Plot.dot(
          rows.filter((r) => r.value > 0),
          { x: "n", y: "size", fill: "var(--c1)", r: 3 },
        ),
        Plot.dot(
          rows.filter((r) => r.value < 0),
          { x: "n", y: "size", stroke: "var(--c2)", fill: "var(--paper)", symbol: "square", r: 3.6, strokeWidth: 1.5 },
        ),
      ],
    }),
  });
}

/** One replicate's running average, its band and the envelope of the iterated logarithm. */
export function runningPlot(o: ObservableResult, index: number, level: number): Html | undefined {
  const mean = quantityNumber(o.mean);
  const rows = o.sampled.running
    .filter((r) => r.moves >= 1 && [r.average, r.low, r.high].every((v) => Number.isFinite(v)))
    .map((r) => ({ ...r, under: mean - r.envelope, over: mean + r.envelope }));
  if (rows.length < 3 || !Number.isFinite(mean)) return undefined;
  // The first few averages spread over the whole range of f and would flatten the rest.
  const from = rows.length > 12 ? Math.max(1, Math.ceil(rows.length / 8)) : 0;
  const kept = rows.slice(from);
  const enveloped = kept.filter((r) => Number.isFinite(r.envelope) && r.envelope > 0);
  const x = padded(
    kept.map((r) => r.moves),
    "log",
    0.01,
  );
  const y = padded([
    mean,
    ...kept.flatMap((r) => [r.average, r.low, r.high]),
    ...enveloped.flatMap((r) => [r.under, r.over]),
  ]);
  const cut = from > 0 ? html` From move ${rows[from]?.moves ?? 1} on.` : undefined;
  return smallFigure({
    id: `plot-running-${index}`,
    label: `Running time average of the observable ${o.label} against the number of moves, with its band.`,
    caption: html`<b>Running average</b> of “${o.label}” along one exact walk (line), with its ${percent(level)} interval (band). Dashed: the limit ${shown(o.mean).value}; dotted: the envelope of the law of the iterated logarithm about it, which from some move on no walk oversteps by a fixed share.${cut}`,
    draw: (size) => ({
      ...MARGINS,
      height: 230,
      x: { type: "log", domain: x },
      y: { domain: y },
      marks: [
        axisY({ label: "time average", domain: y, size }),
        axisX({ label: "moves n", log: true, domain: x, size }),
        Plot.areaY(kept, { x: "moves", y1: "low", y2: "high", fill: "var(--c1)", fillOpacity: 0.2 }),
        Plot.lineY(enveloped, { x: "moves", y: "over", stroke: "currentColor", strokeDasharray: "1.5 3" }),
        Plot.lineY(enveloped, { x: "moves", y: "under", stroke: "currentColor", strokeDasharray: "1.5 3" }),
        Plot.ruleY([mean], { stroke: "var(--c2)", strokeDasharray: "6 3", strokeWidth: 1.5 }),
        Plot.lineY(kept, { x: "moves", y: "average", stroke: "var(--c1)", strokeWidth: 1.5 }),
      ],
    }),
  });
}

const NORMAL_PEAK = 0.3989422804014327;

/** Standardised averages over replicates against the normal density. */
export function histogramPlot(o: ObservableResult, index: number): Html | undefined {
  const values = o.sampled.standardised.filter((v) => Number.isFinite(v));
  if (values.length < 20) return undefined;
  const reach = Math.min(6, Math.max(3.5, ...values.map(Math.abs)) + 0.25);
  // Twice the cube root: Rice's rule, common practice.
  const bins = Math.max(7, Math.min(41, Math.round(2 * Math.cbrt(values.length)))) | 1;
  const width = (2 * reach) / bins;
  const counts = new Array<number>(bins).fill(0);
  for (const v of values) {
    const bin = Math.floor((v + reach) / width);
    if (bin >= 0 && bin < bins) (counts[bin] as number)++;
  }
  const bars = counts.map((count, i) => ({
    from: -reach + i * width,
    to: -reach + (i + 1) * width,
    density: count / (values.length * width),
  }));
  const curve = Array.from({ length: 121 }, (_, i) => {
    const z = -reach + (2 * reach * i) / 120;
    return { z, density: NORMAL_PEAK * Math.exp((-z * z) / 2) };
  });
  const y: [number, number] = [0, 1.08 * Math.max(NORMAL_PEAK, ...bars.map((b) => b.density))];
  const x: [number, number] = [-reach, reach];
  const { statistic, pValue } = o.sampled.normalDistance;
  const p =
    pValue === null
      ? ""
      : pValue < 0.001
        ? ", p\u202f<\u202f0.001"
        : `, p\u202f=\u202f${pValue.toFixed(pValue < 0.1 ? 3 : 2)}`;
  const told =
    statistic === null
      ? undefined
      : html` Largest distance between the two distribution functions: ${statistic.toFixed(3)}${p}.`;
  return smallFigure({
    id: `plot-histogram-${index}`,
    label: `Histogram of ${values.length} standardised time averages of the observable ${o.label} with the normal density.`,
    caption: html`<b>Is the error normal?</b> Time averages of “${o.label}” over ${brief(o.sampled.moves)} moves in ${values.length} independent walks, less their limit and divided by their standard error (bars), and the normal density (line).${told}`,
    draw: (size) => ({
      ...MARGINS,
      height: 230,
      x: { domain: x },
      y: { domain: y },
      marks: [
        axisY({ label: "density", domain: y, size }),
        axisX({ label: "standard errors from the limit", domain: x, size }),
        Plot.rect(bars, {
          x1: "from",
          x2: "to",
          y1: 0,
          y2: "density",
          fill: "var(--c1)",
          fillOpacity: 0.35,
          inset: 0.5,
        }),
        Plot.line(curve, { x: "z", y: "density", stroke: "var(--c2)", strokeWidth: 1.6 }),
        Plot.ruleY([0], { stroke: "var(--soft)" }),
      ],
    }),
  });
}
