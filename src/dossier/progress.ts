/** One bar for all questions: each gets a share of it, about as large as its share of the time. */
import type { Session } from "../session.js";

const SHARES = {
  conditions: 10,
  growth: 200,
  start: 90,
  averages: 500,
  law: 100,
  orbits: 80,
  trajectory: 20,
} as const;

export type Question = keyof typeof SHARES;

const TOTAL = Object.values(SHARES).reduce((a, b) => a + b, 0);

/**
 * Sessions for the questions in turn: all share pool, seed and signal; each reports into its
 * own share of [0, 1000], cut further where a question is asked several times.
 */
export function questionSession(session: Session, question: Question, part = 0, parts = 1): Session {
  let before = 0;
  for (const [name, share] of Object.entries(SHARES)) {
    if (name === question) break;
    before += share;
  }
  const share = SHARES[question] / parts;
  const from = before + part * share;
  let reached = 0;
  return {
    ...session,
    progress: (stage, done, total) => {
      // A question may start several counts of its own; the common bar never goes back.
      reached = Math.max(reached, total > 0 ? Math.min(1, done / total) : 0);
      const text = stage.startsWith(question) ? stage : `${question}: ${stage}`;
      session.progress(text, Math.round((1000 * (from + share * reached)) / TOTAL), 1000);
    },
  };
}
