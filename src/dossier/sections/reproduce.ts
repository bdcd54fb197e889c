/** How to get the same numbers again. */
import { type Html, html } from "../html.js";
import { percent } from "../numbers.js";
import type { Dossier } from "../result.js";

export function reproduceSection(dossier: Dossier): Html {
  const level = dossier.level === 0.95 ? "" : ` --level ${dossier.level}`;
  return html`<section id="reproduce"><h2>Reproduce</h2>
<p>Save the walk file below as walk.json; torwend ${dossier.torwend} then gives the same dossier.json, byte for byte, for any number of workers:</p>
<pre>torwend assess walk.json --seed ${dossier.seed} --effort ${dossier.effort}${level}</pre>
<p class="note">All randomness comes from the seed through a counter-based generator (Philox4x32-10, Salmon, Moraes, Dror and Shaw 2011): the draw for a walk's move depends on the seed, the walk's number and the move's, and on nothing else. Intervals are at ${percent(dossier.level)} unless they say otherwise.</p>
<details><summary>The walk file</summary><pre class="evidence">${JSON.stringify(dossier.document, null, 1)}</pre></details>
</section>
`;
}
