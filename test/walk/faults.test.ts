import { describe, expect, it } from "vitest";
import { type Fault, WalkError } from "../../src/errors.js";
import { parseWalk } from "../../src/walk/parse.js";

function faultsOf(input: unknown): readonly Fault[] {
  try {
    parseWalk(input as string | object);
  } catch (error) {
    if (error instanceof WalkError) return error.faults;
    throw error;
  }
  return [];
}

const stroke = {
  matrix: [
    [2, 1],
    [1, 1],
  ],
};
const tray = { torwend: 1, dimension: 2, moves: [stroke] };
const withMove = (move: object) => ({ ...tray, moves: [{ ...stroke, ...move }] });
const withBox = (low: unknown[], high: unknown[]) => ({ ...tray, observables: [{ box: { low, high } }] });
const withDensity = (...terms: object[]) => ({ ...tray, start: { density: terms } });
const expression =
  'accepted: integers, fractions and terminating decimals with + - * / ^ (integer powers), parentheses, sqrt( ), cbrt( ), pi and e, such as "sqrt(2)-1"';

/** A bad file, and the whole of its faults. */
const cases: [string, unknown, [pointer: string, message: string][]][] = [
  [
    "determinant",
    withMove({
      matrix: [
        [2, 0],
        [0, 1],
      ],
    }),
    [["/moves/0/matrix", "found determinant 2; accepted: 1 or -1"]],
  ],
  [
    "determinant 0",
    withMove({
      matrix: [
        [2, 4],
        [1, 2],
      ],
    }),
    [["/moves/0/matrix", "found determinant 0; accepted: 1 or -1"]],
  ],
  [
    "a large determinant, exactly",
    withMove({
      matrix: [
        ["1000000000000000000001", "0"],
        ["5", "1"],
      ],
    }),
    [["/moves/0/matrix", "found determinant 1000000000000000000001; accepted: 1 or -1"]],
  ],
  [
    "rows",
    {
      ...tray,
      moves: [
        stroke,
        {
          matrix: [
            [1, 0],
            [0, 1],
            [0, 0],
          ],
        },
      ],
    },
    [["/moves/1/matrix", "found 3 entries; accepted: 2 rows of 2 integers (dimension 2)"]],
  ],
  [
    "a short row",
    withMove({ matrix: [[2, 1], [1]] }),
    [["/moves/0/matrix/1", "found 1 entry; accepted: 2 integers (dimension 2)"]],
  ],
  [
    "a matrix entry that is no integer",
    withMove({
      matrix: [
        ["1.5", 1],
        [1, true],
      ],
    }),
    [
      ["/moves/0/matrix/0/0", 'found "1.5"; accepted: an integer, as a text of digits beyond 2^53'],
      ["/moves/0/matrix/1/1", "found true; accepted: an integer, as a text of digits beyond 2^53"],
    ],
  ],
  [
    "a weight of 0",
    withMove({ weight: 0 }),
    [["/moves/0/weight", 'found 0; accepted: a positive rational such as "1/2", "0.25" or 3']],
  ],
  [
    "a negative weight",
    withMove({ weight: "-1/2" }),
    [["/moves/0/weight", 'found "-1/2"; accepted: a positive rational such as "1/2", "0.25" or 3']],
  ],
  [
    "an irrational weight",
    withMove({ weight: "sqrt(2)" }),
    [
      [
        "/moves/0/weight",
        'found "sqrt(2)", which is irrational; accepted: a positive rational such as "1/2", "0.25" or 3',
      ],
    ],
  ],
  [
    "a weight of unproved kind",
    withMove({ weight: "pi" }),
    [
      [
        "/moves/0/weight",
        'found "pi", which is not proved rational; accepted: a positive rational such as "1/2", "0.25" or 3',
      ],
    ],
  ],
  [
    "weights on some moves only",
    { ...tray, moves: [{ ...stroke, weight: "1/2" }, stroke, stroke] },
    [
      [
        "/moves",
        "found no weight on moves 1, 2, but on the others; accepted: a weight on every move, or on none (equal weights)",
      ],
    ],
  ],
  [
    "dimension 1",
    { ...tray, dimension: 1, moves: [{ matrix: [[1]] }] },
    [["/dimension", "found 1; accepted: a whole number from 2 to 8"]],
  ],
  ["dimension 9", { ...tray, dimension: 9 }, [["/dimension", "found 9; accepted: a whole number from 2 to 8"]]],
  [
    "dimension as text",
    { ...tray, dimension: "2" },
    [["/dimension", 'found "2"; accepted: a whole number from 2 to 8']],
  ],
  [
    "dimension against matrices",
    { ...tray, dimension: 3, moves: [stroke, stroke] },
    [["/dimension", "found 3, but every matrix is 2 x 2; accepted: 2, or matrices of 3 rows of 3 integers"]],
  ],
  [
    "an unknown field, with the nearest known one",
    withMove({ wieght: "1/2" }),
    [
      [
        "/moves/0/wieght",
        'unknown field "wieght"; nearest known one: "weight"; accepted: label, weight, matrix, translation',
      ],
    ],
  ],
  [
    "an unknown field at the top",
    { ...tray, begin: ["0", "0"] },
    [
      [
        "/begin",
        'unknown field "begin"; nearest known one: "title"; accepted: torwend, title, dimension, moves, start, observables',
      ],
    ],
  ],
  [
    "missing fields",
    {},
    ["torwend", "dimension", "moves"].map((f) => [
      "",
      `the field "${f}" is missing; accepted: an object with the fields torwend, title, dimension, moves, start, observables`,
    ]),
  ],
  ["another version", { ...tray, torwend: 2 }, [["/torwend", "found 2; accepted: 1, the version of the walk file"]]],
  ["no moves", { ...tray, moves: [] }, [["/moves", "found an empty list; accepted: a list of one or more moves"]]],
  [
    "a translation of another size",
    withMove({ translation: ["1/2"] }),
    [["/moves/0/translation", "found 1 entry; accepted: 2 exact numbers, one for each coordinate (dimension 2)"]],
  ],
  [
    "an expression that does not parse",
    { ...tray, start: ["sqrt(2", "1/0"] },
    [
      ["/start/0", `found "sqrt(2": at character 7: the text ends where an operator or ")" is due; ${expression}`],
      ["/start/1", `found "1/0": at character 2: the divisor is exactly 0; ${expression}`],
    ],
  ],
  [
    "a polynomial with two roots in its interval",
    { ...tray, start: ["0", { polynomial: ["-2", "0", "1"], between: ["-2", "2"] }] },
    [
      [
        "/start/1",
        "found x^2 - 2 has 2 real roots from -2 to 2; accepted: an interval that holds exactly one real root of the polynomial",
      ],
    ],
  ],
  [
    "a polynomial number of the wrong shape",
    { ...tray, start: ["0", { polynomial: ["-2", "0", "1"], betwen: ["1", "2"] }] },
    [
      ["/start/1", 'the field "between" is missing; accepted: {"polynomial": [...], "between": [low, high]}'],
      ["/start/1/betwen", 'unknown field "betwen"; nearest known one: "between"; accepted: polynomial, between'],
    ],
  ],
  [
    "a coefficient that does not parse",
    { ...tray, start: ["0", { polynomial: ["-2", "x"], between: ["1", "2"] }] },
    [
      [
        "/start/1/polynomial/1",
        `found "x": at character 1: found "x" where a number, "(", sqrt( ), cbrt( ), pi or e is due; ${expression}`,
      ],
    ],
  ],
  [
    "a fraction as a JSON number",
    withMove({ translation: [0.1, "0"] }),
    [
      [
        "/moves/0/translation/0",
        'found the number 0.1, which is rounded when JSON is read; accepted: an exact number: a text such as "3/7", "0.125" or "sqrt(2)-1", or {"polynomial": [...], "between": [low, high]}',
      ],
    ],
  ],
  [
    "the uniform start, misspelt",
    { ...tray, start: { uniforn: true } },
    [["/start/uniforn", 'unknown field "uniforn"; nearest known one: "uniform"; accepted: uniform, density']],
  ],
  [
    "two starts",
    { ...tray, start: { uniform: true, density: [{ frequency: [0, 0], cos: "1" }] } },
    [["/start", 'found an object with uniform, density; accepted: either {"uniform": true} or {"density": [terms]}']],
  ],
  [
    "a start of another type",
    { ...tray, start: "uniform" },
    [["/start", 'found "uniform"; accepted: a list of d exact numbers, {"uniform": true}, or {"density": [terms]}']],
  ],
  [
    "a density of mean 1/2",
    withDensity(
      { frequency: [0, 0], cos: "1/4" },
      { frequency: [1, 0], cos: "1/2" },
      { frequency: [0, 0], cos: "1/4" },
    ),
    [["/start/density", "found mean 1/2; accepted: coefficients cos at frequency 0 that sum to exactly 1"]],
  ],
  [
    "a density without a constant",
    withDensity({ frequency: [1, 0], cos: "1/2" }),
    [
      [
        "/start/density",
        "found mean 0 (no term has frequency 0); accepted: coefficients cos at frequency 0 that sum to exactly 1",
      ],
    ],
  ],
  [
    "a density of irrational mean",
    withDensity({ frequency: [0, 0], cos: "sqrt(2)" }),
    [
      [
        "/start/density",
        "found mean about 1.4142135623730951; accepted: coefficients cos at frequency 0 that sum to exactly 1",
      ],
    ],
  ],
  [
    "a frequency of another size",
    { ...tray, observables: [{ terms: [{ frequency: [1, 0, 0], cos: "1" }] }] },
    [["/observables/0/terms/0/frequency", "found 3 entries; accepted: 2 integers (dimension 2)"]],
  ],
  [
    "an observable of neither kind, of both kinds, of none",
    {
      ...tray,
      observables: [{ label: "a" }, { terms: [{ frequency: [1, 0] }], box: { low: [0, 0], high: [1, 1] } }, 7],
    },
    [
      ["/observables/0", 'the field "terms" is missing; accepted: one of terms, box'],
      ["/observables/1", "found an object with terms, box; accepted: one of terms, box"],
      ["/observables/2", "found 7; accepted: an object with the field label and one of terms, box"],
    ],
  ],
  [
    "an empty box",
    withBox(["1/2", "0"], ["sqrt(1/4)", "1"]),
    [
      [
        "/observables/0/box/low/0",
        'found "1/2", which is not below the high end "sqrt(1/4)"; accepted: 0 <= low < high <= 1 in every coordinate',
      ],
    ],
  ],
  [
    "a box outside the torus' cell",
    withBox(["-1/100", "0"], ["1/2", "sqrt(2)"]),
    [
      [
        "/observables/0/box/low/0",
        'found "-1/100", which is below 0; accepted: 0 <= low < high <= 1 in every coordinate',
      ],
      [
        "/observables/0/box/high/1",
        'found "sqrt(2)", which is above 1; accepted: 0 <= low < high <= 1 in every coordinate',
      ],
    ],
  ],
  [
    "a box of another size",
    withBox(["0"], ["1/2", "1", "1"]),
    [
      ["/observables/0/box/low", "found 1 entry; accepted: 2 exact numbers, one for each coordinate (dimension 2)"],
      ["/observables/0/box/high", "found 3 entries; accepted: 2 exact numbers, one for each coordinate (dimension 2)"],
    ],
  ],
  ["a blank title", { ...tray, title: " " }, [["/title", 'found " "; accepted: a text that is not blank']]],
  ["something else than a file", 7, [["", "found 7; accepted: the text or the object of a walk file"]]],
  ["null", null, [["", "found null; accepted: the text or the object of a walk file"]]],
  [
    "what JSON cannot hold",
    withMove({ label: () => 1 }),
    [
      ["/moves/0/label", "found a function; accepted: what JSON can hold"],
      ["/moves/0/label", "found null; accepted: a text that is not blank"],
    ],
  ],
];

