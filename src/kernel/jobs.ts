/**
 * Jobs: pure functions of a cloneable payload that a pool may run on any thread.
 * A question cuts its work into jobs by a rule that knows nothing of the number of
 * workers, and merges results in the jobs' order; so the result is the same for any
 * number of workers. Keep one job under about half a second: a stop is noticed between jobs.
 *
 * To add one: `export const fooJob = defineJob("question.foo", async (payload: Foo) => ...)`
 * in the question's folder, and list its module in src/worker.ts (a test checks the list).
 */
export interface Job<Payload, Result> {
  readonly name: string;
  readonly run: (payload: Payload) => Result | Promise<Result>;
}

const registry = new Map<string, Job<never, unknown>>();

export function defineJob<Payload, Result>(
  name: string,
  run: (payload: Payload) => Result | Promise<Result>,
): Job<Payload, Result> {
  const job = { name, run };
  registry.set(name, job as Job<never, unknown>);
  return job;
}

/** The job of that name, among those whose modules this thread has loaded. */
export function findJob(name: string): Job<never, unknown> | undefined {
  return registry.get(name);
}
