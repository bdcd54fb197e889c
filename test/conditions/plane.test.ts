import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { conditionsOf } from "../../src/conditions/conditions.js";
import { inverse2, type Small, times, walkOf } from "./walks.js";

// biome-ignore format: matrices
const POOL: Small[] = [
  [[1, 1], [0, 1]], [[1, 0], [1, 1]], [[1, -2], [0, 1]], [[-1, 3], [0, -1]], [[0, -1], [1, 0]], [[0, -1], [1, 1]],
  [[0, 1], [1, 0]], [[1, 0], [0, -1]], [[-1, 0], [0, 1]], [[-1, 0], [0, -1]], [[1, 0], [0, 1]], [[2, 1], [1, 1]],
  [[5, 2], [2, 1]], [[0, 1], [1, 1]], [[1, 1], [1, 0]], [[0, 1], [-1, 0]], [[1, 3], [0, -1]], [[3, 1], [2, 1]],
  [[2, 3], [1, 2]], [[7, 12], [4, 7]], [[-1, 1], [-1, 0]], [[1, -1], [1, 0]], [[1, -1], [0, -1]], [[-2, -1], [3, 1]],
];

const trace = ([[p], [, s]]: Small) => p + s;
const det = ([[p, q], [r, s]]: Small) => p * s - q * r;
const same = (a: Small, b: Small) => a.every((row, i) => row.every((x, j) => x === b[i][j]));
const hyperbolic = (a: Small) => (det(a) === 1 ? Math.abs(trace(a)) > 2 : trace(a) !== 0);

/** Elements of the group by breadth, at most `most`. */
function group(generators: readonly Small[], most: number): { elements: Small[]; closed: boolean } {
  const letters = [...generators, ...generators.map(inverse2)];
  const elements: Small[] = [
    [
      [1, 0],
      [0, 1],
    ],
  ];
  const seen = new Set(elements.map(String));
  for (let i = 0; i < elements.length; i++) {
    for (const letter of letters) {
      const next = times(letter, elements[i]);
      if (seen.has(String(next))) continue;
      if (elements.length >= most) return { elements, closed: false };
      seen.add(String(next));
      elements.push(next);
    }
  }
  return { elements, closed: true };
}

/** By definition, as far as 300 elements show it. */
function brute(generators: readonly Small[]): "strong" | "lines" | "slow" | "finite" {
  const { elements, closed } = group(generators, 300);
  if (closed) return "finite";
  const h = elements.find(hyperbolic);
  if (h === undefined) return "slow";
  // a keeps or exchanges the eigenlines of h exactly if a h a^-1 has the same two.
  const keeps = (a: Small) => {
    const image = times(times(a, h), inverse2(a));
    return same(times(image, h), times(h, image));
  };
  return generators.every(keeps) ? "lines" : "strong";
}

const conjugate = (a: Small, c: Small) => times(times(c, a), inverse2(c));

interface WordEvidence {
  moves: number[];
  matrix: number[][];
  trace: number;
  determinant: number;
}

function checkWord(word: WordEvidence, generators: readonly Small[]): void {
  const product = word.moves.slice(1).reduce<Small>((m, i) => times(generators[i], m), generators[word.moves[0]]);
  expect(word.matrix).toEqual(product);
  expect(word.trace).toBe(trace(product));
  expect(word.determinant).toBe(det(product));
}

