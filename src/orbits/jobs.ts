/** The numerical work of `orbits`: one job a kind of orbit. */
import { defineJob } from "../kernel/jobs.js";
import { loadKernel } from "../kernel/kernel.js";
import { type Second, type SecondRequest, secondEigenvalue } from "./second.js";

export interface SecondPayload {
  readonly kinds: readonly SecondRequest[];
  readonly memoryLimit: number;
}

export const secondJob = defineJob("orbits.second", async (payload: SecondPayload): Promise<Second[]> => {
  const kernel = await loadKernel({ memoryLimit: payload.memoryLimit });
  return payload.kinds.map((kind) => secondEigenvalue(kernel, kind));
});
