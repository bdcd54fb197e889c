/** The finite orbits of the points with denominator q, and how fast the walk mixes on each. */
import { Rational } from "../exact/rational.js";
import { FinitePoints } from "../kernel/finite.js";
import { loadKernel } from "../kernel/kernel.js";
import { estimatedQuantity, exactQuantity, type Quantity } from "../quantity/quantity.js";
import { type CommonOptions, type Effort, type Session, type SharedSession, withSession } from "../session.js";
import { VERSION } from "../version.js";
import { asWalk, type WalkInput } from "../walk/parse.js";
import { secondJob } from "./jobs.js";
import { type Kind, periodOf, sortOrbits } from "./kinds.js";
import { checkModulus, closedUnderInverse, residueMaps } from "./maps.js";
import type { OrbitKind, OrbitsResult } from "./result.js";
import type { Second } from "./second.js";

export interface OrbitsOptions extends CommonOptions {
  /** q: the points are x in (1/q) Z^d mod 1, of exact denominator q or a divisor of q. */
  readonly modulus: number;
}

/** Products with the averaged operator on one orbit, and images looked up in them. */
const SPEND: Readonly<
  Record<Effort, { readonly products: number; readonly images: number; readonly tolerance: number }>
> = {
  quick: { products: 300, images: 3e8, tolerance: 1e-6 },
  standard: { products: 1000, images: 3e9, tolerance: 1e-8 },
  thorough: { products: 10_000, images: 1e11, tolerance: 1e-11 },
};
/** Points of small orbits that share a job. */
const JOB_POINTS = 300;

/** The modulus where it is known without eigenvalues. */
function known(kind: Kind, period: number, probabilities: readonly Rational[]): Quantity | undefined {
  if (kind.size === 1) return exactQuantity(0n, "one point: no function of mean zero but 0");
  if (period > 1) return exactQuantity(1n, `the walk on the orbit has period ${period}`);
  if (kind.size === 2) {
    // On one dimension the average is a number: the trace less the constant's 1.
    let trace = Rational.of(-1);
    for (let i = 0; i < kind.table.length; i++) {
      const m = probabilities.length;
      if (kind.table[i] === Math.floor(i / m)) trace = trace.add(probabilities[i % m] as Rational);
    }
    return exactQuantity(trace.abs(), "trace on two points");
  }
  return undefined;
}

function complement(x: Quantity): Quantity {
  if (x.standing === "exact") {
    const value = typeof x.value === "number" ? Rational.of(x.value) : fromText(x.value);
    return exactQuantity(Rational.ONE.sub(value), x.method);
  }
  return estimatedQuantity(1 - (x.value as number), x.method);
}

function fromText(text: string): Rational {
  const [num, den = "1"] = text.split("/");
  return Rational.of(BigInt(num as string), BigInt(den));
}

async function seconds(
  kinds: readonly Kind[],
  weights: readonly number[],
  symmetric: boolean,
  session: Session,
): Promise<Second[]> {
  const { products, images, tolerance } = SPEND[session.effort];
  const payloads: {
    kinds: { size: number; request: Parameters<typeof secondJob.run>[0]["kinds"][number] }[];
    points: number;
  }[] = [];
  for (const { table, size } of kinds) {
    const most = Math.max(50, Math.min(products, Math.floor(images / table.length)));
    const request = { table, weights, symmetric, seed: session.seed, tolerance, most };
    const last = payloads.at(-1);
    if (last !== undefined && last.points + size <= JOB_POINTS) {
      last.kinds.push({ size, request });
      last.points += size;
    } else payloads.push({ kinds: [{ size, request }], points: size });
  }
  const results = await session.pool.map(
    secondJob,
    payloads.map((p) => ({ kinds: p.kinds.map((k) => k.request), memoryLimit: session.memoryLimit })),
    { signal: session.signal, onDone: (done) => session.progress("second eigenvalues", done, payloads.length) },
  );
  return results.flat();
}

/**
 * All orbits of (Z/q)^d under the moves, one row a kind of orbit, largest size first. Sizes,
 * counts and periods are exact. The second eigenvalue is exact where it is 1 (period above
 * 1), for one point (0) and for two; else estimated, with its residual: see `OrbitKind`.
 *
 * Time grows with q^d times the number of moves, and with the products that the effort
 * allows; an average that is not symmetric may leave a residual that does not become small.
 * @throws OptionsError where the modulus is no whole number from 1 up, or some translation's denominator does not divide it
 * @throws LimitError where q^d points do not fit in the memory limit
 */
export async function orbits(input: WalkInput, options: OrbitsOptions & SharedSession): Promise<OrbitsResult> {
  return withSession(options, async (session) => {
    const walk = asWalk(input);
    const q = checkModulus(walk, options.modulus);
    const maps = residueMaps(walk, q);
    const probabilities = walk.moves.map((m) => m.probability);
    const symmetric = closedUnderInverse(maps, probabilities, q);
    const kernel = await loadKernel({ memoryLimit: session.memoryLimit });
    const points = new FinitePoints(kernel, walk.dimension, q, maps);
    const { kinds, complete } = sortOrbits(points, session, maps.length);
    const periods = kinds.map((kind) => periodOf(kind.table, maps.length));
    const given = kinds.map((kind, i) => known(kind, periods[i] as number, probabilities));
    const weights = probabilities.map((p) => p.toNumber());
    const open = kinds.filter((_, i) => given[i] === undefined);
    const found = await seconds(open, weights, symmetric, session);
    let next = 0;
    const rows = kinds.map((kind, i): OrbitKind => {
      const second = given[i] === undefined ? (found[next++] as Second) : undefined;
      const value = given[i] ?? estimatedQuantity((second as Second).modulus, (second as Second).method);
      return {
        size: kind.size,
        count: kind.count,
        representative: points.coordinates(kind.representative),
        denominators: [...kind.denominators].sort((a, b) => a - b),
        period: periods[i] as number,
        secondEigenvalue: value,
        gap: complement(value),
        ...(second === undefined ? {} : { eigenvalue: { re: second.re, im: second.im }, residual: second.residual }),
      };
    });
    const warnings: string[] = [];
    if (!complete) warnings.push("the search for orbits of one kind was cut short: some rows may be of the same kind");
    const loose = found.filter((f) => f.method.includes("not converged")).length;
    if (loose > 0) {
      warnings.push(
        `${loose} second eigenvalues did not converge: their residuals say how far; a higher effort goes on longer`,
      );
    }
    return { torwend: VERSION, walk: walk.title, modulus: q, points: points.points, symmetric, orbits: rows, warnings };
  });
}
