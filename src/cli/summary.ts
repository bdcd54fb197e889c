/** The findings of a dossier in the order in which a person asks, as blocks of text. */
import { type Answer, type Dossier, isAnswered } from "../dossier/result.js";
import { type Quantity, quantityNumber } from "../quantity/quantity.js";
import { block, cells, number, paragraph, table } from "./render.js";

type Row = readonly [string, string, string, string];

const row = (what: string, q: Quantity, whole = false): Row => [what, ...cells(q, whole)];

/** A section of an answer, or why there is none. */
function section<T extends object>(heading: string, answer: Answer<T>, body: (answer: T) => string): string {
  if (isAnswered(answer)) return block(heading, body(answer));
  const why = "stopped" in answer ? `stopped: ${answer.stopped}` : `does not apply: ${answer.skipped}`;
  return block(heading, paragraph(why));
}

const findings = (rows: readonly Row[]) => table(["", "value", "interval", "standing"], rows);

type Averages = Extract<Dossier["averages"], { observables: unknown }>;

function averagesText({ observables, gap }: Averages): string {
  const shrinking =
    gap === undefined
      ? []
      : [
          block(
            "  all functions of mean 0",
            findings([row("norm of a move's average", gap.norm), row("spectral radius", gap.spectralRadius)]),
          ),
        ];
  const blocks = observables.map((o) => {
    const last = o.stepsFor.at(-1);
    return block(
      `  ${o.label}`,
      findings([
        row("limit of the time average", o.mean),
        row("variance (limit of n Var)", o.variance),
        ...(o.bracket === undefined ? [] : [row("variance, proved bounds", o.bracket)]),
        row("sampled mean", o.sampled.mean),
        ...(last === undefined ? [] : [row(`moves for an error bar of ${number(last.halfWidth)}`, last.steps, true)]),
      ]),
    );
  });
  return [...blocks, ...shrinking].join("\n");
}

/** The kinds of orbits that mix slowest, over all moduli asked for. */
function orbitRows(answer: Extract<Dossier["orbits"], { orbits: unknown }>): string[][] {
  const all = [answer, ...answer.others.flatMap((o) => (isAnswered(o) ? [o] : []))];
  return all.flatMap((r) => {
    const mixing = r.orbits.filter((o) => o.size > 1);
    const slowest = mixing.sort((a, b) => quantityNumber(b.secondEigenvalue) - quantityNumber(a.secondEigenvalue))[0];
    if (slowest === undefined) return [];
    const [value, , standing] = cells(slowest.secondEigenvalue);
    const orbits = r.orbits.reduce((s, o) => s + o.count, 0);
    return [[String(r.modulus), String(orbits), String(r.orbits[0]?.size), value, standing]];
  });
}

export function summary(dossier: Dossier): string[] {
  return [
    section("Do the conditions of the limit theorems hold?", dossier.conditions, (c) =>
      table(
        ["", "verdict"],
        [
          ["strongly irreducible", c.stronglyIrreducible.verdict],
          ["proximal", c.proximal.verdict],
          ["exponential moment", c.exponentialMoment.verdict],
          ["equidistribution", c.equidistribution.verdict],
          ["central limit theorem", c.centralLimit.verdict],
        ],
      ),
    ),
    section("How fast do products grow? (natural logarithm per move)", dossier.growth, (g) =>
      findings([
        ...g.exponents.map((q, i) => row(`lambda_${i + 1}`, q)),
        row("variance of the log norm per move", g.logNormVariance),
      ]),
    ),
    section("How long is double precision right?", dossier.precision, (p) =>
      findings([
        row("moves until no digit of a double is right", p.movesOfDouble),
        row("moves for which a decimal digit lasts", p.movesPerDigit),
      ]),
    ),
    section("Is this start safe?", dossier.start, (s) => {
      const worst = s.traps[0];
      const trap =
        worst && findings([row(`moves held by the worst trap, denominator ${worst.denominator}`, worst.hold, true)]);
      return [paragraph(`${s.verdict.verdict} (start: ${s.kind}). ${s.verdict.reason}`), trap]
        .filter(Boolean)
        .join("\n");
    }),
    section("What do time averages converge to, and how fast?", dossier.averages, averagesText),
    section("How fast does the law forget the start?", dossier.law, (l) => {
      const rows = l.coefficients.filter((_, i) => i === 0 || i === l.coefficients.length - 1);
      return table(
        [`move, k = (${l.frequency.join(", ")})`, "real part", "imaginary part", "standing"],
        rows.map((c) => [String(c.step), cells(c.real)[0], cells(c.imag)[0], cells(c.real)[2]]),
      );
    }),
    section("How do finite orbits mix?", dossier.orbits, (o) =>
      table(["denominator", "orbits", "largest", "largest second eigenvalue", "standing"], orbitRows(o)),
    ),
  ];
}