/** A bad text, and the whole of its faults. */
const texts: [string, string, [pointer: string, message: string][]][] = [
  ["an open brace", "{", [["", 'line 1, column 2: the text ends: "}" is due; accepted: JSON']]],
  ["nothing", "", [["", "line 1, column 1: the text ends: a value is due; accepted: JSON"]]],
  ["a trailing comma", '{\n  "moves": [1,]\n}', [["", 'line 2, column 15: found "]": a value is due; accepted: JSON']]],
  [
    "a comment",
    '{\n\n  // tray\n  "torwend": 1 }',
    [["", 'line 3, column 3: found "// tray": comments are no part of JSON; accepted: JSON']],
  ],
  ["more after the end", "{} {}", [["", 'line 1, column 4: found "{": the end is due; accepted: JSON']]],
  [
    "a list",
    "[]",
    [
      [
        "",
        "found an empty list; accepted: an object with the fields torwend, title, dimension, moves, start, observables",
      ],
    ],
  ],
  [
    "a duplicate key",
    '{"torwend": 1, "dimension": 2,\n "dimension": 2, "moves": [{"matrix": [[2, 1], [1, 1]]}]}',
    [
      [
        "/dimension",
        'found the key "dimension" 2 times (line 1, column 16; line 2, column 2); accepted: each key once',
      ],
    ],
  ],
  [
    "numbers that JSON rounds",
    '{"torwend": 1, "dimension": 2, "moves": [{"weight": 0.5, "matrix": [[9007199254740993, 1], [1.00000000000000000001, 1]]}]}',
    [
      [
        "/moves/0/weight",
        'found the number 0.5, which is rounded when JSON is read; accepted: a positive rational: a text such as "1/2" or "0.25", or a JSON integer',
      ],
      [
        "/moves/0/matrix/0/0",
        'found the number 9007199254740993, which is rounded when JSON is read; accepted: an integer up to 2^53 in absolute value, or the number as a text: "9007199254740993"',
      ],
      [
        "/moves/0/matrix/1/0",
        'found the number 1.00000000000000000001, which is rounded when JSON is read; accepted: an integer up to 2^53 in absolute value, or the number as a text: "1.00000000000000000001"',
      ],
    ],
  ],
  ["nesting without end", "[".repeat(100_000), [["", "found more than 64 levels of nesting; accepted: a walk file"]]],
  [
    "deep nesting",
    `${"[".repeat(100)}${"]".repeat(100)}`,
    [["", "found more than 64 levels of nesting; accepted: a walk file"]],
  ],
];

