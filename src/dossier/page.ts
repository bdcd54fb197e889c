/** The report on demand: what draws it is large, and most programs never ask. */
import type { Dossier } from "./result.js";

/** The report of an assessment: one HTML file with everything in it, for a browser and for paper. */
export async function renderDossier(dossier: Dossier): Promise<string> {
  const { renderDossier: render } = await import("./render.js");
  return render(dossier);
}
