/** The law of x_n: how fast it forgets the start. */
import type { LawResult } from "../../law/result.js";
import { type Html, html } from "../html.js";
import { significant } from "../numbers.js";
import { lawPlot, moduli } from "../plots/law.js";
import { type Dossier, isAnswered } from "../result.js";
import { missing, plural, table, warning } from "./parts.js";
import { prose } from "./prose.js";

const STANDINGS = {
  exact: "The coefficients are exact",
  enclosed: "Real and imaginary part of each coefficient are proved to lie in the intervals that dossier.json gives",
  estimated: "The coefficients are estimated",
} as const;

const LEVELS = [0.1, 0.01, 0.001] as const;

export function name(law: LawResult): string {
  return `(${law.frequency.map((k) => k.replace("-", "−")).join(", ")})`;
}

/** The first step from which all computed moduli are at most `level`; undefined where the last is not. */
function belowFrom(law: LawResult, level: number): number | undefined {
  let from: number | undefined;
  for (const { step, modulus } of moduli(law)) {
    if (modulus > level) from = undefined;
    else from ??= step;
  }
  return from;
}

function answered(dossier: Dossier): LawResult[] {
  const law = dossier.law;
  if (!isAnswered(law)) return [];
  return [law, ...law.others.filter((o): o is LawResult => isAnswered(o))];
}

export function lawSummary(dossier: Dossier): Html {
  const laws = answered(dossier);
  if (laws.length === 0) return missing(dossier.law) as Html;
  return html`${laws.map((law) => {
    const all = moduli(law);
    const last = all[all.length - 1];
    if (last === undefined) return undefined;
    const k = html`<i>k</i> = ${name(law)}`;
    if (all.every((m) => m.modulus === 0))
      return html`<p>At ${k}: nothing to forget, the coefficient is 0 at every move.</p>`;
    const level = [...LEVELS].reverse().find((l) => belowFrom(law, l) !== undefined);
    const told =
      level === undefined
        ? "not yet below 0.1"
        : html`below ${level} from move ${belowFrom(law, level)} on, as far as computed`;
    return html`<p>At ${k} the law's coefficient is <span class="value">${significant(last.modulus, 3)}</span> in modulus after ${plural(last.step, "move")}; ${told}.</p>\n`;
  })}`;
}

export function lawSection(dossier: Dossier): Html {
  const laws = answered(dossier);
  const law = dossier.law;
  if (!isAnswered(law))
    return html`<section id="law"><h2>How fast is the start forgotten?</h2>
${missing(law)}</section>
`;
  const ends = [
    ...new Set(
      laws
        .filter((l) => l.stoppedAt === undefined && l.reached?.reason !== "all steps asked for")
        .map((l) => l.reached?.reason),
    ),
  ].filter((r) => r !== undefined);
  const first = law.coefficients[law.coefficients.length - 1];
  return html`<section id="law"><h2>How fast is the start forgotten?</h2>
${lawPlot(laws)}
${table(
  html`Move from which |E exp(2π<i>i</i> <i>k</i>·<i>x<sub>n</sub></i>)| stays below a level, as far as computed.`,
  [
    { name: html`<i>k</i>` },
    { name: "moves computed", n: true },
    { name: "modulus at the last", n: true },
    ...LEVELS.map((l) => ({ name: `below ${l}`, n: true })),
  ],
  laws.map((l) => {
    const all = moduli(l);
    const last = all[all.length - 1];
    return html`<th scope="row">${name(l)}</th><td class="n">${last?.step ?? "–"}</td><td class="n">${last === undefined ? "–" : significant(last.modulus, 4)}</td>${LEVELS.map((level) => html`<td class="n">${belowFrom(l, level) ?? "–"}</td>`)}`;
  }),
)}
${laws.map((l) => l.stoppedAt !== undefined && warning(html`At <i>k</i> = ${name(l)} the computation ended after move ${l.stoppedAt.step}: ${prose(l.stoppedAt.reason)}`))}
${law.others.map((o) => missing(o))}
${first !== undefined && html`<p class="note">${STANDINGS[first.real.standing]}: ${prose(first.real.method)}.${ends.length > 0 && html` The computation ended: ${ends.map((e, i) => html`${i > 0 && "; "}${prose(e)}`)}.`}</p>`}
<p class="note">A small coefficient at a few frequencies says that the law is near uniform as far as these waves see. It is no statement about secrecy: such a walk is no encryption, and mixing is not security.</p>
</section>
`;
}
