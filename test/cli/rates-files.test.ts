// The commands `rates check` and `rates make`, and what all of the group refuse.
import { cpSync, mkdirSync, mkdtempSync, readFileSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { describe, expect, test } from "vitest";
import { runMain } from "./run-main.ts";

const ours = resolve(import.meta.dirname, "../../rates");
const folder = () => mkdtempSync(join(tmpdir(), "emberline-rates-"));
const json = async (...args: string[]) => {
  const { status, out } = await runMain("rates", ...args, "--format", "json");
  expect(status).toBe(0);
  return JSON.parse(out);
};

/** A folder with one reaction of ours as another evaluation, damaged or not. */
function userFolder(damage: (text: string) => string = (text) => text): string {
  const at = folder();
  mkdirSync(join(at, "t-d_n-he4"));
  const text = readFileSync(join(ours, "t-d_n-he4/desouza2019.ecsv"), "utf8");
  writeFileSync(join(at, "t-d_n-he4/smith2027.ecsv"), damage(text.replace(/^(10 .*) (.*)$/m, "$1 1.0060")));
  return at;
}

describe("check", () => {
  test("the library passes: no error, exit status 0", async () => {
    const { status, out } = await runMain("rates", "check");
    expect(status).toBe(0);
    expect(out).toMatch(/rates: 219 files and 4 networks checked: 0 errors, 1 warning, 7 notes\n$/);
  });
  test("a folder of a user's is checked alone, over the library", async () => {
    const at = userFolder();
    const { status, out } = await runMain("rates", "check", at);
    expect(status, out).toBe(0);
    expect(out).not.toContain("rates/li7-n_gamma-li8");
  });
  test("a file that is no text is named once", async () => {
    const at = folder();
    mkdirSync(join(at, "t-d_n-he4"));
    writeFileSync(join(at, "t-d_n-he4/smith2027.ecsv"), Buffer.from([0x80, 0xff, 0xfe, 0x80]));
    const { status, out } = await runMain("rates", "check", at);
    expect(status).toBe(2);
    expect(out).toContain(`${at}/t-d_n-he4/smith2027.ecsv: cannot be read (not UTF-8 text)\n`);
    expect(out.match(/smith2027\.ecsv/g)).toHaveLength(1);
  });
  const damages: readonly (readonly [string, (text: string) => string, RegExp])[] = [
    ["a row that jumps", (text) => text.replace(/^0\.1 4\.5/m, "0.1 5.5"), /smith2027\.ecsv:47: rate jumps/],
    ["a word for a number", (text) => text.replace(/^0\.1 4\.5\S*/m, "0.1 many"), /smith2027\.ecsv:47: rate = many/],
    ["rows out of order", (text) => text.replace(/^0\.1 /m, "0.05 "), /smith2027\.ecsv:47: T9 must increase/],
    ["f_u below 1", (text) => text.replace(/^(0\.1 \S+) \S+/m, "$1 0.98"), /smith2027\.ecsv:47: f_u = 0\.98/],
    ["no citation", (text) => text.replace(/# {3}citation: .*\n/, ""), /smith2027\.ecsv:\d+: citation is missing/],
    [
      "a Q-value of another reaction",
      (text) => text.replace("17589.300", "1758.93"),
      /smith2027\.ecsv:\d+: q_value_keV/,
    ],
    [
      "other reactants than its folder",
      (text) => text.replace("reaction: t + d -> he4 + n", "reaction: d + d -> t + p"),
      /smith2027\.ecsv:\d+: reaction d \+ d -> t \+ p is d-d_p-t, but the file lies in folder t-d_n-he4/,
    ],
  ];
  test.each(damages)("%s: file, line and exit status 2", async (_, damage, message) => {
    const at = userFolder(damage);
    const { status, out, err } = await runMain("rates", "check", at);
    expect(status).toBe(2);
    expect(out).toMatch(message);
    expect(err).toMatch(/^emberline: 1 error in .*, the first at .*smith2027\.ecsv:\d+; put them right\n$/);
  });
  test("a copy, a stray folder and a wrongly named one", async () => {
    const at = folder();
    for (const name of ["t-d_n-he4", "d-t_n-he4", "t-d-n-he4"]) mkdirSync(join(at, name));
    cpSync(join(ours, "t-d_n-he4/desouza2019.ecsv"), join(at, "t-d_n-he4/copy2027.ecsv"));
    const { status, out } = await runMain("rates", "check", at);
    expect(status).toBe(2);
    expect(out).toMatch(/copy2027\.ecsv: warning: same numbers as evaluation desouza2019/);
    expect(out).toMatch(/t-d-n-he4: warning: not read/);
    expect(out).toMatch(/d-t_n-he4: folder d-t_n-he4: name it t-d_n-he4/);
  });
  test("a network that names a missing file, and one whose nuclide nothing makes", async () => {
    const at = folder();
    mkdirSync(join(at, "networks"));
    writeFileSync(
      join(at, "networks/mine.csv"),
      "reaction,evaluation\np-n_gamma-d,ando2006\nb8-n_p-he4-he4,nosuch1900\nli7-p_he4-he4,descouvemont2004\n",
    );
    const { status, out } = await runMain("rates", "check", at);
    expect(status).toBe(2);
    expect(out).toMatch(/mine\.csv:3: no file b8-n_p-he4-he4\/nosuch1900\.ecsv/);
  });
  test("json counts what was found", async () => {
    const { results } = await json("check");
    expect(results).toMatchObject({ errors: 0, warnings: 1, notes: 7, files: 219, networks: 4 });
    expect(results.table.rows).toHaveLength(8);
  });
});

const S_FACTOR = [
  "E_MeV,S_MeV_b,sigma_MeV_b",
  ...Array.from({ length: 41 }, (_, k) => 3 * (k / 40) ** 2).map((E) => {
    const S = 2.1e-7 * (1 + 28 * E);
    return `${E.toFixed(5)},${S.toPrecision(8)},${(0.03 * S).toPrecision(4)}`;
  }),
].join("\n");
const make = (file: string, ...more: string[]) => [
  ...["rates", "make", "--from", file, "--reaction", "d(p,g)he3", "--name", "smith2027"],
  ...["--citation", "Smith 2027, private communication", ...more],
];

describe("make", () => {
  const written = (text = S_FACTOR) => {
    const file = join(folder(), "s.csv");
    writeFileSync(file, text);
    return file;
  };
  test("writes a file that runs, moves the abundance and passes the checks", async () => {
    const at = folder();
    mkdirSync(join(at, "d-p_gamma-he3"));
    const out = join(at, "d-p_gamma-he3/smith2027.ecsv");
    const made = await runMain(
      ...make(written(), "--valid", "0.001,2", "--doi", "10.1/x", "--note", "a test", "--out", out),
    );
    expect([made.status, made.out]).toEqual([0, ""]);
    expect(made.err).toBe(`emberline: use it with --rates ${at} --evaluation "d-p_gamma-he3=smith2027"\n`);
    const text = readFileSync(out, "utf8");
    for (const line of ["valid_T9: 0.001 2", "doi: 10.1/x", "note: a test", "uncertainty_basis: published"])
      expect(text).toContain(`#   ${line}\n`);
    expect((await runMain("rates", "check", at)).status).toBe(0);
    const deuterium = async (...args: string[]) =>
      JSON.parse((await runMain("--network", "twelve", "--errors", "none", "--format", "json", ...args)).out).results
        .abundances.dToH.value;
    const [before, after] = [await deuterium(), await deuterium("--rates", at, "--evaluation", "d(p,g)he3=smith2027")];
    expect(Math.abs(after / before - 1)).toBeGreaterThan(1e-3);
    // The same file compared: the change is the one of the runs.
    const { results } = await json("compare", "d(p,g)he3", "smith2027", "--rates", at, "--network", "twelve");
    expect(results.swaps.smith2027.dToH.change).toBeCloseTo(after / before - 1, 12);
  });
  test("without --out the file goes to standard output; elsewhere than in a library it says where it belongs", async () => {
    const file = written();
    const { status, out, err } = await runMain(...make(file));
    expect([status, err]).toEqual([0, ""]);
    expect(out).toMatch(/^# %ECSV 1\.0\n/);
    const elsewhere = join(folder(), "rate.ecsv");
    const other = await runMain(...make(file, "--out", elsewhere));
    expect(other.err).toContain("a library takes this file as FOLDER/d-p_gamma-he3/smith2027.ecsv");
    expect(readFileSync(elsewhere, "utf8")).toBe(out);
  });
  test("json holds the text, and how much lies outside the table and between its points", async () => {
    const { status, out } = await runMain(...make(written(), "--format", "json"));
    expect(status).toBe(0);
    const { results } = JSON.parse(out);
    expect(results.path).toBe("d-p_gamma-he3/smith2027.ecsv");
    expect(results.table.columns).toEqual(["T9", "rate", "f_u", "outside", "interpolation"]);
    expect(results.text).toContain("reaction: d + p -> he3");
  });
  test("warns of a claim beyond the energies, of sparse points, of missing errors, of a name that is taken", async () => {
    const beyond = await runMain(...make(written(), "--valid", "0.001,10", "--format", "json"));
    expect(JSON.parse(beyond.out).warnings.join()).toMatch(
      /of the rate at T9 = 10, inside the range claimed, come from/,
    );
    const steep = [0, 0.2, 0.4, 1, 2, 3].map((E) => `${E},${(1e-6 * Math.exp(-4 * E)).toPrecision(5)}`);
    const sparse = await runMain(...make(written(["E_MeV,S_MeV_b", ...steep].join("\n")), "--format", "json"));
    expect(sparse.status).toBe(0);
    const { warnings } = JSON.parse(sparse.out);
    expect(warnings.join()).toMatch(/the points of S leave open/);
    expect(warnings.join()).toMatch(/the table has no errors: f_u = 1/);
    const taken = await runMain(
      ...make(written()).map((word) => (word === "smith2027" ? "mossa2020" : word)),
      "--format",
      "json",
    );
    expect(JSON.parse(taken.out).warnings.join()).toMatch(/has an evaluation mossa2020 of this reaction/);
  });
});

describe("refused: one line, exit status 2", () => {
  const bad = (text: string) => {
    const file = join(folder(), "bad.csv");
    writeFileSync(file, text);
    return file;
  };
  const lines = S_FACTOR.split("\n");
  const cases: readonly (readonly [string, readonly string[], string | RegExp])[] = [
    ["an unknown command", ["rates", "lst"], "unknown command rates lst; did you mean list?"],
    ["an unknown network", ["rates", "list", "--network", "standrad"], "did you mean standard?"],
    [
      "an unknown nuclide",
      ["rates", "list", "--nuclide", "be77"],
      "--nuclide be77: not in nuclides.csv; did you mean be7?",
    ],
    ["an unknown reaction", ["rates", "show", "d(p,g)he33"], "did you mean d-p_gamma-he3?"],
    ["the reverse of a reaction", ["rates", "show", "3He(g,p)d"], /3He\(g,p\)d/],
    ["no reaction", ["rates", "show"], "missing required argument 'reaction'"],
    ["the computed weak rates", ["rates", "show", "n_p"], "the weak rates are computed"],
    ["an unknown evaluation", ["rates", "show", "d(p,g)he3", "--evaluation", "mosa2020"], "did you mean mossa2020?"],
    [
      "an evaluation of a different reaction",
      ["rates", "show", "d(p,g)he3", "--evaluation", "t(d,n)he4=desouza2019"],
      "t-d_n-he4 is another reaction than the d-p_gamma-he3 to show",
    ],
    [
      "a reaction outside the network",
      ["rates", "show", "b11(p,g)c12", "--network", "twelve"],
      "it is in standard, extended, wide",
    ],
    ["a temperature of 0", ["rates", "show", "d(p,g)he3", "--t9", "0.1,0"], "--t9 0: out of range"],
    ["a temperature that is none", ["rates", "show", "d(p,g)he3", "--t9", "0.1,x"], "x: not a finite number"],
    ["nothing to compare", ["rates", "compare", "b11(p,g)c12"], "has one evaluation only, reaclib"],
    [
      "the same evaluation twice",
      ["rates", "compare", "d(p,g)he3", "mossa2020", "mossa2020"],
      "mossa2020 is given twice",
    ],
    ["the one in use against itself", ["rates", "compare", "d(p,g)he3", "iliadis2016"], "is the one in use"],
    [
      "a network without it",
      ["rates", "compare", "li8(a,n)b11", "--network", "twelve"],
      "choose standard, extended, wide",
    ],
    ["an evaluation of another reaction", ["rates", "compare", "d(p,g)he3", "desouza2019"], "desouza2019: unknown"],
    [
      "a chart it does not have",
      ["rates", "compare", "d(p,g)he3", "--chart", "heat=a.png"],
      "there are ratio, sensitivity, abundances",
    ],
    ["a missing folder", ["rates", "check", "/nonexistent"], "/nonexistent: no such folder"],
    ["no citation", make("s.csv").filter((word) => !/citation|Smith/.test(word)), "--citation <text>"],
    ["an empty citation", [...make("s.csv").slice(0, -1), ""], /citation|no such file/],
    ["a missing table", make("/nonexistent/s.csv"), "/nonexistent/s.csv: no such file"],
    ["a range that falls", make("s.csv", "--valid", "3,1"), "two increasing temperatures"],
    ["a range of one", make("s.csv", "--valid", "3"), "two increasing temperatures"],
    [
      "a name with capitals",
      make(bad(S_FACTOR)).map((w) => (w === "smith2027" ? "Smith" : w)),
      "use lower-case letters",
    ],
    ["an unknown basis", make(bad(S_FACTOR), "--basis", "guess"), "accepted are experiment, evaluation, theory"],
    [
      "a reaction that does not conserve A",
      make(bad(S_FACTOR)).map((w) => (w === "d(p,g)he3" ? "d(p,g)he4" : w)),
      "A is not conserved",
    ],
    ["a decay", make(bad(S_FACTOR)).map((w) => (w === "d(p,g)he3" ? "t_he3" : w)), "belongs to two reactants"],
    [
      "energies out of order",
      make(bad([...lines.slice(0, 5), lines[2], ...lines.slice(5)].join("\n"))),
      /bad\.csv:6: energies must increase/,
    ],
    [
      "a negative S",
      make(bad(S_FACTOR.replace("\n0.00000,2", "\n0.00000,-2"))),
      /bad\.csv:2: S_MeV_b = -2.*: must be positive/,
    ],
    [
      "too few points",
      make(bad(lines.slice(0, 3).join("\n"))),
      /bad\.csv:3: 2 points: an S-factor table needs at least 4/,
    ],
    ["a wrong unit", make(bad(S_FACTOR.replace("S_MeV_b", "S_MeV"))), /bad\.csv:1: column S_MeV: unknown unit/],
    ["a unit row of another kind", make(bad(S_FACTOR.replace(lines[0], "E,S,sigma\nMeV,mb,mb"))), /bad\.csv:\d: /],
    ["a table that is a folder", make(tmpdir()), "is a directory; give a file"],
  ];
  test.each(cases)("%s", async (_, args, message) => {
    const { status, out, err } = await runMain(...args);
    expect(out).toBe("");
    expect(err).toMatch(/^emberline: .+\n$/);
    expect(err).toMatch(
      typeof message === "string" ? new RegExp(message.replace(/[.*+?^${}()|[\]\\]/g, "\\$&")) : message,
    );
    expect(status, err).toBe(2);
  });
});

test("units in a row below the header are converted: the rates are those of the same table in MeV", async () => {
  const rows = S_FACTOR.split("\n").slice(1);
  const keV = rows.map((row) => row.split(",").map(Number)).map(([E, S, s]) => `${E * 1e3},${S * 1e6},${s * 1e6}`);
  const [a, b] = [S_FACTOR, ["E,S,sigma", "keV,eV b,eV b", ...keV].join("\n")].map((text) => {
    const file = join(folder(), "s.csv");
    writeFileSync(file, text);
    return file;
  });
  const rates = async (file: string) => {
    const { out } = await runMain(...make(file, "--format", "json"));
    return JSON.parse(out).results.table.rows.map((row: number[]) => row[1]);
  };
  const [first, second] = [await rates(a), await rates(b)];
  for (const [i, rate] of first.entries()) expect(second[i] / rate).toBeCloseTo(1, 9);
});

test("help of the group and of its commands", async () => {
  for (const [args, text] of [
    [["help", "rates"], "compare"],
    [["rates", "--help"], "compare"],
    [["help", "rates", "make"], "--citation <text>"],
    [["rates", "make", "--help"], "--citation <text>"],
  ] as const) {
    const { status, out } = await runMain(...args);
    expect(status).toBe(0);
    expect(out).toContain(text);
  }
});
