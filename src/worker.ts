/** The worker's entry: every module that defines jobs is imported here, and only here. */

import "./averages/jobs.js";
import "./orbits/jobs.js";
import { listen } from "#worker-port";
import "./averages/correlation-jobs.js";
import "./averages/modular-jobs.js";
import "./averages/poisson-jobs.js";
import "./growth/jobs.js";
import "./growth/positive/jobs.js";
import "./law/jobs.js";
import "./law/spread-jobs.js";
import "./start/jobs.js";
import { findJob } from "./kernel/jobs.js";
import type { JobReply, JobRequest } from "./kernel/pool.js";

async function answer(request: JobRequest): Promise<JobReply> {
  try {
    const job = findJob(request.name);
    if (job === undefined) throw new Error(`no job is called ${request.name}`);
    return { id: request.id, result: await job.run(request.payload as never) };
  } catch (error) {
    const { name, message, stack } = error instanceof Error ? error : new Error(String(error));
    return { id: request.id, error: { name, message, ...(stack === undefined ? {} : { stack }) } };
  }
}

/** The buffers of a result's own typed arrays, one level deep: they move instead of being copied. */
function buffersOf(result: unknown): ArrayBuffer[] {
  if (typeof result !== "object" || result === null) return [];
  const values = [result, ...Object.values(result)];
  const buffers = values.filter(ArrayBuffer.isView).map((view) => view.buffer as ArrayBuffer);
  return [...new Set(buffers)];
}

listen(async (request, reply) => {
  const answered = await answer(request as JobRequest);
  reply(answered, "result" in answered ? buffersOf(answered.result) : []);
});
