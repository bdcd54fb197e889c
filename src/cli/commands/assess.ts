import { join } from "node:path";
import { assess } from "../../dossier/assess.js";
import { AssessStopped } from "../../dossier/attempt.js";
import { renderDossier } from "../../dossier/page.js";
import type { Dossier } from "../../dossier/result.js";
import type { Question } from "../command.js";
import { prepareDirectory, writeFiles } from "../files.js";
import { jsonText } from "../json.js";
import { page } from "../render.js";
import { summary } from "../summary.js";
import { anyText } from "../values.js";

const DIRECTORY = "dossier";

async function finished(work: () => Promise<Dossier>): Promise<{ dossier: Dossier; stopped: string | undefined }> {
  try {
    return { dossier: await work(), stopped: undefined };
  } catch (error) {
    if (error instanceof AssessStopped) return { dossier: error.dossier, stopped: error.message };
    throw error;
  }
}

/** The questions that a stated limit ended, with its message. */
function limited(dossier: Dossier): string | undefined {
  const names = ["conditions", "growth", "start", "averages", "law", "orbits", "trajectory", "precision"] as const;
  const ends = names.flatMap((name) => {
    const answer = dossier[name];
    return "stopped" in answer ? [`${name}: ${answer.stopped}`] : [];
  });
  if (ends.length === 0) return undefined;
  return `stopped by a limit: ${ends.join("; ")}. To go on: a lower --effort, or a higher --memory`;
}

/** The warnings of all answers, each once. */
function warningsOf(dossier: Dossier): string[] {
  const all = Object.entries(dossier).flatMap(([name, answer]: [string, { warnings?: readonly string[] } | string]) =>
    typeof answer === "string" ? [] : (answer.warnings ?? []).map((w) => `${name}: ${w}`),
  );
  return [...new Set(all)];
}

export const assessQuestion: Question<{ out?: string }> = {
  name: "assess",
  summary: "all questions that apply, with a dossier written: one page to read, one file of numbers",
  examples: ["torwend assess examples/tray.json --out dossier", "torwend assess examples/tray.json --effort quick"],
  options: [
    { flags: "--out <dir>", text: "where to write dossier.html and dossier.json (default: dossier)", read: anyText },
  ],
  prepare: ({ out = DIRECTORY }) => prepareDirectory(out),
  ask: async ({ walk, values, common }) => {
    const { out = DIRECTORY } = values;
    const { dossier, stopped } = await finished(() => assess(walk, common));
    await writeFiles(out, { "dossier.html": await renderDossier(dossier), "dossier.json": jsonText(dossier) });
    const where = `Written: ${join(out, "dossier.html")} (to read), ${join(out, "dossier.json")} (all numbers).`;
    return {
      result: dossier,
      text: page(dossier.walk, [...summary(dossier), where]),
      warnings: warningsOf(dossier),
      stopped: stopped ?? limited(dossier),
    };
  },
};