describe("faults of a walk file", () => {
  it.each(cases)("%s", (_, input, expected) => {
    expect(faultsOf(input).map((f) => [f.pointer, f.message])).toEqual(expected);
  });

  it.each(texts)("text: %s", (_, input, expected) => {
    expect(faultsOf(input).map((f) => [f.pointer, f.message])).toEqual(expected);
  });

  it("are told all at once, one line each, in the order of the document", () => {
    const bad = {
      torwend: 3,
      dimension: 2,
      moves: [
        {
          matrix: [
            [1, 1],
            [1, 3],
          ],
          weight: "0",
        },
        5,
        {
          matrix: [
            [1, "a"],
            [0, 1],
          ],
          translation: ["0", "(", "0"],
        },
        null,
      ],
      start: ["1"],
      observables: [
        { terms: [null, { frequency: [0] }, { frequency: [1, 0], cos: "pi+", sin: null }] },
        { box: { low: 5 } },
      ],
    };
    const faults = faultsOf(bad);
    expect(faults.map((f) => f.pointer)).toEqual([
      "/torwend",
      "/moves/0/matrix",
      "/moves/0/weight",
      "/moves/1",
      "/moves/2/matrix/0/1",
      "/moves/2/translation",
      "/moves/2/translation/1",
      "/moves/3",
      "/start",
      "/observables/0/terms/0",
      "/observables/0/terms/1/frequency",
      "/observables/0/terms/2/cos",
      "/observables/0/terms/2/sin",
      "/observables/1/box",
      "/observables/1/box/low",
    ]);
    const error = new WalkError(faults);
    expect(error.message.split("\n").length).toBe(faults.length);
    for (const { message } of faults) expect(message).toContain("; accepted: ");
  });

  it("are WalkErrors for anything at all that is put in a field", () => {
    const junk = [
      null,
      true,
      0,
      -1,
      2.5,
      Number.NaN,
      "",
      "x",
      [],
      [[]],
      [null],
      {},
      { a: 1 },
      { uniform: 1 },
      10n,
      () => 0,
    ];
    const places: ((value: unknown) => object)[] = [
      (v) => ({ ...tray, torwend: v }),
      (v) => ({ ...tray, dimension: v }),
      (v) => ({ ...tray, moves: v }),
      (v) => ({ ...tray, moves: [v, stroke] }),
      (v) => withMove({ matrix: v }),
      (v) => withMove({ matrix: [v, [1, 1]] }),
      (v) =>
        withMove({
          matrix: [
            [2, v],
            [1, 1],
          ],
        }),
      (v) => withMove({ weight: v }),
      (v) => withMove({ translation: v }),
      (v) => withMove({ translation: ["0", v] }),
      (v) => ({ ...tray, start: v }),
      (v) => ({ ...tray, start: ["0", v] }),
      (v) => ({ ...tray, start: ["0", { polynomial: v, between: ["0", "1"] }] }),
      (v) => ({ ...tray, start: ["0", { polynomial: ["0", "1"], between: v }] }),
      (v) => ({ ...tray, start: ["0", { polynomial: ["0", v], between: ["0", "1"] }] }),
      (v) => ({ ...tray, start: { density: v } }),
      (v) => withDensity({ frequency: [0, 0], cos: v }),
      (v) => withDensity({ frequency: v, cos: "1" }),
      (v) => ({ ...tray, start: { density: [v] } }),
      (v) => ({ ...tray, observables: v }),
      (v) => ({ ...tray, observables: [v] }),
      (v) => ({ ...tray, observables: [{ terms: v }] }),
      (v) => ({ ...tray, observables: [{ terms: [v] }] }),
      (v) => ({ ...tray, observables: [{ terms: [{ frequency: [v, 1] }] }] }),
      (v) => ({ ...tray, observables: [{ box: v }] }),
      (v) => withBox(["0", v], ["1", "1"]),
      (v) => ({ ...tray, observables: [{ box: { low: v, high: ["1", "1"] } }] }),
    ];
    let faulty = 0;
    for (const place of places) for (const value of junk) faulty += faultsOf(place(value)).length > 0 ? 1 : 0;
    expect(faulty).toBeGreaterThan(0.85 * places.length * junk.length);
  });
});
