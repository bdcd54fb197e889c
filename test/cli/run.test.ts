import { mkdtemp, readdir, readFile, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { beforeAll, describe, expect, it } from "vitest";
import { QUESTIONS } from "../../src/cli/commands/index.js";
import { jsonText } from "../../src/cli/json.js";
import { run } from "../../src/cli/run.js";
import { VERSION } from "../../src/version.js";

interface Answer {
  readonly status: number;
  readonly out: string;
  readonly err: string;
}

async function cli(argv: string[], stdin = "", signal?: AbortSignal): Promise<Answer> {
  let [out, err] = ["", ""];
  const status = await run(argv, {
    stdout: { write: (text) => (out += text) },
    stderr: { write: (text) => (err += text) },
    stdin: async () => new TextEncoder().encode(stdin),
    ...(signal === undefined ? {} : { signal }),
  });
  return { status, out, err };
}

const tray = "examples/tray.json";
let directory: string;
beforeAll(async () => {
  directory = await mkdtemp(join(tmpdir(), "torwend-"));
});

const walk = (changes: object) =>
  JSON.stringify({
    torwend: 1,
    title: "t",
    dimension: 2,
    moves: [
      {
        label: "a",
        matrix: [
          [2, 1],
          [1, 1],
        ],
      },
    ],
    ...changes,
  });

/** Ten kinds of bad file, and what the line must say: pointer and words. */
const bad: readonly [string, string | Uint8Array, RegExp][] = [
  ["no JSON", "{ torwend", /: (\/|found|\S).*accepted/],
  [
    "determinant 2",
    walk({
      moves: [
        {
          label: "a",
          matrix: [
            [2, 0],
            [0, 1],
          ],
        },
      ],
    }),
    /: \/moves\/0\/matrix: .*2.*accepted/,
  ],
  ["a row too short", walk({ moves: [{ label: "a", matrix: [[2, 1], [1]] }] }), /: \/moves\/0\/matrix\S*: .*accepted/],
  [
    "a negative weight",
    walk({
      moves: [
        {
          label: "a",
          weight: "-1",
          matrix: [
            [2, 1],
            [1, 1],
          ],
        },
      ],
    }),
    /: \/moves\/0\/weight: .*accepted/,
  ],
  ["dimension 9", walk({ dimension: 9 }), /: \/dimension: .*9.*accepted/],
  ["an unknown field", walk({ titel: "x" }), /: \/titel: .*title/],
  ["an expression that does not parse", walk({ start: ["sqrt(", "0"] }), /: \/start\/0: .*accepted/],
  [
    "a polynomial without a root there",
    walk({ start: [{ polynomial: ["-2", "0", "1"], between: ["2", "3"] }, "0"] }),
    /: \/start\/0\S*: .*root/,
  ],
  [
    "an integer that JSON rounds",
    walk({}).replace("[2,1]", "[9007199254740993,1]"),
    /: \/moves\/0\/matrix\/0\/0: .*accepted/,
  ],
  ["a key twice", walk({}).replace('"title"', '"title":"u","title"'), /: \/title: .*twice|duplicate|once/],
  ["bytes that are no UTF-8", new Uint8Array([0x7b, 0xff, 0xfe, 0x7d]), /UTF-8.*accepted/],
];

describe("a bad file", () => {
  it.each(bad)("%s: status 2, one line a fault, file and pointer first", async (name, content, line) => {
    const file = join(directory, `${name.replaceAll(" ", "-")}.json`);
    await writeFile(file, content);
    const { status, out, err } = await cli(["orbits", file, "--modulus", "3"]);
    expect(status).toBe(2);
    expect(out).toBe("");
    expect(err).toMatch(line);
    for (const l of err.trimEnd().split("\n")) expect(l.startsWith(`torwend: ${file}: `)).toBe(true);
  });

  it("tells every fault at once, the options' too", async () => {
    const content = walk({ dimension: 2, title: 5, start: ["1/0", "0"] });
    const { status, err } = await cli(["orbits", "-", "--modulus", "x", "--seed", "-1"], content);
    expect(status).toBe(2);
    const lines = err.trimEnd().split("\n");
    expect(lines.length).toBeGreaterThanOrEqual(4);
    expect(lines[0]).toBe('torwend: --modulus: found "x"; accepted: a whole number');
    expect(lines.filter((l) => l.startsWith("torwend: standard input: /")).length).toBeGreaterThanOrEqual(2);
  });

  it("that is not there, or a directory", async () => {
    const missing = await cli(["orbits", join(directory, "no.json"), "--modulus", "3"]);
    expect(missing).toMatchObject({ status: 2, out: "" });
    expect(missing.err).toMatch(/^torwend: .*no\.json: cannot be read: there is no such file or directory\n$/);
    expect((await cli(["orbits", directory, "--modulus", "3"])).err).toMatch(/cannot be read: it is a directory\n$/);
  });
});

describe("bad options", () => {
  it.each([
    [["orbits", tray], /^torwend: --modulus: found nothing; accepted: .*\n$/],
    [["orbits", tray, "--modulus", "0"], "torwend: --modulus: found 0; accepted: a whole number from 1 up\n"],
    [["orbits", tray, "--modulos", "3"], /^torwend: unknown option '--modulos' \(Did you mean --modulus\?\)\n$/],
    [["orbit", tray], /^torwend: unknown command 'orbit' \(Did you mean orbits\?\)\n$/],
    [["orbits"], /^torwend: missing required argument 'walk'\n$/],
    [["law", tray, "--frequency", "1,0,0"], /^torwend: --frequency: found 1,0,0; accepted: 2 whole numbers.*\n$/],
    [
      ["law", tray, "--frequency", "1,x"],
      /^torwend: --frequency: found "1,x"; accepted: whole numbers separated by commas\n$/,
    ],
    [["trajectory", tray, "--steps", "3", "--out", "x.txt"], /^torwend: --out: found x\.txt; accepted: .*\.npy.*\n$/],
    [
      ["trajectory", tray, "--steps", "3", "--out", "/no/such/x.csv"],
      /^torwend: --out: .* cannot be written: there is no.*\n$/,
    ],
    [["trajectory", tray, "--choices", "/no/such"], /^torwend: --choices: \/no\/such cannot be read: there is no.*\n$/],
    [
      ["growth", tray, "--effort", "much", "--memory", "0"],
      /^torwend: --effort: .*quick.*\ntorwend: --memory: .*MiB.*\n$/,
    ],
    [[], /^torwend: no command is given; torwend --help lists them\n$/],
  ] as [string[], string | RegExp][])("%j: status 2 and a line", async (argv, line) => {
    const { status, out, err } = await cli(argv);
    expect({ status, out }).toEqual({ status: 2, out: "" });
    expect(err).toMatch(line);
  });
});

describe("help and version", () => {
  it.each(QUESTIONS.map((q) => q.name))("%s: an example, every option, status 0", async (name) => {
    const { status, out, err } = await cli([name, "--help"]);
    expect({ status, err }).toEqual({ status: 0, err: "" });
    expect(out).toMatch(new RegExp(`Examples?:\n  torwend ${name} examples/`));
    const question = QUESTIONS.find((q) => q.name === name)!;
    for (const { flags } of question.options) expect(out).toContain(flags);
    for (const flag of ["--json", "--seed", "--workers", "--effort", "--version"]) expect(out).toContain(flag);
  });
  it("of the whole", async () => {
    const { status, out } = await cli(["--help"]);
    expect(status).toBe(0);
    for (const { name } of QUESTIONS) expect(out).toContain(name);
    expect(out).toMatch(/Examples:\n {2}torwend /);
    expect(await cli(["--version"])).toEqual({ status: 0, out: `${VERSION}\n`, err: "" });
    expect((await cli(["orbits", "--version"])).out).toBe(`${VERSION}\n`);
  });
});

describe("answers", () => {
  const fields: readonly [string, string[], string[]][] = [
    ["conditions", [], ["stronglyIrreducible", "proximal", "exponentialMoment", "equidistribution", "centralLimit"]],
    ["growth", ["--effort", "quick"], ["exponents", "logNormVariance", "pressure", "rate"]],
    ["start", ["--denominators", "20"], ["kind", "verdict", "traps"]],
    ["trajectory", ["--steps", "5"], ["positions", "bitsConsumed"]],
    ["averages", ["--steps", "200", "--replicates", "20", "--effort", "quick"], ["observables"]],
    ["law", ["--frequency", "1,0", "--steps", "4"], ["coefficients"]],
    ["orbits", ["--modulus", "6"], ["orbits"]],
  ];
  it.each(fields.filter(([name]) => QUESTIONS.some((q) => q.name === name)))(
    "%s: JSON alone with --json, else text, no colour",
    async (name, options, wanted) => {
      const { status, out, err } = await cli([name, tray, "--json", "--workers", "0", ...options]);
      expect({ status, err: err.replace(/^torwend: warning: .*\n/gm, "") }).toEqual({ status: 0, err: "" });
      const result = JSON.parse(out);
      expect(Object.keys(result)).toEqual(expect.arrayContaining(["torwend", "walk", ...wanted]));
      expect(result).toMatchObject({ torwend: VERSION, walk: "Tray stirring, two strokes" });
      expect(out).not.toMatch(/NaN|Infinity/);
      const text = await cli([name, "-", "--workers", "0", ...options], await readFile(tray, "utf8"));
      expect(text.status).toBe(0);
      expect(text.out).toMatch(/^Tray stirring, two strokes\n\n/);
      // biome-ignore lint/suspicious/noControlCharactersInRegex: colour codes begin with one
      expect(text.out).not.toMatch(/\x1b|NaN|undefined|\[object/);
    },
  );

  it("writes positions to a file, and leaves no other behind", async () => {
    const file = join(directory, "positions.csv");
    const { status, out } = await cli(["trajectory", tray, "--steps", "4", "--out", file]);
    expect(status).toBe(0);
    expect(out).toContain(`Written to ${file}: 5 positions.`);
    expect((await readFile(file, "utf8")).trimEnd().split("\n").length).toBe(6);
  });

  it("take choices from a file", async () => {
    const file = join(directory, "choices.txt");
    await writeFile(file, "0\n1\n1\n");
    const { out } = await cli(["trajectory", tray, "--choices", file, "--json"]);
    expect(JSON.parse(out).positions.map((p: { step: number }) => p.step)).toEqual([0, 1, 2, 3]);
    await writeFile(file, "0\n2\n");
    expect((await cli(["trajectory", tray, "--choices", file])).err).toMatch(/^torwend: --choices: line 2: found "2"/);
  });
});

describe("assess", () => {
  const rational = walk({
    start: ["1/3", "0"],
    observables: [{ label: "<b>", box: { low: ["0", "0"], high: ["1/2", "1"] } }],
  });

  it("writes both files and prints the findings in order", async () => {
    const out = join(directory, "new", "dossier");
    const answer = await cli(["assess", "-", "--effort", "quick", "--out", out, "--workers", "0"], rational);
    expect(answer.status).toBe(0);
    const order = [
      "Do the conditions",
      "How fast do products",
      "Is this start",
      "What do time averages",
      "How fast does the law",
      "How do finite orbits",
      "Written: ",
    ];
    const places = order.map((heading) => answer.out.indexOf(heading));
    expect(places.every((p) => p > 0)).toBe(true);
    expect(places).toEqual([...places].sort((a, b) => a - b));
    expect(answer.out).not.toMatch(/NaN|undefined|\[object/);
    expect((await readdir(out)).sort()).toEqual(["dossier.html", "dossier.json"]);
    const dossier = JSON.parse(await readFile(join(out, "dossier.json"), "utf8"));
    const fields = ["torwend", "walk", "conditions", "growth", "start", "averages", "law", "orbits"];
    expect(Object.keys(dossier)).toEqual(expect.arrayContaining(fields));
    expect(await readFile(join(out, "dossier.html"), "utf8")).toMatch(/^<!doctype html>/i);
  });

  it("keeps what is finished when a signal stops it", async () => {
    const out = join(directory, "stopped");
    const stop = new AbortController();
    setTimeout(() => stop.abort(), 300);
    const argv = ["assess", tray, "--effort", "thorough", "--out", out, "--workers", "0", "--json"];
    const answer = await cli(argv, "", stop.signal);
    expect(answer.status).toBe(3);
    expect(answer.err).toMatch(/torwend: stopped by the caller's signal; answered so far: .*run again/);
    expect(JSON.parse(answer.out)).toEqual(JSON.parse(await readFile(join(out, "dossier.json"), "utf8")));
  });

  it("refuses early a directory that cannot be written", async () => {
    const file = join(directory, "in-the-way");
    await writeFile(file, "");
    const answer = await cli(["assess", tray, "--out", file]);
    expect(answer).toMatchObject({ status: 2, out: "" });
    expect(answer.err).toMatch(/^torwend: --out: .*in-the-way cannot be written: a file of that name is in the way\n$/);
    expect((await cli(["assess", tray, "--out", "/proc/no/such"])).status).toBe(2);
  });
});

describe("stops", () => {
  it("by a limit: status 3, and how to go on", async () => {
    const { status, out, err } = await cli(["orbits", tray, "--modulus", "3000", "--memory", "8"]);
    expect({ status, out }).toEqual({ status: 3, out: "" });
    expect(err).toMatch(/^torwend: stopped by a limit: .*8 MiB.*To go on: .*--memory.*\n$/);
  });
  it("by a signal: status 3, and how to go on", async () => {
    const stop = new AbortController();
    setTimeout(() => stop.abort(), 50);
    const { status, out, err } = await cli(["growth", tray, "--effort", "thorough", "--workers", "0"], "", stop.signal);
    expect({ status, out }).toEqual({ status: 3, out: "" });
    expect(err).toMatch(/^torwend: stopped by the caller's signal\. To go on, run the same command again.*\n$/);
  });
  it("by a budget: what is finished is printed, status 3", async () => {
    const argv = ["law", tray, "--frequency", "1,0", "--steps", "100", "--effort", "quick", "--json"];
    const { status, out, err } = await cli(argv);
    expect(status).toBe(3);
    expect(JSON.parse(out).coefficients.length).toBeGreaterThan(10);
    expect(err).toMatch(/^torwend: stopped at move \d+ of 100: .*effort.*\n$/);
  });
  it("by a defect: status 1 and the stack", async () => {
    const broken = await run(["orbits", tray, "--modulus", "3"], {
      stdout: {
        write: () => {
          throw new TypeError("a defect made for the test");
        },
      },
      stderr: { write: () => undefined },
      stdin: async () => new Uint8Array(),
    });
    expect(broken).toBe(1);
  });
});

describe("progress", () => {
  it("is shown on standard error where asked for, and the answer is the same", async () => {
    const argv = ["orbits", tray, "--modulus", "30", "--json", "--workers", "0"];
    const [quiet, loud] = [await cli(argv), await cli([...argv, "--progress"])];
    expect(quiet.err).toBe("");
    expect(loud.err).toMatch(/^second eigenvalues: 100 %$/m);
    expect(loud.out).toBe(quiet.out);
  });
});

describe("jsonText", () => {
  it("never writes what JSON has no word for", () => {
    const text = jsonText({
      a: Number.NaN,
      b: -0,
      c: 5n,
      d: 2n ** 70n,
      e: new Float64Array([1, Number.POSITIVE_INFINITY]),
    });
    expect(JSON.parse(text)).toEqual({ a: null, b: 0, c: 5, d: (2n ** 70n).toString(), e: [1, null] });
    expect(text).not.toContain("-0");
  });
});
