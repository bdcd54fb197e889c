/** The report: one HTML file with everything in it, for a browser and for paper. */
import { parseWalk } from "../walk/parse.js";
import { html, trusted } from "./html.js";
import type { Dossier } from "./result.js";
import { averagesSection } from "./sections/averages.js";
import { conditionsSection } from "./sections/conditions.js";
import { growthSection } from "./sections/growth.js";
import { lawSection } from "./sections/law.js";
import { orbitsSection } from "./sections/orbits.js";
import { plural } from "./sections/parts.js";
import { precisionSection } from "./sections/precision.js";
import { reproduceSection } from "./sections/reproduce.js";
import { startSection } from "./sections/start.js";
import { summarySection } from "./sections/summary.js";
import { walkSection } from "./sections/walk.js";
import { STYLE } from "./style.js";

const CONTENTS = [
  ["walk", "The walk"],
  ["conditions", "Conditions"],
  ["growth", "Growth"],
  ["start", "Start"],
  ["averages", "Time averages"],
  ["law", "Law"],
  ["orbits", "Finite orbits"],
  ["positions", "Positions"],
  ["reproduce", "Reproduce"],
] as const;

/**
 * The dossier as one self-contained HTML document: no scripts, nothing fetched, plots as SVG
 * inside. All text of the walk file is escaped.
 * In a browser call it on a page (plots are drawn in the page's document), not in a worker.
 * @throws WalkError where `dossier.document` is not a walk.
 */
export function renderDossier(dossier: Dossier): string {
  const walk = parseWalk(dossier.document);
  const title = dossier.walk;
  return html`<!DOCTYPE html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="generator" content="torwend ${dossier.torwend}">
<meta name="color-scheme" content="light dark">
<title>${title}: dossier of a random walk on the torus</title>
<style>${trusted(STYLE)}</style>
</head>
<body>
<header class="title">
<p class="kicker">Random walk on the torus</p>
<h1>${title}</h1>
<p class="facts">Dimension ${walk.dimension} · ${plural(walk.moves.length, "move")} · seed ${dossier.seed} · effort ${dossier.effort} · torwend ${dossier.torwend}</p>
<nav aria-label="Contents">${CONTENTS.map(([id, name]) => html`<a href="#${id}">${name}</a> `)}</nav>
</header>
<main>
${summarySection(dossier)}
${walkSection(walk)}
${conditionsSection(dossier)}
${growthSection(dossier)}
${startSection(dossier, walk.dimension)}
${averagesSection(dossier)}
${lawSection(dossier)}
${orbitsSection(dossier)}
${precisionSection(dossier, walk.dimension)}
${reproduceSection(dossier)}
</main>
</body>
</html>
`.markup;
}
