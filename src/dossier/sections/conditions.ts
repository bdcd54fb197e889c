/** The conditions of the limit theorems, with the evidence that a reader can check by hand. */
import type { ConditionsResult } from "../../conditions/result.js";
import type { Verdict } from "../../quantity/quantity.js";
import { type Html, html } from "../html.js";
import { type Dossier, isAnswered } from "../result.js";
import { evidence } from "./evidence.js";
import { listed, missing, verdict } from "./parts.js";
import { prose } from "./prose.js";

const ROWS = [
  ["Strongly irreducible", "stronglyIrreducible"],
  ["Proximal", "proximal"],
  ["Exponential moment", "exponentialMoment"],
  ["Equidistribution", "equidistribution"],
  ["Central limit theorem", "centralLimit"],
] as const;

export function conditionsSummary(dossier: Dossier): Html {
  const found = dossier.conditions;
  if (!isAnswered(found)) return missing(found) as Html;
  const short = (name: string, v: Verdict) => html`${name}: ${verdict(v)}`;
  return html`<p>${listed(
    ROWS.slice(0, 3).map(([name, key], i) => short(i === 0 ? name : name.toLowerCase(), found[key])),
  )}.</p>
<p>Drawn from these, ${listed([
    html`equidistribution from every start that is not rational: ${verdict(found.equidistribution)}`,
    html`the central limit theorem: ${verdict(found.centralLimit)}`,
  ])}.</p>
`;
}

function block(found: ConditionsResult, name: string, key: (typeof ROWS)[number][1]): Html {
  const v = found[key];
  const shown = evidence(v.evidence);
  return html`<h3>${name}: ${verdict(v)}</h3>
<p>${prose(v.reason)}</p>
${shown !== undefined && html`<details open><summary>Evidence</summary>${shown}</details>\n`}`;
}

export function conditionsSection(dossier: Dossier): Html {
  const found = dossier.conditions;
  return html`<section id="conditions"><h2>Do the conditions hold?</h2>
${missing(found)}${isAnswered(found) && ROWS.map(([name, key]) => block(found, name, key))}
<p class="note">Decided in exact integer arithmetic; “undecided” means that neither a proof nor a counterexample was found with the means named above, not that the condition is doubtful.</p>
</section>
`;
}
