/** Axes: their ticks, their wording, and domains that the data fill. */
import * as Plot from "@observablehq/plot";
import { brief, superscript } from "../numbers.js";
import type { Size } from "./figure.js";

/** A tick of a logarithmic axis: 0.001 to 9 999 plainly, beyond that a power of ten. */
export function powerLabel(x: number): string {
  const [mantissa, exponent] = x.toExponential().split("e") as [string, string];
  const e = Number(exponent);
  if (e >= -3 && e <= 3) return brief(x);
  return mantissa === "1" ? `10${superscript(e)}` : `${mantissa}·10${superscript(e)}`;
}

/** Ticks of a logarithmic axis over [low, high]: powers of ten, with 2 and 5 between them where those are few. */
export function logTicks(low: number, high: number, most = 8): number[] {
  const first = Math.floor(Math.log10(low));
  const last = Math.ceil(Math.log10(high));
  const inside = (x: number) => x >= low * (1 - 1e-9) && x <= high * (1 + 1e-9);
  const at = (steps: readonly number[], stride: number) => {
    const ticks: number[] = [];
    for (let e = Math.ceil(first / stride) * stride; e <= last; e += stride) {
      for (const m of steps) ticks.push(Number(`${m}e${e}`));
    }
    return ticks.filter(inside);
  };
  for (const steps of [[1, 2, 5], [1, 3], [1]]) {
    const ticks = at(steps, 1);
    if (ticks.length <= most) return ticks;
  }
  let stride = 2;
  while (at([1], stride).length > most) stride++;
  return at([1], stride);
}

/** [low, high] widened so that marks do not touch the frame: by a share of the range, or of the decades. */
export function padded(values: readonly number[], type: "linear" | "log" = "linear", share = 0.06): [number, number] {
  const kept = values.filter((v) => Number.isFinite(v) && (type === "linear" || v > 0));
  if (kept.length === 0) return type === "linear" ? [0, 1] : [0.1, 1];
  let low = kept.reduce((a, b) => Math.min(a, b));
  let high = kept.reduce((a, b) => Math.max(a, b));
  if (type === "linear") {
    const room = high > low ? share * (high - low) : Math.max(Math.abs(high) * 0.1, 1e-3);
    return [low - room, high + room];
  }
  if (high / low < 2) {
    low /= 1.5;
    high *= 1.5;
  }
  const factor = (high / low) ** share;
  return [low / factor, high * factor];
}

interface AxisOptions {
  readonly label: string;
  readonly log?: boolean;
  readonly domain: readonly [number, number];
  readonly size: Size;
  readonly ticks?: readonly number[];
  readonly tickFormat?: (x: number) => string;
}

const bare = { labelArrow: "none", tickPadding: 4 } as const;

/** Ticks and their wording. The wording goes in as text: a format would be thinned out on a logarithmic axis. */
function ticks(o: AxisOptions, count: number) {
  const at = o.ticks ?? (o.log === true ? logTicks(o.domain[0], o.domain[1], o.size.narrow ? 5 : 9) : undefined);
  const wording = o.tickFormat ?? (o.log === true ? powerLabel : undefined);
  return {
    ticks: at === undefined ? count : [...at],
    ...(wording === undefined ? {} : { text: wording as (d: unknown) => string }),
  };
}

/** The horizontal axis, its label below the middle. */
export function axisX(o: AxisOptions) {
  const at = ticks(o, o.size.narrow ? 5 : 8);
  return Plot.axisX({ ...bare, ...at, tickSize: 4, label: o.label, labelAnchor: "center", labelOffset: 36 });
}

/** The vertical axis with faint lines across, its label above its upper end, where it reads without turning one's head. */
export function axisY(o: AxisOptions) {
  const at = ticks(o, 5);
  return [
    Plot.gridY({ ticks: at.ticks, stroke: "var(--rule)", strokeOpacity: 1 }),
    Plot.axisY({ ...bare, ...at, tickSize: 0, label: o.label, labelAnchor: "top" }),
  ];
}

/** The common margins: room for tick labels on the left, for both labels above and below. */
export const MARGINS = { marginLeft: 52, marginBottom: 44, marginTop: 30 } as const;
