/** Growth: exponents, the variance of the log norm, pressure, large deviations. */

import type { GrowthResult } from "../../growth/result.js";
import { quantityNumber } from "../../quantity/quantity.js";
import { type Html, html } from "../html.js";
import { brief, significant } from "../numbers.js";
import { pair } from "../plots/figure.js";
import { growthCurve, pressurePlot, ratePlot } from "../plots/growth.js";
import { type Dossier, isAnswered } from "../result.js";
import { missing, number, quantity, quantityColumn, table, warning } from "./parts.js";
import { prose } from "./prose.js";

export function growthSummary(dossier: Dossier): Html {
  const growth = dossier.growth;
  if (!isAnswered(growth)) return missing(growth) as Html;
  const first = growth.exponents[0];
  if (first === undefined) return html`<p>No exponent was found.</p>`;
  const lambda = quantityNumber(first);
  const factor = Math.exp(lambda);
  return html`<p>λ<sub>1</sub> = ${quantity(first, "natural logs per move")}${first.standing === "exact" && lambda === 0 ? ": lengths do not grow exponentially" : html`: lengths grow by a factor of about ${significant(factor, 3)} a move`}.</p>
<p>Around it log |<i>A<sub>n</sub></i>…<i>A</i><sub>1</sub>| spreads with variance ${quantity(growth.logNormVariance, "per move")}.</p>
${growth.warnings.map((w) => warning(w))}`;
}

/** Long, and the plot shows it: folded away. */
function rateTable(growth: GrowthResult): Html | undefined {
  if (growth.rate.length === 0) return undefined;
  const rate = quantityColumn(
    "rate",
    growth.rate.map((r) => r.rate),
  );
  const methods = [...new Set(growth.rate.map((r) => r.rate.method))];
  const one = methods.length === 1;
  const found = table(
    html`Large deviations: the chance of a speed other than λ<sub>1</sub> over <i>n</i> moves falls like exp(−<i>n</i> × rate)${one && html`; ${prose(methods[0] as string)}`}.`,
    [{ name: "speed", n: true }, rate.column, ...(one ? [] : [{ name: "method" }])],
    growth.rate.map(
      (r) => html`${number(r.speed)}${rate.show(r.rate)}${!one && html`<td>${prose(r.rate.method)}</td>`}`,
    ),
  );
  return growth.rate.length > 8 ? html`<details><summary>Table of rates</summary>${found}</details>\n` : found;
}

export function growthSection(dossier: Dossier): Html {
  const growth = dossier.growth;
  if (!isAnswered(growth))
    return html`<section id="growth"><h2>How fast do products grow?</h2>
${missing(growth)}</section>
`;
  const exponents = quantityColumn("value", growth.exponents);
  const pressure = quantityColumn(
    html`Λ(<i>s</i>)`,
    growth.pressure.map((p) => p.value),
  );
  return html`<section id="growth"><h2>How fast do products grow?</h2>
${growth.warnings.map((w) => warning(w))}
${table(
  "Exponents, largest first, in natural logs per move.",
  [{ name: "" }, exponents.column, { name: "method" }],
  growth.exponents.map(
    (q, i) => html`<th scope="row">λ<sub>${i + 1}</sub></th>${exponents.show(q)}<td>${prose(q.method)}</td>`,
  ),
)}
${growth.enclosure && html`<p>Proved, if less narrow: λ<sub>1</sub> = ${quantity(growth.enclosure, "natural logs per move")}; ${prose(growth.enclosure.method)}.</p>`}
${growth.upperBound && html`<p>Proved: λ<sub>1</sub> is at most ${quantity(growth.upperBound.value, "natural logs per move")}, the mean of log |<i>A<sub>n</sub></i>…<i>A</i><sub>1</sub>| over <i>n</i> for <i>n</i> = ${growth.upperBound.moves}, all words counted.</p>`}
<p>Limit of Var(log |<i>A<sub>n</sub></i>…<i>A</i><sub>1</sub>|)/<i>n</i>: ${quantity(growth.logNormVariance, "squared logs per move")}; ${prose(growth.logNormVariance.method)}.</p>
${growthCurve(growth, dossier.level)}
${
  growth.pressure.length > 0 &&
  table(
    html`Pressure Λ(<i>s</i>) = lim (1/<i>n</i>) log E |<i>A<sub>n</sub></i>…<i>A</i><sub>1</sub>|<sup><i>s</i></sup>, in natural logs per move.`,
    [{ name: html`<i>s</i>`, n: true }, pressure.column, { name: "method" }],
    growth.pressure.map((p) => html`${number(p.s)}${pressure.show(p.value)}<td>${prose(p.value.method)}</td>`),
  )
}
${rateTable(growth)}
${pair(pressurePlot(growth), ratePlot(growth))}
<p class="note">Sampled: ${brief(growth.replicates)} independent products of ${brief(growth.moves)} moves${growth.sampled && html`; from them alone λ<sub>1</sub> = ${quantity(growth.sampled)}`}.</p>
</section>
`;
}
