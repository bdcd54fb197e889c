/** The start: its kind, its verdict, the rational traps beside it. */

import { quantityNumber } from "../../quantity/quantity.js";
import { type Html, html } from "../html.js";
import { brief, significant } from "../numbers.js";
import { moves, trapsPlot } from "../plots/traps.js";
import { type Dossier, isAnswered } from "../result.js";
import { evidence } from "./evidence.js";
import { missing, number, quantity, quantityColumn, standing, table, verdict } from "./parts.js";
import { prose } from "./prose.js";

const KINDS = {
  rational: "every coordinate is rational",
  algebraic: "at least one coordinate is a proved algebraic irrational",
  unproved: "some coordinate could be proved neither rational nor algebraic",
  uniform: "drawn from the uniform (Haar) measure",
  density: "drawn from a given density",
} as const;

const held = (n: string) => (n === "less than 1" ? "less than one move" : `about ${n} moves`);

export function startSummary(dossier: Dossier): Html {
  const start = dossier.start;
  if (!isAnswered(start)) return missing(start) as Html;
  const trap = start.traps[0];
  return html`<p>Equidistribution from this start: ${verdict(start.verdict)}. ${prose(start.verdict.reason)}</p>
${start.orbit !== undefined && html`<p>Its denominator is ${start.orbit.denominator}; it stays on a finite orbit, whose number of points is ${quantity(start.orbit.size)}.</p>\n`}
${
  trap !== undefined &&
  html`<p>Strongest trap: a point with denominator ${brief(trap.denominator)} at distance ${significant(quantityNumber(trap.distance), 3)}, predicted to hold the walk for ${held(moves(trap.hold))} <span class="standing">(</span>${standing(trap.hold)}<span class="standing">)</span>.</p>\n`
}`;
}

function trapsTable(dossier: Dossier): Html | undefined {
  const start = dossier.start;
  if (!isAnswered(start) || start.traps.length === 0) return undefined;
  const sampled = start.traps.some((t) => t.sampledHold !== undefined);
  const most = 12;
  const hold = quantityColumn(
    "hold",
    start.traps.map((t) => t.hold),
  );
  const excess = quantityColumn(
    "beyond the usual",
    start.traps.flatMap((t) => t.excess ?? []),
  );
  const usual = start.traps.every((t) => t.excess !== undefined);
  const rows = start.traps.slice(0, most).map((t) => {
    const s = t.sampledHold;
    return html`${number(t.denominator)}<td>(${t.numerators.map((n) => brief(n)).join(", ")})</td><td class="n">${significant(quantityNumber(t.distance), 4)}</td>${hold.show(t.hold)}${usual && t.excess !== undefined && excess.show(t.excess)}${
      sampled &&
      html`<td class="n">${s === undefined ? "–" : `${brief(s.median)} (${brief(s.low)} to ${brief(s.high)})`}</td>`
    }`;
  });
  const left = start.traps.length - rows.length;
  return table(
    html`Rational points near the start, by predicted hold${left > 0 ? `; the ${most} strongest of ${start.traps.length}` : ""}. Distances are proved to the digits shown. Hold in moves${usual ? "; beyond the usual: less the hold of a point on the dashed line below, such as every irrational start has" : ""}${sampled ? "; sampled hold: median (quantiles) over exact walks" : ""}.`,
    [
      { name: "denominator", n: true },
      { name: "numerators" },
      { name: "distance", n: true },
      hold.column,
      ...(usual ? [excess.column] : []),
      ...(sampled ? [{ name: "sampled hold", n: true }] : []),
    ],
    rows,
  );
}

function costTable(dossier: Dossier): Html | undefined {
  const start = dossier.start;
  if (!isAnswered(start) || start.cost === undefined) return undefined;
  const { cost } = start;
  const sums = quantityColumn(
    "sum of f − mean",
    cost.observables.map((o) => o.sum),
  );
  return table(
    html`What the trap with denominator ${brief(cost.denominator)} costs: for ${quantity(cost.moves)} moves averages are those of its orbit of ${brief(cost.orbitSize)} points, so that an average over <i>n</i> moves from this start is off by the sum below over <i>n</i>.`,
    [{ name: "observable" }, sums.column],
    cost.observables.map((o) => html`<th scope="row">${o.label}</th>${sums.show(o.sum)}`),
  );
}

export function startSection(dossier: Dossier, dimension: number): Html {
  const start = dossier.start;
  if (!isAnswered(start))
    return html`<section id="start"><h2>Is the start safe?</h2>
${missing(start)}</section>
`;
  const shownEvidence = evidence(start.verdict.evidence);
  return html`<section id="start"><h2>Is the start safe?</h2>
<p>Kind: <b>${start.kind}</b> (${KINDS[start.kind]}). Equidistribution: ${verdict(start.verdict)}. ${prose(start.verdict.reason)}</p>
${shownEvidence !== undefined && html`<details open><summary>Evidence</summary>${shownEvidence}</details>\n`}
${start.orbit !== undefined && html`<p>Denominator ${start.orbit.denominator}, an orbit whose number of points is ${quantity(start.orbit.size)}: time averages converge to the orbit's mean, not to the integral over the torus.</p>\n`}
${trapsTable(dossier)}
${costTable(dossier)}
${trapsPlot(start, dimension)}
</section>
`;
}
