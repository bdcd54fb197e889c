/** Plots of the exact positions: the walk on the torus, and how far double precision strays from it. */
import * as Plot from "@observablehq/plot";
import { type Html, html } from "../html.js";
import { brief, significant } from "../numbers.js";
import type { DossierTrajectory } from "../result.js";
import { figure, type Size, smallFigure } from "./figure.js";
import { axisX, axisY, MARGINS, padded } from "./scales.js";

/** Shown one by one beside the double-precision walk; the rest is shown as a cloud. */
const BESIDE = 60;

interface Spot {
  readonly x: number;
  readonly y: number;
}

const spot = (point: readonly (string | number)[]): Spot => ({ x: Number(point[0]), y: Number(point[1]) });

/** The unit square with equal scales both ways. */
function square(size: Size, marks: Plot.Markish[]): Plot.PlotOptions {
  const [left, right, top, bottom] = [40, 12, 30, 44];
  const side = size.width - left - right;
  const domain: [number, number] = [0, 1];
  const ticks = [0, 0.25, 0.5, 0.75, 1];
  const tickFormat = (v: number) => brief(v);
  return {
    width: left + side + right,
    height: top + side + bottom,
    marginLeft: left,
    marginRight: right,
    marginTop: top,
    marginBottom: bottom,
    x: { domain },
    y: { domain },
    marks: [
      axisY({ label: "x₂ (mod 1)", domain, size, ticks, tickFormat }),
      axisX({ label: "x₁ (mod 1)", domain, size, ticks, tickFormat }),
      Plot.gridX({ ticks, stroke: "var(--rule)", strokeOpacity: 1 }),
      Plot.frame({ stroke: "var(--soft)", strokeWidth: 0.8 }),
      ...marks,
    ],
  };
}

const startMark = (at: Spot) => [
  Plot.dot([at], { x: "x", y: "y", r: 7, stroke: "currentColor", strokeWidth: 1.2 }),
  Plot.text([at], {
    x: "x",
    y: "y",
    text: () => "start",
    textAnchor: at.x > 0.85 ? "end" : "start",
    dx: at.x > 0.85 ? -10 : 10,
    dy: at.y > 0.9 ? 10 : -8,
    fill: "currentColor",
    stroke: "var(--paper)",
    strokeWidth: 4,
  }),
];

/** The moves shown one by one: the first, or those around the parting where that comes later. */
function stretch(t: DossierTrajectory): { from: number; to: number } {
  const from = t.partedAt === undefined ? 0 : Math.max(0, t.partedAt - BESIDE / 2);
  return { from, to: Math.min(from + BESIDE, t.doubles.length - 1, t.positions.length - 1) };
}

/** The walk and its double-precision copy, move by move. */
export function besidePlot(t: DossierTrajectory, dimension: number): Html | undefined {
  const { from, to } = stretch(t);
  if (to - from < 2) return undefined;
  const pairs = t.positions.slice(from, to + 1).map((p, i) => ({
    step: p.step,
    exact: spot(p.point),
    double: spot(t.doubles[from + i] as readonly number[]),
    apart: t.partedAt !== undefined && p.step >= t.partedAt,
  }));
  const parting = pairs.filter((p) => p.step === t.partedAt);
  const projection =
    dimension > 2 ? html` The first two of ${dimension} coordinates are shown; the distance is over all.` : undefined;
  const told =
    t.partedAt === undefined
      ? html`The two stay within ${brief(t.apart)} of each other for all ${t.moves} moves compared.`
      : html`They first part by more than ${brief(t.apart)} at move ${t.partedAt}; from then on the crosses show another walk.`;
  const which = from === 0 ? `First ${to} moves.` : `Moves ${from} to ${to}.`;
  const cross = (apart: boolean) =>
    Plot.dot(
      pairs.filter((p) => p.apart === apart),
      {
        x: (p: (typeof pairs)[number]) => p.double.x,
        y: (p: (typeof pairs)[number]) => p.double.y,
        stroke: "var(--c2)",
        symbol: "times",
        r: apart ? 3.2 : 2.6,
        strokeWidth: apart ? 1.5 : 1,
      },
    );
  return smallFigure({
    id: "plot-positions",
    label: `Positions of the walk on the torus, moves ${from} to ${to}, exact, with the double-precision walk beside them.`,
    caption: html`<b>${which}</b> Dots: exact positions. Crosses: the same moves from the same start in double precision. ${told}${projection}`,
    draw: (size) =>
      square(size, [
        Plot.dot(
          pairs.map((p) => p.exact),
          { x: "x", y: "y", fill: "var(--c1)", r: 2.8 },
        ),
        cross(false),
        cross(true),
        parting.map((p) =>
          Plot.text([p.exact], {
            x: "x",
            y: "y",
            text: () => `move ${p.step}`,
            textAnchor: p.exact.x > 0.8 ? "end" : "start",
            dx: p.exact.x > 0.8 ? -8 : 8,
            dy: p.exact.y > 0.9 ? 10 : -8,
            fill: "var(--c2)",
            stroke: "var(--paper)",
            strokeWidth: 4,
          }),
        ),
        from === 0 ? startMark((pairs[0] as (typeof pairs)[number]).exact) : [],
      ]),
  });
}