function check(generators: readonly Small[]): string {
  const { stronglyIrreducible, proximal, equidistribution } = conditionsOf(walkOf(generators));
  const kind = brute(generators);
  expect(stronglyIrreducible.verdict, JSON.stringify(generators)).toBe(kind === "strong" ? "holds" : "fails");
  expect(proximal.verdict, JSON.stringify(generators)).toBe(kind === "strong" || kind === "lines" ? "holds" : "fails");
  expect(equidistribution.verdict).toBe(kind === "strong" ? "holds" : "fails");
  // biome-ignore lint/suspicious/noExplicitAny: evidence is free-form
  const evidence = stronglyIrreducible.evidence as any;
  const q = (f: number[], x: number, y: number) => f[0] * x * x + f[1] * x * y + f[2] * y * y;
  if (kind === "strong") {
    checkWord(evidence.word, generators);
    const h = evidence.word.matrix as number[][];
    const a = generators[evidence.mover.move];
    expect(evidence.mover.matrix).toEqual(a);
    const [form, image] = [evidence.form.coefficients, evidence.image.coefficients];
    for (const [x, y] of [
      [1, 0],
      [0, 1],
      [1, 1],
      [2, -3],
    ]) {
      const [hx, hy] = [h[0][0] * x + h[0][1] * y, h[1][0] * x + h[1][1] * y];
      expect(q(form, x, y)).toBe(x * hy - y * hx);
      expect(q(image, x, y)).toBe(q(form, a[0][0] * x + a[0][1] * y, a[1][0] * x + a[1][1] * y));
    }
    expect(image).not.toEqual(form);
    expect(image).not.toEqual(form.map((c: number) => 0 - c));
  }
  if (kind === "lines") checkWord(evidence.word, generators);
  if (kind === "slow") {
    const [x, y] = evidence.line;
    for (const [[p, r], [s, t]] of generators) expect((p * x + r * y) * y - (s * x + t * y) * x === 0).toBe(true);
    checkWord(evidence.unipotent, generators);
  }
  if (kind === "finite") {
    const { elements } = group(generators, 300);
    expect(evidence.order).toBe(elements.length);
    const listed = evidence.elements.map((e: { matrix: Small }) => String(e.matrix)).sort();
    expect(listed).toEqual(elements.map(String).sort());
  }
  return kind;
}

describe("dimension 2, decided", () => {
  it("agrees with the definitions on random sets, and its evidence can be multiplied out", () => {
    const element = fc.array(fc.constantFrom(...POOL), { minLength: 1, maxLength: 3 }).map((word) =>
      word.reduce<Small>(
        (m, a) => times(a, m),
        [
          [1, 0],
          [0, 1],
        ],
      ),
    );
    const met = new Set<string>();
    fc.assert(
      fc.property(
        fc.array(fc.oneof(fc.constantFrom(...POOL), element), { minLength: 1, maxLength: 3 }),
        (generators) => {
          met.add(check(generators));
        },
      ),
      { numRuns: 300, seed: 7 },
    );
    expect([...met].sort()).toEqual(["finite", "lines", "slow", "strong"]);
  });

  it("lists every finite subgroup up to conjugacy, in any coordinates", () => {
    // biome-ignore format: matrices
    const groups: [number, Small[]][] = [
      [1, [[[1, 0], [0, 1]]]], [2, [[[-1, 0], [0, -1]]]], [3, [[[0, -1], [1, -1]]]], [4, [[[0, -1], [1, 0]]]],
      [6, [[[0, -1], [1, 1]]]], [2, [[[1, 0], [0, -1]]]], [2, [[[0, 1], [1, 0]]]],
      [4, [[[1, 0], [0, -1]], [[-1, 0], [0, 1]]]], [4, [[[0, 1], [1, 0]], [[0, -1], [-1, 0]]]],
      [6, [[[0, -1], [1, -1]], [[0, 1], [1, 0]]]], [6, [[[0, -1], [1, -1]], [[0, -1], [-1, 0]]]],
      [8, [[[0, -1], [1, 0]], [[0, 1], [1, 0]]]], [12, [[[0, -1], [1, 1]], [[0, 1], [1, 0]]]],
    ];
    for (const [order, generators] of groups) {
      for (const c of [
        [
          [1, 0],
          [0, 1],
        ],
        [
          [2, 1],
          [1, 1],
        ],
        [
          [3, -4],
          [1, -1],
        ],
      ] as Small[]) {
        const conjugated = generators.map((a) => conjugate(a, c));
        expect(check(conjugated)).toBe("finite");
        const { evidence } = conditionsOf(walkOf(conjugated)).stronglyIrreducible;
        expect(evidence.order).toBe(order);
      }
    }
  });

  it("tells kept lines from exchanged ones", () => {
    const cat: Small = [
      [2, 1],
      [1, 1],
    ];
    const alone = conditionsOf(walkOf([cat])).stronglyIrreducible;
    expect(alone.evidence.exchanging).toEqual([]);
    expect(alone.evidence.slopes).toEqual(["(-1 + sqrt(5)) / 2", "(-1 - sqrt(5)) / 2"]);
    const swapped = conditionsOf(
      walkOf([
        cat,
        [
          [0, 1],
          [-1, 0],
        ],
      ]),
    ).stronglyIrreducible;
    expect(swapped.evidence.exchanging).toEqual([1]);
    // A product of two exchanges: neither move is hyperbolic.
    const a: Small = [
      [0, 1],
      [-1, 0],
    ];
    expect(check([a, times(a, cat)])).toBe("lines");
  });

  it("finds a hyperbolic product where all moves and all products of two are not", () => {
    const generators: Small[] = [
      [
        [1, 1],
        [0, 1],
      ],
      [
        [0, -1],
        [1, 0],
      ],
    ];
    expect(check(generators)).toBe("strong");
    expect((conditionsOf(walkOf(generators)).proximal.evidence.word as WordEvidence).moves.length).toBeGreaterThan(2);
  });

  it("keeps entries beyond 2^53 exact", () => {
    const big = 2 ** 52;
    const walk = walkOf([
      [
        [1, big],
        [0, 1],
      ],
      [
        [1, 0],
        [big, 1],
      ],
    ]);
    const { stronglyIrreducible } = conditionsOf(walk);
    expect(stronglyIrreducible.verdict).toBe("holds");
    expect((stronglyIrreducible.evidence.word as { trace: unknown }).trace).toBe((2n ** 104n + 2n).toString());
  });
});

