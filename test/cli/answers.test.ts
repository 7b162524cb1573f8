// Answers: default command, formats, files, charts, help, exit status; values are tested elsewhere.
import { spawnSync } from "node:child_process";
import { mkdtempSync, readdirSync, readFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { expect, test } from "vitest";
import { describeError } from "../../src/cli/program.ts";
import { CalculationError, InputError } from "../../src/numerics/check.ts";
import { VERSION } from "../../src/version.ts";
import { runMain } from "./run-main.ts";

const root = resolve(import.meta.dirname, "../..");
const fast = ["--network", "twelve", "--errors", "none"];

/** The one value that differs from run to run. */
function withoutTime(text: string): string {
  return text.replace(/"wall_ms": [\d.]+/, '"wall_ms": 0').replace(/, \d+ ms/, "");
}

test("the version is the package's", () => {
  expect(VERSION).toBe(JSON.parse(readFileSync(join(root, "package.json"), "utf8")).version);
});

test("no command is abundances, and a run repeats itself in every digit", async () => {
  const [first, second] = [
    await runMain("abundances", ...fast, "--format", "json"),
    await runMain(...fast, "--format", "json"),
  ];
  expect(first.status).toBe(0);
  expect(first.err).toBe("");
  expect(withoutTime(second.out)).toBe(withoutTime(first.out));
  const answer = JSON.parse(first.out);
  expect(Object.keys(answer)).toEqual([
    "command",
    "version",
    "cosmology",
    "results",
    "provenance",
    "solver",
    "warnings",
  ]);
  expect(answer.command).toBe("abundances");
  expect(answer.solver.wall_ms).toBeGreaterThan(0);
  expect(answer.cosmology).toMatchObject({ omegaB: 0.02237, nEff: 3.044, deltaNEff: 0, network: "twelve" });
});

test("csv and ecsv carry the digits of json", async () => {
  const { abundances } = JSON.parse((await runMain(...fast, "--format", "json")).out).results;
  for (const format of ["csv", "ecsv"]) {
    const { out } = await runMain(...fast, "--format", format);
    const [head, row, ...rest] = out.split("\n").filter((line) => !line.startsWith("#"));
    expect(rest).toEqual([""]);
    const cells = row.split(",").map(Number);
    const column = head.split(",");
    for (const name of ["Yp", "dToH", "li7ToH"]) expect(cells[column.indexOf(name)]).toBe(abundances[name].value);
  }
});

test("what was scaled and chosen stands in every format, by its id", async () => {
  const chosen = ["--scale", "d(p,g)he3=1.1", "--scale", "n_p=1.01", "--evaluation", "d(p,g)he3=mossa2020"];
  const csv = (await runMain(...fast, ...chosen, "--format", "csv")).out;
  expect(csv).toContain("\n# scales: d-p_gamma-he3=1.1 n_p=1.01\n");
  expect(csv).toContain("\n# evaluations: d-p_gamma-he3=mossa2020\n");
  const ecsv = (await runMain(...fast, ...chosen, "--format", "ecsv")).out;
  expect(ecsv).toContain('\n#   scales: "d-p_gamma-he3=1.1 n_p=1.01"\n');
  const scan = await runMain("scan", "--over", "eta10=5,6", ...fast, ...chosen, "--format", "csv");
  expect(scan.out).toContain("\n# scales: d-p_gamma-he3=1.1 n_p=1.01\n");
  expect((await runMain(...fast, ...chosen)).out).toContain("d(p,γ)³He × 1.1");
});

test("an abundance of nuclides that the network does not hold is in no format; a larger network has it", async () => {
  const names = async (...args: string[]) =>
    Object.keys(JSON.parse((await runMain(...args, "--format", "json")).out).results.abundances);
  expect(await names(...fast)).toEqual(["Yp", "YpMass", "dToH", "tToH", "he3ToH", "li7ToH"]);
  expect(await names("--errors", "none")).toContain("li6ToH");
  for (const command of [[], ["scan", "--over", "eta10=5,6"]]) {
    const { out } = await runMain(...command, ...fast, "--format", "csv");
    expect(out).toContain("he3ToH,li7ToH");
    expect(out).not.toContain("li6ToH");
  }
});

test("--out holds what standard output would, and nothing else is printed", async () => {
  const file = join(mkdtempSync(join(tmpdir(), "emberline-out-")), "a.json");
  const { status, out, err } = await runMain(...fast, "--format", "json", "--out", file);
  expect([status, out, err]).toEqual([0, "", ""]);
  expect(withoutTime(readFileSync(file, "utf8"))).toBe(withoutTime((await runMain(...fast, "--format", "json")).out));
});

test("trade notation and id of a reaction are the same reaction, and the scale is on record", async () => {
  const answers = [];
  for (const name of ["d(p,g)he3", "d-p_gamma-he3"])
    answers.push(JSON.parse((await runMain(...fast, "--scale", `${name}=1.02`, "--format", "json")).out));
  expect(answers[0].results).toEqual(answers[1].results);
  expect(answers[0].provenance.rates).toContainEqual(
    expect.objectContaining({ reaction: "d-p_gamma-he3", scale: 1.02 }),
  );
});

test("history writes its text and its charts, all together and by name", async () => {
  const folder = mkdtempSync(join(tmpdir(), "emberline-charts-"));
  const { status, out, err } = await runMain(
    ...["history", "--network", "twelve", "--chart", join(folder, "all.png")],
    ...["--chart", `weak=${join(folder, "weak.svg")}`, "--chart", `abundances=${join(folder, "nuclides.pdf")}`],
  );
  expect([status, err]).toEqual([0, ""]);
  expect(out).toContain("weak freeze-out");
  expect(readdirSync(folder).sort()).toEqual(["all.png", "nuclides.pdf", "weak.svg"]);
});

test("errors become one line and their exit status", () => {
  expect(describeError(new InputError("x", "two\n  lines"))).toEqual({ line: "emberline: two lines", status: 2 });
  expect(describeError(new CalculationError("x", "T = 3: failed"))).toEqual({
    line: "emberline: T = 3: failed",
    status: 1,
  });
  expect(describeError(new TypeError("x is undefined"))).toEqual({
    line: "emberline: the calculation failed: TypeError: x is undefined; --debug shows where",
    status: 1,
  });
});

test("a stack trace appears with --debug only", async () => {
  expect((await runMain("--omega-b", "0")).err).not.toContain("    at ");
  expect((await runMain("--omega-b", "0", "--debug")).err).toContain("    at ");
});

test("help and version go to standard output of the real process, status 0; bad input to standard error, status 2", () => {
  const run = (...args: string[]) =>
    spawnSync(process.execPath, [join(root, "node_modules/tsx/dist/cli.mjs"), join(root, "src/cli/main.ts"), ...args], {
      encoding: "utf8",
    });
  const help = run("--help");
  expect([help.status, help.stderr]).toEqual([0, ""]);
  expect(help.stdout).toContain("  abundances");
  const refused = run("--nosuch");
  expect([refused.status, refused.stdout]).toEqual([2, ""]);
  expect(refused.stderr).toContain("--nosuch");
});
