/** Finite orbits: sizes, representatives, second eigenvalues. */
import type { OrbitsResult } from "../../orbits/result.js";
import { quantityNumber } from "../../quantity/quantity.js";
import { type Html, html } from "../html.js";
import { brief, shown, significant } from "../numbers.js";
import { orbitsPlot } from "../plots/orbits.js";
import { type Dossier, isAnswered } from "../result.js";
import { missing, number, quantityColumn, standing, table, warning } from "./parts.js";

const MOST_ROWS = 40;

function answered(dossier: Dossier): OrbitsResult[] {
  const orbits = dossier.orbits;
  if (!isAnswered(orbits)) return [];
  const all = [orbits, ...orbits.others.filter((o): o is OrbitsResult => isAnswered(o))];
  return all.sort((a, b) => a.modulus - b.modulus);
}

export function orbitsSummary(dossier: Dossier): Html {
  const all = answered(dossier);
  if (all.length === 0) return missing(dossier.orbits) as Html;
  const kinds = all.flatMap((r) => r.orbits.filter((o) => o.size > 1).map((o) => ({ modulus: r.modulus, o })));
  const moduli = `${all[0]?.modulus}${all.length > 1 ? ` to ${all[all.length - 1]?.modulus}` : ""}`;
  const known = kinds.filter((k) => Number.isFinite(quantityNumber(k.o.secondEigenvalue)));
  if (known.length === 0) return html`<p>Among the denominators ${moduli}, no orbit has more than one point.</p>`;
  const worst = known.reduce((a, b) =>
    quantityNumber(b.o.secondEigenvalue) > quantityNumber(a.o.secondEigenvalue) ? b : a,
  );
  const second = worst.o.secondEigenvalue;
  return html`<p>Among the denominators ${moduli}, the slowest orbit is one of ${brief(worst.o.size)} points with denominator ${worst.modulus}: second eigenvalue <span class="value">${shown(second).value}</span> ${standing(second)}.${worst.o.period > 1 && ` The walk on that orbit has period ${worst.o.period}: it goes round and does not mix.`}</p>
`;
}

export function orbitsSection(dossier: Dossier): Html {
  const orbits = dossier.orbits;
  if (!isAnswered(orbits))
    return html`<section id="orbits"><h2>How do finite orbits mix?</h2>
${missing(orbits)}</section>
`;
  const all = answered(dossier);
  const rows = all.flatMap((r) => r.orbits.filter((o) => o.size > 1).map((o) => ({ modulus: r.modulus, o })));
  const second = quantityColumn(
    "second eigenvalue",
    rows.map((r) => r.o.secondEigenvalue),
  );
  return html`<section id="orbits"><h2>How do finite orbits mix?</h2>
${orbitsPlot(all)}
${table(
  html`Kinds of orbits of the points with denominator <i>q</i>${rows.length > MOST_ROWS ? `; the first ${MOST_ROWS} of ${rows.length}, all are in dossier.json` : ""}. Orbits of a single point are left out. Residual |<i>P f</i> − μ <i>f</i>| of the eigenvalue μ found, |<i>f</i>| = 1: where the average is symmetric, some eigenvalue lies within it of μ; no more is proved.`,
  [
    { name: html`<i>q</i>`, n: true },
    { name: "size", n: true },
    { name: "orbits", n: true },
    { name: "one point" },
    second.column,
    { name: "gap", n: true },
    { name: "residual", n: true },
  ],
  rows
    .slice(0, MOST_ROWS)
    .map(
      ({ modulus, o }) =>
        html`${number(modulus)}${number(o.size)}${number(o.count)}<td>(${o.representative.map((n) => brief(n)).join(", ")})/${modulus}</td>${second.show(o.secondEigenvalue)}<td class="n">${shown(o.gap).value}</td><td class="n">${o.residual === undefined ? "–" : significant(o.residual, 2)}</td>`,
    ),
)}
${orbits.others.map((o) => missing(o))}
${[...new Set(all.flatMap((r) => r.warnings))].map((w) => warning(w))}
</section>
`;
}
