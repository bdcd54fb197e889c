/** The summary: the questions in the order in which one asks them, each with its answer and how far it can be relied on. */
import { type Html, html, type Piece } from "../html.js";
import type { Dossier } from "../result.js";
import { averagesSummary } from "./averages.js";
import { conditionsSummary } from "./conditions.js";
import { growthSummary } from "./growth.js";
import { lawSummary } from "./law.js";
import { orbitsSummary } from "./orbits.js";
import { precisionSummary } from "./precision.js";
import { startSummary } from "./start.js";

function row(question: string, target: string, answer: Piece): Html {
  return html`<div><dt><a href="#${target}">${question}</a></dt><dd>${answer}</dd></div>
`;
}

export function summarySection(dossier: Dossier): Html {
  return html`<section id="summary"><dl class="answers">
${row("Do the conditions hold?", "conditions", conditionsSummary(dossier))}
${row("How fast do products grow?", "growth", growthSummary(dossier))}
${row("Is the start safe?", "start", startSummary(dossier))}
${row("What do time averages converge to, and how soon?", "averages", averagesSummary(dossier))}
${row("How fast is the start forgotten?", "law", lawSummary(dossier))}
${row("How do finite orbits mix?", "orbits", orbitsSummary(dossier))}
${row("How far can double precision be trusted?", "positions", precisionSummary(dossier))}
</dl>
<p class="note">Standing of each number. <b>Exact</b>: the value itself, proved. <b>Proved to lie in</b> an interval: by arithmetic that accounts for every rounding. <b>Estimated</b>: statistical or not proved; an interval, where given, is a confidence interval at its level. Values are shown to the digits that their intervals support, intervals rounded outward.</p>
<p class="note">This is a study of a mathematical walk. Such a walk is no encryption, and mixing is not security.</p>
</section>
`;
}
