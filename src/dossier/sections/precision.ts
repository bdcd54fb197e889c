/** How far double precision can be trusted, and the exact positions. */

import { quantityNumber } from "../../quantity/quantity.js";
import { type Html, html } from "../html.js";
import { brief, significant } from "../numbers.js";
import { pair } from "../plots/figure.js";
import { besidePlot, cloudPlot, strayPlot } from "../plots/positions.js";
import { type Dossier, isAnswered } from "../result.js";
import { missing } from "./parts.js";
import { prose } from "./prose.js";

export function precisionSummary(dossier: Dossier): Html {
  const { precision, trajectory } = dossier;
  const predicted =
    isAnswered(precision) &&
    html`<p>A start stored in double precision determines no digit of the position after about <span class="value">${brief(Math.round(quantityNumber(precision.movesOfDouble)))}</span> moves (53 ln 2/λ<sub>1</sub>, ${precision.movesOfDouble.standing}); one decimal digit of the start lasts about ${significant(quantityNumber(precision.movesPerDigit), 2)}.</p>\n`;
  const met =
    isAnswered(trajectory) &&
    (trajectory.partedAt === undefined
      ? html`<p>In the walk computed here the two stay within ${brief(trajectory.apart)} of each other for all ${brief(trajectory.moves)} moves compared.</p>`
      : html`<p>In the walk computed here the double-precision position was first off by more than ${brief(trajectory.apart)} after move <span class="value">${trajectory.partedAt}</span>.</p>`);
  if (predicted === false && met === false) return missing(precision) ?? html``;
  return html`${predicted}${met}`;
}

export function precisionSection(dossier: Dossier, dimension: number): Html {
  const { trajectory, growth } = dossier;
  const first = isAnswered(growth) ? growth.exponents[0] : undefined;
  const lambda = first === undefined ? undefined : quantityNumber(first);
  return html`<section id="positions"><h2>How far can double precision be trusted?</h2>
<p>A double holds a fraction with denominator a power of 2, so a walk in double precision is another walk; its distance from the real one grows at the rate λ<sub>1</sub>. Position <i>n</i> needs about <i>n</i>λ<sub>1</sub>/ln 2 binary digits of the start beyond those shown; that is a property of the walk, not of a method.</p>
${missing(trajectory)}${
  isAnswered(trajectory) &&
  html`${pair(besidePlot(trajectory, dimension), cloudPlot(trajectory, dimension))}
${strayPlot(trajectory, lambda)}
<p class="note">Exact positions: ${trajectory.moves} moves, ${trajectory.digits} decimal digits of each coordinate, ${trajectory.standing === "exact" ? "the positions themselves are fractions and exact" : "every digit proved"}; ${prose(trajectory.method)}.</p>`
}
</section>
`;
}
