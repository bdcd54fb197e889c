/** Time averages: limit, variance, error bars and how many moves they take, one block an observable. */
import type { Gap } from "../../averages/gap.js";
import type { PoissonFinding } from "../../averages/limit-variance.js";
import type { ObservableResult } from "../../averages/result.js";
import { type Quantity, quantityNumber } from "../../quantity/quantity.js";
import { type Html, html, joined, type Piece } from "../html.js";
import { brief, percent, settled, shown, significant } from "../numbers.js";
import { correlationsPlot, histogramPlot, runningPlot } from "../plots/averages.js";
import { pair } from "../plots/figure.js";
import { type Dossier, isAnswered } from "../result.js";
import { evidence } from "./evidence.js";
import { listed, missing, plural, quantity, quantityColumn, table, warning } from "./parts.js";
import { prose } from "./prose.js";

/** "fails" would be bad news nowhere else than here, where it is good. */
const ZERO = { holds: "Yes.", fails: "No.", undecided: "Undecided." } as const;

/** Observables that get plots of their own; the table has them all. */
const PLOTTED = 4;

/** The stated half-width nearest to a hundredth, for the summary. */
function needed(o: ObservableResult): Piece {
  const options = o.stepsFor.filter((s) => Number.isFinite(quantityNumber(s.steps)));
  if (options.length === 0) return "–";
  const distance = (h: number) => Math.abs(Math.log(h / 0.01));
  const s = options.reduce((a, b) => (distance(b.halfWidth) < distance(a.halfWidth) ? b : a));
  const steps = shown(s.steps, true);
  return html`<span class="value">${steps.value}</span> <span class="standing">for ±${brief(s.halfWidth)}, ${steps.standing}${steps.interval !== undefined && ` ${steps.interval}`}</span>`;
}

export function averagesSummary(dossier: Dossier): Html {
  const averages = dossier.averages;
  if (!isAnswered(averages)) return missing(averages) as Html;
  const limit = quantityColumn(
    "limit",
    averages.observables.map((o) => o.mean),
  );
  const variance = quantityColumn(
    html`variance <i>v</i>`,
    averages.observables.map((o) => o.variance),
  );
  // The interval stands in the section itself: here a few proved digits are enough.
  const digits = (q: Quantity) => {
    const text = settled(q);
    return (
      text &&
      html`<td class="n"><span class="value">${text}</span> <span class="standing">proved to these digits</span></td>`
    );
  };
  const noted = averages.observables.filter((o) => o.notes.length > 0).map((o) => o.label);
  const found = table(
    html`Limit of each time average; <i>v</i> = lim <i>n</i> Var(average over <i>n</i> moves), so that its error after <i>n</i> moves is about √(<i>v</i>/<i>n</i>); moves until the ${percent(dossier.level)} interval has the half-width named.`,
    [{ name: "observable" }, limit.column, variance.column, { name: "moves" }],
    averages.observables.map(
      (o) =>
        html`<th scope="row">${o.label}</th>${limit.show(o.mean)}${digits(o.variance) ?? variance.show(o.variance)}<td>${needed(o)}</td>`,
    ),
  );
  return html`${found}${averages.warnings.map((w) => warning(w))}${noted.length > 0 && warning(html`Read the <a href="#averages">notes on ${listed(noted)}</a> before relying on these.`)}`;
}

/** Where all correlations but the first are 0 there is nothing to plot. */
function flat(o: ObservableResult): Html | undefined {
  const rest = o.correlations.slice(1);
  if (rest.length < 2 || rest.some((q) => quantityNumber(q) !== 0)) return undefined;
  const proved = rest.every((q) => q.standing === "exact");
  return html`<p>The correlations ⟨<i>f</i>, <i>P<sup>n</sup> f</i>⟩ are ${proved ? "" : "computed as "}0 for <i>n</i> = 1 to ${rest.length}.</p>`;
}

function generatingTable(o: ObservableResult): Html | undefined {
  if (o.generating === undefined || o.generating.length === 0) return undefined;
  const sums = quantityColumn(
    "sum",
    o.generating.map((g) => g.value),
  );
  return table(
    html`The correlations' generating function, the sum over <i>n</i> ≥ 0 of <i>z<sup>n</sup></i>⟨<i>f</i>, <i>P<sup>n</sup> f</i>⟩.`,
    [{ name: html`<i>z</i>`, n: true }, sums.column],
    o.generating.map((g) => html`<td class="n">${brief(g.z, 6)}</td>${sums.show(g.value)}`),
  );
}

function sampledTable(o: ObservableResult): Html {
  const s = o.sampled;
  const { median, largest } = s.iteratedLogarithm;
  const sampled = quantityColumn("sampled", [s.mean, s.variance, s.batchMeansVariance, s.coverage]);
  const row = (name: Piece, found: Piece) => html`<th scope="row">${name}</th>${found}`;
  return table(
    html`What ${plural(s.replicates, "exact walk")} of ${plural(s.moves, "move")} showed.`,
    [{ name: "" }, sampled.column],
    [
      row("mean of the time averages", sampled.show(s.mean)),
      row(html`<i>n</i> × variance of the time average, over walks`, sampled.show(s.variance)),
      row("the same by batch means", sampled.show(s.batchMeansVariance)),
      row("share of walks whose interval covers the limit", sampled.show(s.coverage)),
      median !== null &&
        largest !== null &&
        row(
          html`largest |<i>S<sub>n</sub></i> − <i>n m</i>| / √(2 <i>n v</i> log log <i>n</i>) in the second half: median walk; most extreme walk`,
          html`<td class="n">${brief(median, 3)}; ${brief(largest, 3)}</td>`,
        ),
    ],
  );
}

