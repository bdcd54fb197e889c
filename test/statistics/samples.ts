/** Independent standard normal and uniform samples, from Philox through the inverse distribution function. */
import { drawStartWords } from "../../src/kernel/draws.js";
import { loadKernel } from "../../src/kernel/kernel.js";
import { normalQuantile } from "../../src/statistics/distributions.js";

const kernel = loadKernel();

/** Uniform on (0, 1); sample number `which` of a test is independent of the others. */
export async function uniforms(seed: bigint, which: number, count: number): Promise<number[]> {
  const words = drawStartWords(await kernel, seed, which, 0, count);
  return Array.from(words, (w) => (Number(w >> 11n) + 0.5) / 2 ** 53);
}

export async function normals(seed: bigint, which: number, count: number): Promise<number[]> {
  return (await uniforms(seed, which, count)).map(normalQuantile);
}