describe("limit theorems drawn from the conditions", () => {
  const tray: Small[] = [
    [
      [2, 1],
      [1, 1],
    ],
    [
      [3, 1],
      [2, 1],
    ],
  ];
  const reflected: Small[] = [
    [
      [2, 1],
      [1, 1],
    ],
    [
      [0, 1],
      [1, 1],
    ],
  ];
  const scope = (walk: ReturnType<typeof walkOf>) => conditionsOf(walk).equidistribution;

  it("covers translations by the affine theorem, determinants -1 by pairs or returns", () => {
    expect(scope(walkOf(tray)).verdict).toBe("holds");
    const moved = scope(walkOf(tray, {}, ["0", "sqrt(2)"]));
    expect(moved.verdict).toBe("holds");
    expect(moved.evidence.exceptions).toBe("points with a finite orbit");
    const mixed = scope(walkOf(reflected));
    expect(mixed.verdict).toBe("holds");
    expect(mixed.evidence.scope).toContain("time averages");
    expect(scope(walkOf(reflected, {}, ["1/3", "0"])).verdict).toBe("undecided");
    expect(
      scope(
        walkOf(
          [
            [
              [1, 1],
              [1, 0],
            ],
            [
              [0, 1],
              [1, 1],
            ],
          ],
          {},
          ["1/3", "0"],
        ),
      ).verdict,
    ).toBe("holds");
  });

  it("does not call a translated walk without strong irreducibility a failure", () => {
    expect(
      scope(
        walkOf(
          [
            [
              [1, 1],
              [0, 1],
            ],
          ],
          {},
          ["0", "sqrt(2)"],
        ),
      ).verdict,
    ).toBe("undecided");
  });

  it("gives moments always, and the central limit theorem with its hypotheses", () => {
    for (const set of [
      tray,
      [
        [
          [1, 1],
          [0, 1],
        ],
      ] as Small[],
    ]) {
      expect(conditionsOf(walkOf(set)).exponentialMoment.verdict).toBe("holds");
    }
    expect(conditionsOf(walkOf(tray)).centralLimit.verdict).toBe("holds");
    expect(
      conditionsOf(
        walkOf([
          [
            [1, 1],
            [0, 1],
          ],
        ]),
      ).centralLimit.verdict,
    ).toBe("fails");
    expect(conditionsOf(walkOf([tray[0] as Small])).centralLimit.verdict).toBe("undecided");
  });
});
