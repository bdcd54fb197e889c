/** The top exponent in dimension 2, whatever the moves: enclosed by the modular route. */
import type { Matrix2 } from "../modular/words.js";
import { enclosedQuantity, type Quantity } from "../quantity/quantity.js";
import type { Effort, Session } from "../session.js";
import type { Walk } from "../walk/walk.js";
import { exponentJob } from "./jobs.js";

/** Work by effort: see encloseExponent. */
const WORK: Readonly<Record<Effort, number>> = { quick: 2e9, standard: 2e10, thorough: 1e11 };

/** @returns undefined in other dimensions, and where words are too long for the effort */
export async function enclosePlanar(walk: Walk, session: Session): Promise<Quantity | undefined> {
  if (walk.dimension !== 2) return undefined;
  const stage = "words of the modular group";
  session.progress(stage, 0, 1);
  const payload = {
    matrices: walk.moves.map((m) => m.matrix.flat() as unknown as Matrix2),
    probabilities: walk.moves.map(({ probability: { num, den } }) => ({ num, den })),
    work: WORK[session.effort],
  };
  const [found] = await session.pool.map(exponentJob, [payload], { signal: session.signal });
  session.progress(stage, 1, 1);
  return (
    found &&
    enclosedQuantity(found.low, found.high, "modular route: Poisson equation along continued fractions, certified")
  );
}
