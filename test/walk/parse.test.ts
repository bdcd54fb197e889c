import { Ajv2020 } from "ajv/dist/2020.js";
import { describe, expect, it } from "vitest";
import { asWalk, parseWalk } from "../../src/walk/parse.js";
import schema from "../../src/walk/walk.schema.json" with { type: "json" };

const stroke = {
  matrix: [
    [2, 1],
    [1, 1],
  ],
};

describe("parseWalk", () => {
  it("fills in what is absent", () => {
    const walk = parseWalk({
      torwend: 1,
      dimension: 2,
      moves: [
        stroke,
        {
          matrix: [
            [0, 1],
            [1, 0],
          ],
          translation: ["0", "3"],
        },
      ],
    });
    expect(walk.title).toBe("untitled walk");
    expect(walk.start).toEqual({ type: "uniform" });
    expect(walk.moves.map((m) => [m.label, m.probability.toString(), m.determinant, m.translation])).toEqual([
      ["move 0", "1/2", 1, undefined],
      // A translation by integers is none on the torus.
      ["move 1", "1/2", -1, undefined],
    ]);
    expect("translation" in walk.moves[1]).toBe(false);
    expect(walk.observables.map((o) => o.label)).toEqual(["cosine of x1", "sine of x1", "cosine of x2", "sine of x2"]);
    const [cosine, sine] = walk.observables;
    expect(cosine.type === "terms" && cosine.terms.map((t) => [t.frequency, t.cos.text, t.sin.text])).toEqual([
      [[1n, 0n], "1", "0"],
    ]);
    expect(sine.type === "terms" && sine.terms.map((t) => [t.frequency, t.cos.text, t.sin.text])).toEqual([
      [[1n, 0n], "0", "1"],
    ]);
  });

  it("normalises weights exactly", () => {
    const weights = ["1/3", "0.25", 2, "sqrt(4)/7"];
    const walk = parseWalk({ torwend: 1, dimension: 2, moves: weights.map((weight) => ({ ...stroke, weight })) });
    // 1/3 + 1/4 + 2 + 2/7 = 241/84.
    expect(walk.moves.map((m) => m.probability.toString())).toEqual(["28/241", "21/241", "168/241", "24/241"]);
    expect(walk.moves.map((m) => m.weight.toString())).toEqual(["1/3", "1/4", "2", "2/7"]);
  });

  it("reads integers of any size, as texts or BigInts, and keeps a JSON document", () => {
    const big = 10n ** 30n;
    const matrix = [
      [big + 1n, String(big)],
      [1, "+1"],
    ];
    const walk = parseWalk({
      torwend: 1,
      dimension: 2,
      moves: [{ matrix }],
      observables: [{ terms: [{ frequency: [big, "-7"] }] }],
    });
    expect(walk.moves[0].matrix).toEqual([
      [big + 1n, big],
      [1n, 1n],
    ]);
    const [f] = walk.observables;
    expect(f.type === "terms" && f.terms[0].frequency).toEqual([big, -7n]);
    const again = parseWalk(JSON.stringify(walk.document));
    expect(again.moves[0].matrix).toEqual(walk.moves[0].matrix);
  });

  it("takes numbers that JSON keeps, however they are written", () => {
    const walk = parseWalk('\uFEFF{"torwend": 1.0, "dimension": 2, "moves": [{"matrix": [[1e0, 1], [0, 10E-1]]}]}');
    expect(walk.moves[0].matrix).toEqual([
      [1n, 1n],
      [0n, 1n],
    ]);
  });

  it("reads starts and densities", () => {
    const base = { torwend: 1, dimension: 2, moves: [stroke] };
    const point = parseWalk({ ...base, start: ["sqrt(2)-1", { polynomial: [-1, 0, 4], between: [0, 1] }] }).start;
    expect(point.type === "point" && point.point.map((x) => x.kind)).toEqual(["algebraic", "rational"]);
    const terms = [
      { frequency: [0, 0], cos: "sqrt(2)" },
      { frequency: [0, 0], cos: "1-sqrt(2)", sin: "5" },
      { frequency: [1, 2], sin: "1/2" },
    ];
    const density = parseWalk({ ...base, start: { density: terms } }).start;
    expect(density.type === "density" && density.terms.length).toBe(3);
  });

  it("passes its own walks through, and nobody else's", () => {
    const walk = parseWalk({ torwend: 1, dimension: 2, moves: [stroke] });
    expect(asWalk(walk)).toBe(walk);
    expect(() => asWalk({ ...walk })).toThrow('/document: unknown field "document"');
    expect(asWalk(JSON.stringify(walk.document)).moves).toHaveLength(1);
    expect(Object.isFrozen(walk)).toBe(true);
  });

  it("is not changed by later changes of the object it was made of", () => {
    const given = { torwend: 1, dimension: 2, moves: [structuredClone(stroke)] };
    const walk = parseWalk(given);
    given.moves[0].matrix[0][0] = 99;
    expect((walk.document as typeof given).moves[0].matrix[0][0]).toBe(2);
  });

  it("reads eight dimensions", () => {
    const matrix = Array.from({ length: 8 }, (_, i) =>
      Array.from({ length: 8 }, (_, j) => (j === (i + 1) % 8 ? 1 : 0)),
    );
    const walk = parseWalk({ torwend: 1, dimension: 8, moves: [{ matrix }] });
    expect([walk.moves[0].determinant, walk.observables.length]).toEqual([-1, 16]);
  });
});

describe("the schema", () => {
  it("is a valid schema of draft 2020-12, and describes every field", () => {
    expect(new Ajv2020({ strict: false }).validateSchema(schema)).toBe(true);
    const bare: string[] = [];
    const visit = (value: unknown, path: string) => {
      if (typeof value !== "object" || value === null) return;
      for (const [key, item] of Object.entries(value)) {
        const fields = key === "properties" ? Object.entries(item as Record<string, Record<string, unknown>>) : [];
        const defs = schema.$defs as Record<string, { description?: string }>;
        for (const [field, sub] of fields) {
          const target = typeof sub.$ref === "string" ? defs[sub.$ref.replace("#/$defs/", "")] : undefined;
          if (sub.description === undefined && target?.description === undefined) bare.push(`${path}/${field}`);
        }
        visit(item, `${path}/${key}`);
      }
    };
    visit(schema, "");
    expect(bare).toEqual([]);
  });
});
