/** Rational points near the start: distance against denominator, with the moves that each holds the walk. */
import * as Plot from "@observablehq/plot";
import { type Quantity, quantityNumber } from "../../quantity/quantity.js";
import type { StartResult } from "../../start/result.js";
import { type Html, html } from "../html.js";
import { brief } from "../numbers.js";
import { figure } from "./figure.js";
import { axisX, axisY, MARGINS, padded } from "./scales.js";

/** A number of moves, to no more digits than a prediction deserves. */
export function moves(q: Quantity): string {
  const n = quantityNumber(q);
  if (!Number.isFinite(n)) return "no end of";
  return n < 1 ? "less than 1" : brief(n < 10 ? Number(n.toFixed(1)) : Math.round(n));
}

interface Dot {
  readonly denominator: number;
  readonly distance: number;
  readonly hold: number;
  readonly words: string;
}

interface Label extends Dot {
  /** Below the dot (1) or above it (-1). */
  readonly side: 1 | -1;
}

/** Half the room that a label takes, in pixels, and how far it is from its dot. */
const ROOM = { x: 17, y: 8, away: 13 };

/** Labels go to the traps that hold longest, wherever they collide with no dot and no other label. */
function labels(rows: readonly Dot[], place: (r: Dot) => { x: number; y: number }, width: number): Label[] {
  const taken = rows.map(place);
  const chosen: Label[] = [];
  for (const row of [...rows].sort((a, b) => b.hold - a.hold)) {
    const at = place(row);
    for (const side of [1, -1] as const) {
      const middle = { x: at.x, y: at.y + side * ROOM.away };
      const clear = taken.every(
        (t) => Math.abs(t.x - middle.x) > ROOM.x || Math.abs(t.y - middle.y) > ROOM.y || (t.x === at.x && t.y === at.y),
      );
      if (!clear || middle.x < ROOM.x || middle.x > width - ROOM.x) continue;
      chosen.push({ ...row, side });
      // A label is as wide as three dots.
      taken.push({ x: middle.x - ROOM.x, y: middle.y }, middle, { x: middle.x + ROOM.x, y: middle.y });
      break;
    }
    if (chosen.length === 7) break;
  }
  return chosen;
}

export function trapsPlot(start: StartResult, dimension: number): Html | undefined {
  const rows: Dot[] = start.traps
    .map((t) => ({
      denominator: t.denominator,
      distance: quantityNumber(t.distance),
      hold: quantityNumber(t.hold),
      words: moves(t.hold).replace("less than ", "< "),
    }))
    .filter((r) => r.denominator >= 1 && r.distance > 0 && Number.isFinite(r.hold));
  if (rows.length < 3) return undefined;
  const x = padded(
    rows.map((r) => r.denominator),
    "log",
    0.08,
  );
  const y = padded(
    rows.map((r) => r.distance),
    "log",
    0.15,
  );
  const line: { denominator: number; distance: number }[] = [];
  const power = 1 + 1 / dimension;
  for (let i = 0; i <= 60; i++) {
    const denominator = x[0] * (x[1] / x[0]) ** (i / 60);
    const distance = Math.sqrt(dimension) * denominator ** -power;
    if (distance >= y[0] && distance <= y[1]) line.push({ denominator, distance });
  }
  return figure({
    id: "plot-traps",
    label: "Distance of the start from nearby rational points against their denominators, both on logarithmic scales.",
    caption: html`<b>Rational traps.</b> Each dot is a rational point near the start: its distance, its denominator, and (beside the strongest) the predicted number of moves for which the walk stays near its finite orbit. Dashed: √<i>d</i>·<i>q</i><sup>−1−1/<i>d</i></sup>, below which every irrational start has infinitely many rational points (Dirichlet); a dot far below the line is an unusually strong trap.`,
    draw: (size) => {
      const height = size.narrow ? 240 : 300;
      const frame = {
        width: size.width - MARGINS.marginLeft - 18,
        height: height - MARGINS.marginTop - MARGINS.marginBottom,
      };
      const share = (v: number, [low, high]: readonly [number, number]) => Math.log(v / low) / Math.log(high / low);
      const place = (r: Dot) => ({
        x: frame.width * share(r.denominator, x),
        y: frame.height * (1 - share(r.distance, y)),
      });
      const named = labels(rows, place, frame.width);
      const words = (side: 1 | -1) =>
        Plot.text(
          named.filter((l) => l.side === side),
          {
            x: "denominator",
            y: "distance",
            text: (r: Label) => r.words,
            dy: side * ROOM.away,
            fill: "currentColor",
            stroke: "var(--paper)",
            strokeWidth: 3,
          },
        );
      return {
        ...MARGINS,
        height,
        x: { type: "log", domain: x },
        y: { type: "log", domain: y },
        marks: [
          axisY({ label: "distance on the torus", log: true, domain: y, size }),
          axisX({ label: "denominator q", log: true, domain: x, size }),
          Plot.line(line, { x: "denominator", y: "distance", stroke: "var(--c2)", strokeDasharray: "6 3" }),
          Plot.dot(rows, { x: "denominator", y: "distance", fill: "var(--c1)", r: 3 }),
          words(1),
          words(-1),
        ],
      };
    },
  });
}
