/** The law of x_n: how fast it forgets the start. */
import type { DistanceToUniform, LawResult } from "../../law/result.js";
import { decimalDown, decimalUp } from "../../quantity/decimal.js";
import { quantityNumber } from "../../quantity/quantity.js";
import { type Html, html } from "../html.js";
import { significant } from "../numbers.js";
import { lawPlot, moduli } from "../plots/law.js";
import { type Dossier, isAnswered } from "../result.js";
import { missing, plural, quantity, quantityColumn, table, warning } from "./parts.js";
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

function decayTable(laws: readonly LawResult[]): Html | undefined {
  const fitted = laws.flatMap((l) => (l.decay === undefined ? [] : [{ law: l, decay: l.decay }]));
  if (fitted.length === 0) return undefined;
  const rates = quantityColumn(
    "rate",
    fitted.map(({ decay }) => decay.rate),
  );
  return table(
    html`Decay of each coefficient, natural logarithm per move: least squares of the logarithm over the second half of the moves.`,
    [{ name: html`<i>k</i>` }, rates.column, { name: "moves", n: true }, { name: "scatter about the line", n: true }],
    fitted.map(
      ({ law, decay }) =>
        html`<th scope="row">${name(law)}</th>${rates.show(decay.rate)}<td class="n">${decay.from} to ${decay.to}</td><td class="n">${significant(decay.residual, 2)}</td>`,
    ),
  );
}

/** At most this many rows: the first moves, then evenly, and the last. */
const DISTANCES = 10;

function distanceTable({ cutoff, frequencies, steps }: DistanceToUniform): Html {
  const every = Math.max(1, Math.ceil((steps.length - 1) / (DISTANCES - 1)));
  const rows = steps.filter(({ step }, i) => step % every === 0 || i === steps.length - 1);
  return table(
    html`Distance of the law to uniform. Largest: of |E exp(2π<i>i</i> <i>k</i>·<i>x<sub>n</sub></i>)| over the ${frequencies} frequencies (up to sign) with every |<i>k<sub>j</sub></i>| ≤ ${cutoff}. Wasserstein-1: what it costs, in distance on the torus, to move the law to the uniform one; at least and at most, both proved (the upper bound by the smoothing inequality of Bobkov and Ledoux, whose first term does not shrink with <i>n</i>).`,
    [
      { name: "moves", n: true },
      { name: "largest", n: true },
      { name: html`at <i>k</i>` },
      { name: "Wasserstein-1 at least", n: true },
      { name: "at most", n: true },
    ],
    rows.map(({ step, largest, frequency, wasserstein: w }) => {
      const [low, high] = [w.low ?? w.value, w.high ?? w.value].map(Number) as [number, number];
      const k = `(${frequency.map((x) => String(x).replace("-", "−")).join(", ")})`;
      return html`<th scope="row" class="n">${step}</th><td class="n">${significant(quantityNumber(largest), 4)}</td><td>${k}</td><td class="n">${significant(Number(decimalDown(low, 3)), 3)}</td><td class="n">${significant(Number(decimalUp(high, 3)), 3)}</td>`;
    }),
  );
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
${decayTable(laws)}
${
  law.normBound !== undefined &&
  html`<p>Guaranteed: a rate of ${quantity(law.normBound.rate)} per move, from the proved norm of the averaging operator on functions of mean 0. ${prose(law.normBound.reading)}</p>
`
}
${law.distance !== undefined && distanceTable(law.distance)}
${laws.map((l) => l.stoppedAt !== undefined && warning(html`At <i>k</i> = ${name(l)} the computation ended after move ${l.stoppedAt.step}: ${prose(l.stoppedAt.reason)}`))}
${law.others.map((o) => missing(o))}
${first !== undefined && html`<p class="note">${STANDINGS[first.real.standing]}: ${prose(first.real.method)}.${ends.length > 0 && html` The computation ended: ${ends.map((e, i) => html`${i > 0 && "; "}${prose(e)}`)}.`}</p>`}
<p class="note">A small coefficient at a few frequencies says that the law is near uniform as far as these waves see. It is no statement about secrecy: such a walk is no encryption, and mixing is not security.</p>
</section>
`;
}
