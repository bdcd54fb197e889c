/**
 * One comparison: several ways to the same answer, checked to agree, then timed in one
 * run. A suite file exports `suite(): Promise<Comparison[]>`; `npm run bench` runs them all.
 */
import { Bench } from "tinybench";

export interface Contender<T> {
  readonly label: string;
  /** The work; its answer is compared with the first contender's before anything is timed. */
  readonly run: () => T;
}

export interface Comparison {
  readonly name: string;
  /** Median milliseconds of each contender, the first being the one that is judged. */
  readonly rows: readonly { readonly label: string; readonly milliseconds: number; readonly ratio: number }[];
}

/** Rows of ways whose times were taken elsewhere, each with its answer: they must agree. */
export function comparison(
  name: string,
  rows: readonly { readonly label: string; readonly milliseconds: number; readonly answer?: unknown }[],
): Comparison {
  const [first] = rows;
  for (const row of rows) {
    if (row.answer !== undefined && row.answer !== first?.answer) {
      throw new Error(`${name}: ${row.label} gives another answer`);
    }
  }
  return {
    name,
    rows: rows.map(({ label, milliseconds }) => ({
      label,
      milliseconds,
      ratio: milliseconds / (first?.milliseconds as number),
    })),
  };
}

/** Median milliseconds of some runs, after one that warms up. */
export async function medianTime(runs: number, run: () => unknown): Promise<number> {
  await run();
  const times: number[] = [];
  for (let i = 0; i < runs; i++) {
    const start = performance.now();
    await run();
    times.push(performance.now() - start);
  }
  return times.sort((a, b) => a - b)[runs >> 1] as number;
}

/**
 * @param same whether two answers agree; a disagreement throws before timing.
 * @param time milliseconds to spend on each contender at least.
 */
export async function compare<T>(
  name: string,
  contenders: readonly Contender<T>[],
  same: (a: T, b: T) => boolean,
  time = 400,
): Promise<Comparison> {
  const answers = contenders.map((c) => c.run());
  for (const [i, answer] of answers.entries()) {
    if (!same(answers[0] as T, answer)) throw new Error(`${name}: ${contenders[i]?.label} gives another answer`);
  }
  const bench = new Bench({ time, iterations: 3, warmupTime: time / 4, warmupIterations: 1 });
  for (const c of contenders) bench.add(c.label, () => void c.run());
  await bench.run();
  const medians = bench.tasks.map((task) => {
    const result = task.result;
    if (!("latency" in result)) throw new Error(`${name}: ${task.name} did not run`);
    return result.latency.p50;
  });
  return {
    name,
    rows: medians.map((milliseconds, i) => ({
      label: contenders[i]?.label ?? "",
      milliseconds,
      ratio: milliseconds / (medians[0] as number),
    })),
  };
}