/** Every exact position as a cloud: does it fill the torus? */
export function cloudPlot(t: DossierTrajectory, dimension: number): Html | undefined {
  const exact = t.positions.map((p) => spot(p.point));
  const first = exact[0];
  if (first === undefined || exact.length <= BESIDE + 1) return undefined;
  return smallFigure({
    id: "plot-cloud",
    label: `The first ${exact.length - 1} exact positions of the walk on the torus.`,
    caption: html`<b>First ${exact.length - 1} moves,</b> all exact: the last position took ${t.bitsConsumed} binary digits of each coordinate of the start beyond those that it shows.${dimension > 2 ? html` The first two of ${dimension} coordinates.` : undefined}`,
    draw: (size) =>
      square(size, [
        Plot.dot(exact, { x: "x", y: "y", fill: "var(--c1)", fillOpacity: 0.75, r: 1.5 }),
        ...startMark(first),
      ]),
  });
}

/** Distance of the double-precision walk from the exact one, move by move. */
export function strayPlot(t: DossierTrajectory, lambda: number | undefined): Html | undefined {
  const rows = t.distances.map((distance, step) => ({ distance, step })).filter((r) => r.distance > 0);
  const first = rows[0];
  if (first === undefined || rows.length < 3) return undefined;
  const end = Math.min(t.distances.length - 1, Math.max(20, Math.ceil((t.partedAt ?? t.distances.length - 1) * 1.6)));
  const shownRows = rows.filter((r) => r.step <= end);
  const x: [number, number] = [0, end];
  const y = padded([...shownRows.map((r) => r.distance), 1], "log", 0.04);
  const rise: { step: number; distance: number }[] = [];
  if (lambda !== undefined && lambda > 0) {
    for (let step = first.step; step <= end; step++) {
      const distance = first.distance * Math.exp(lambda * (step - first.step));
      if (distance <= 0.5) rise.push({ step, distance });
    }
  }
  // Above the line's middle, where nothing else is.
  const tip = rise[Math.floor(rise.length / 2)];
  return figure({
    id: "plot-stray",
    label:
      "Distance between the exact walk and the double-precision walk against the number of moves, on a logarithmic scale.",
    caption: html`<b>Distance of the double-precision walk from the exact one.</b> ${lambda === undefined ? "" : html`Dashed: growth at the rate λ<sub>1</sub> = ${significant(lambda)} from the first rounding, about which a single walk wavers. `}Dotted: ${brief(t.apart)}. Near the top the distance can grow no more: the two walks have nothing to do with each other.`,
    draw: (size) => ({
      ...MARGINS,
      height: size.narrow ? 230 : 290,
      x: { domain: x },
      y: { type: "log", domain: y },
      marks: [
        axisY({ label: "distance on the torus", log: true, domain: y, size }),
        axisX({ label: "moves", domain: x, size }),
        Plot.ruleY([t.apart], { stroke: "currentColor", strokeDasharray: "1.5 3" }),
        Plot.line(rise, { x: "step", y: "distance", stroke: "var(--c2)", strokeDasharray: "6 3", strokeWidth: 1.5 }),
        Plot.line(shownRows, { x: "step", y: "distance", stroke: "var(--c1)", strokeWidth: 1 }),
        Plot.dot(shownRows, { x: "step", y: "distance", fill: "var(--c1)", r: shownRows.length > 120 ? 1.4 : 2.2 }),
        ...(tip === undefined
          ? []
          : [
              Plot.text([tip], {
                x: "step",
                y: "distance",
                text: () => "exp(λ₁ n)",
                textAnchor: "end",
                dx: -12,
                dy: -8,
                fill: "var(--c2)",
              }),
            ]),
        ...(t.partedAt === undefined
          ? []
          : [
              Plot.ruleX([t.partedAt], { stroke: "currentColor", strokeDasharray: "1.5 3" }),
              Plot.text([t.partedAt], {
                x: (d: number) => d,
                y: () => y[0],
                text: () => `move ${t.partedAt}`,
                textAnchor: "start",
                dx: 5,
                dy: -8,
              }),
            ]),
      ],
    }),
  });
}