function block(o: ObservableResult, index: number, level: number): Html {
  const last = o.lastTerms ?? [];
  const steps = quantityColumn(
    "moves",
    o.stepsFor.map((s) => s.steps),
    true,
  );
  return html`<h3>${o.label}</h3>
<p>Limit ${quantity(o.mean)}; ${prose(o.mean.method)}.</p>
<p>Variance ${quantity(o.variance)}; ${prose(o.variance.method)}.${
    last.length > 0 &&
    html` The last correlations that went into it, which show how much may be missing: ${joined(
      last.map((t) => `${significant(quantityNumber(t.value), 2)} (n = ${t.step})`),
      ", ",
    )}.`
  }${o.reached !== undefined && html` They end at <i>n</i> = ${o.reached.step}: ${prose(o.reached.reason)}.`}</p>
<p>Is the variance zero? ${ZERO[o.degenerate.verdict]} ${prose(o.degenerate.reason)}</p>
${o.bracket !== undefined && html`<p>The variance is proved to be ${quantity(o.bracket)}: ${prose(o.bracket.method)}.</p>`}
${o.poisson !== undefined && poissonText(o.poisson)}
${o.startCost !== undefined && html`<p>The start costs about ${quantity(o.startCost.moves)} moves beside the orbit of the trap with denominator ${o.startCost.trap.denominator}; they add ${quantity(o.startCost.sum)} to the sum of <i>f</i> less its mean, and the moves needed allow for that.</p>`}
${o.notes.map((n) => warning(n))}
${o.degenerate.verdict === "holds" && evidence(o.degenerate.evidence)}
${
  o.stepsFor.length > 0 &&
  table(
    html`Moves after which the ${percent(level)} interval has this half-width.`,
    [{ name: "half-width", n: true }, steps.column],
    o.stepsFor.map((s) => html`<td class="n">±${brief(s.halfWidth)}</td>${steps.show(s.steps)}`),
  )
}
${generatingTable(o)}
${correlationsPlot(o, index) ?? flat(o)}
${pair(runningPlot(o, index, level), histogramPlot(o, index))}
${sampledTable(o)}
`;
}

function poissonText({ frequencies, residual, adjointResidual, byNorms, decay }: PoissonFinding): Html {
  return html`<p>Behind it: <i>f</i> = <i>g</i> − <i>P g</i> solved on ${plural(frequencies, "frequency", "frequencies")} up to ${quantity(residual)} of |<i>f</i>|, and for the adjoint up to ${quantity(adjointResidual)}; the variance is off by a multiple of their product that is not bounded here. The variance of <i>g</i> − <i>P g</i> alone, |<i>g</i>|² − |<i>P g</i>|², is ${quantity(byNorms)}.${decay !== undefined && html` The last correlations computed shrink by ${quantity(decay)} a move.`}</p>`;
}

function gapBlock({ norm, spectralRadius, gap, kesten, evidence: found }: Gap): Html {
  const column = quantityColumn("value", [norm, spectralRadius, gap, ...(kesten === undefined ? [] : [kesten])]);
  const row = (name: Piece, q: Quantity) => html`<th scope="row">${name}</th>${column.show(q)}`;
  return html`<h3>How fast do functions of mean zero shrink?</h3>
<p>A move multiplies the <i>L</i>² norm of what is left of an observable, E <i>f</i>(<i>x<sub>n</sub></i>) as a function of the start, by at most the norm; over many moves, by about the spectral radius at most.</p>
${table(
  html`The averaging operator <i>P</i> on functions of mean zero; ${prose(norm.method)}.`,
  [{ name: "" }, column.column],
  [
    row(html`norm of <i>P</i>`, norm),
    row("spectral radius", spectralRadius),
    row("gap", gap),
    kesten !== undefined && row("Kesten’s value of the norm (the moves are free)", kesten),
  ],
)}
${evidence(found)}
`;
}

export function averagesSection(dossier: Dossier): Html {
  const averages = dossier.averages;
  if (!isAnswered(averages))
    return html`<section id="averages"><h2>What do time averages converge to?</h2>
${missing(averages)}</section>
`;
  const rest = averages.observables.length - PLOTTED;
  return html`<section id="averages"><h2>What do time averages converge to?</h2>
${averages.orbit !== undefined && html`<p>The start is rational: all findings below are about the walk on its finite orbit of ${plural(averages.orbit.size, "point")} with denominator ${averages.orbit.denominator}.</p>`}
${averages.warnings.map((w) => warning(w))}
${averages.observables.slice(0, PLOTTED).map((o, i) => block(o, i + 1, dossier.level))}
${averages.gap !== undefined && gapBlock(averages.gap)}
${rest > 0 && html`<p>The other ${plural(rest, "observable")} are in the summary's table, and in full in dossier.json.</p>`}
</section>
`;
}
