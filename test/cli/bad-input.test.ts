// Bad input: exit status 2, one line on standard error that names option or file, value and remedy, nothing on standard output.
import { cpSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { describe, expect, test } from "vitest";
import { runMain } from "./run-main.ts";

/** Runs the line and checks what every refusal has in common; returns its one line. */
async function refused(...args: string[]): Promise<string> {
  const { status, out, err } = await runMain(...args);
  expect(out).toBe("");
  expect(err).toMatch(/^emberline: .+\n$/);
  expect(err).not.toContain("    at ");
  expect(status, err).toBe(2);
  return err.trim();
}

describe("a value that is no number, or out of range, is refused with what is accepted", () => {
  const numbers = [
    ["--omega-b", "0.0001 to 0.4"],
    ["--eta10", "0.0274 to 109.5"],
    ["--n-eff", "0 to 30"],
    ["--delta-n", "-3.044 to 26.956"],
    ["--tau-n", "500 to 1500 s"],
    ["--xi-e", "-3 to 3"],
    ["--xi-mu", "-3 to 3"],
    ["--xi-tau", "-3 to 3"],
    ["--t-cmb", "2 to 4 K"],
    ["--h0", "20 to 150 km/s/Mpc"],
    ["--tolerance", "1e-12 to 0.01"],
    ["--samples", "0 to 1000000000"],
  ] as const;
  test.each(numbers)("%s", async (option, accepted) => {
    for (const value of ["nan", "inf", "-Infinity", "abc", "0.02x", "", "-100", "1e10"]) {
      const line = await refused(option, value);
      expect(line).toContain(option);
      if (value !== "") expect(line).toContain(value);
      expect(line).toContain(accepted);
    }
  });
  test.each(["--omega-b", "--eta10", "--tau-n", "--t-cmb", "--tolerance", "--h0"])("%s 0", async (option) => {
    expect(await refused(option, "0")).toContain(`${option} 0: out of range`);
  });
});

test.each([
  ["an error that is no number", ["--tau-n", "878.4±x"], "--tau-n 878.4±x: the error after ±"],
  ["a negative error", ["--tau-n", "878.4±-1"], "must be a number of 0 or more"],
  ["two errors", ["--omega-b", "0.02±0.001±0.001"], "more than one error"],
  ["both baryon densities", ["--omega-b", "0.02", "--eta10", "6"], "'--eta10 <x>'; give one of them"],
  ["both neutrino numbers", ["--n-eff", "3", "--delta-n", "1"], "'--delta-n <x>'; give one of them"],
  ["an unknown network", ["--network", "nosuch"], "--network nosuch: unknown; accepted are extended, standard, twelve"],
  ["an unknown reaction", ["--scale", "nosuch=2"], "nosuch: not a reaction"],
  ["a reaction outside the network", ["--network", "twelve", "--scale", "b11-p_gamma-c12=2"], "b11-p_gamma-c12"],
  ["an unknown evaluation", ["--evaluation", "d-p_gamma-he3=nosuch"], "nosuch: unknown; accepted are"],
  ["an evaluation of an unknown reaction", ["--evaluation", "x=y"], "x: not a reaction"],
  ["no evaluation", ["--evaluation", "d-p_gamma-he3"], "write R=NAME"],
  ["an unknown option", ["--omga-b", "0.02"], "'--omga-b' (Did you mean --omega-b?)"],
  ["an option without its value", ["--omega-b"], "argument missing; write the value after it"],
  ["a stray word", ["abundances", "0.02"], "too many arguments"],
  ["an unknown command", ["abundancs"], "unknown command abundancs; did you mean abundances?"],
  ["help of an unknown command", ["help", "nosuch"], "unknown command nosuch"],
  ["an unknown format", ["--format", "xml"], "--format xml: unknown; accepted are text, json, csv, ecsv"],
  ["an unknown correction", ["--without", "nosuch"], "--without nosuch: unknown; accepted are coulomb"],
  ["a scale of 0", ["--scale", "d-p_gamma-he3=0"], "the factor must be 0.000001 to 1000000"],
  ["a negative scale", ["--scale", "d-p_gamma-he3=-1"], "the factor must be 0.000001 to 1000000"],
  ["a scale that is no number", ["--scale", "d-p_gamma-he3=big"], "big: not a finite number"],
  ["the same scale twice", ["--scale", "d(p,g)he3=2", "--scale", "d(p,g)he3=3"], "given twice"],
  ["sampling without samples", ["--errors", "sampled"], "--errors sampled needs samples: add --samples N"],
  ["half a sample", ["--samples", "1.5"], "--samples 1.5: must be a whole number"],
  ["half a seed", ["--samples", "5", "--seed", "0.5"], "--seed 0.5: must be a whole number"],
  [
    "a value for one reaction in two spellings",
    ["--scale", "d(p,g)he3=2", "--scale", "d-p_gamma-he3=3"],
    "--scale d-p_gamma-he3: d-p_gamma-he3 is given twice",
  ],
  ["two baryon densities", ["--omega-b", "0.02", "--omega-b", "0.03"], "--omega-b 0.02 and 0.03: given twice"],
  ["two networks", ["--network", "twelve", "--network", "wide"], "--network twelve and wide: given twice"],
  ["samples without errors", ["--errors", "none", "--samples", "10"], "--errors none and --samples 10: "],
  ["samples with linear errors", ["--errors", "linear", "--samples", "10"], "--errors linear and --samples 10: "],
  ["an error that the option does not take", ["--n-eff", "3±0.1"], "--n-eff 3±0.1: takes no error"],
  ["an error of helium", ["recombination", "--yp", "0.25+-0.01"], "--yp 0.25+-0.01: takes no error"],
  ["too much helium", ["recombination", "--yp", "2"], "--yp 2: out of range; accepted are 0 to 0.99"],
  [
    "an unknown evaluation, by its option",
    ["--evaluation", "d(p,g)he3=bar"],
    "--evaluation d-p_gamma-he3=bar: unknown",
  ],
  ["an unknown reaction, by its option", ["--scale", "foo=2"], "--scale foo: not a reaction"],
  ["an axis that is no axis", ["scan", "--over", "eta10=a"], "--over eta10=a: "],
  [
    "a part beyond the parts",
    ["grid", "--over", "eta10=1:2:3", "--over", "tauN=870:880:2", "--part", "9/2", "--format", "csv"],
    "--part 9/2: ",
  ],
  ["a part that is no file", ["grid", "--join", "/nonexistent"], "--join /nonexistent: cannot be read (no such file)"],
  ["an unknown observation", ["infer", "--observed", "foo=1"], "--observed foo=1: "],
  [
    "an abundance that the network does not make",
    ["infer", "--observed", "6Li/H=1e-14±1e-14", "--network", "twelve"],
    "--observed li6ToH: network twelve does not make it",
  ],
  ["an unknown free parameter", ["infer", "--free", "foo"], "--free foo: foo cannot be free"],
  ["an unknown prior", ["infer", "--prior", "foo=1"], "--prior foo=1: "],
  ["a fixed parameter that is free", ["infer", "--omega-b", "0.022"], "--omega-b 0.022: omegaB is free"],
  ["a folder to check that is none", ["rates", "check", "/nonexistent"], "emberline: /nonexistent: no such folder"],
  ["a blank network", ["--network", " "], '--network " ": unknown'],
  ["a chart of the budget", ["recombination", "--budget", "--chart", "a.png"], "--budget and --chart: "],
  ["an unknown option of scan", ["scan", "--foo"], "see emberline help scan"],
  ["an unknown option of rates list", ["rates", "list", "--foo"], "see emberline help rates list"],
  ["no worker", ["--jobs", "0"], "--jobs 0: must be a whole number from 1"],
  ["a chart of another kind", ["history", "--chart", "a.gif"], "must end in .png, .svg or .pdf"],
  [
    "a chart the command does not have",
    ["history", "--chart", "heat=a.png"],
    "there are temperature, weak, abundances",
  ],
  ["an option of another command", ["history", "--samples", "5"], "unknown option '--samples'"],
])("%s is refused", async (_, args, message) => {
  expect(await refused(...args)).toContain(message);
});

describe("an expansion is refused that", () => {
  test.each([
    ["does not parse", "1 +", "expansion"],
    ["is empty", "", '--expansion "": is empty'],
    ["is a list", "[1, 2]", "a list in brackets is not accepted"],
    ["names something unknown", "nosuch + 1", "nosuch is unknown; known are T, TMeV, t, H"],
    ["is negative", "-1", "positive and finite"],
    ["is zero", "0", "positive and finite"],
    ["is not a number", "0/0", "positive and finite"],
    ["turns negative somewhere", "1 - T/1e10", "positive and finite"],
    ["is infinite somewhere", "1/(T-T)", "positive and finite"],
    ["calls a function outside the list", 'import("fs")', "expansion"],
    ["reaches into an object", "T.constructor", "expansion"],
    ["assigns", "T = 3", "expansion"],
    ["defines a function", "f(x) = x", "expansion"],
  ])("%s", async (_, expression, message) => {
    const line = await refused("--network", "twelve", "--errors", "none", "--expansion", expression);
    expect(line).toContain("--expansion");
    expect(line).toContain(message);
  });
});

describe("a file that cannot be written is refused before the calculation, and nothing remains", () => {
  test.each([
    ["--out", "none/result.json"],
    ["--out", "."],
    ["--chart", "none/a.png"],
  ])("%s %s", async (option, path) => {
    const folder = mkdtempSync(join(tmpdir(), "emberline-out-"));
    const line = await refused("history", "--network", "twelve", option, join(folder, path));
    expect(line).toContain("cannot be written");
    expect(line).toContain("choose another file or folder");
    expect(readdirSync(folder)).toEqual([]);
  });
});

describe("a rate library is refused that", () => {
  const file = "d-p_gamma-he3/iliadis2016.ecsv";
  const ours = resolve(import.meta.dirname, "../../rates");
  const original = readFileSync(join(ours, file), "utf8");
  const cases: readonly (readonly [string, (text: string) => string])[] = [
    ["is empty", () => ""],
    ["is truncated in its header", (text) => text.slice(0, 300)],
    ["is truncated in a row", (text) => text.trimEnd().replace(/ [^ ]+ [^ ]+$/, "")],
    ["has a rate of zero", (text) => text.replace(/\n(0\.\d+) [^ ]+ /, "\n$1 0 ")],
    ["has a word for a number", (text) => text.replace(/\n(0\.\d+) [^ ]+ /, "\n$1 many ")],
    ["repeats a temperature", (text) => text.replace(/\n(0\.\d+ [^\n]+)\n/, "\n$1\n$1\n")],
    ["is labelled with another reaction", (text) => text.replace(/reaction: .*/, "reaction: t + d -> he4 + n")],
    ["does not conserve A", (text) => text.replace(/reaction: .*/, "reaction: d + p -> he4")],
    ["has no citation", (text) => text.replace(/# {3}citation: .*\n/, "")],
    ["is not text", (text) => `\0\u0001${text}`],
  ];
  test.each(cases)("%s", async (_, damage) => {
    const folder = mkdtempSync(join(tmpdir(), "emberline-rates-"));
    mkdirSync(join(folder, "d-p_gamma-he3"));
    const damaged = damage(original);
    expect(damaged).not.toBe(original);
    writeFileSync(join(folder, file), damaged);
    const line = await refused("--network", "twelve", "--errors", "none", "--rates", folder);
    expect(line).toMatch(/d-p_gamma-he3\/iliadis2016\.ecsv(:\d+)?: /);
  });

  test("is a missing folder", async () => {
    expect(await refused("--rates", "/nonexistent")).toContain("--rates /nonexistent: no such folder");
  });

  test("holds nothing of a rate library", async () => {
    const folder = mkdtempSync(join(tmpdir(), "emberline-rates-"));
    expect(await refused("--rates", folder)).toContain(`--rates ${folder}: holds no reaction folder`);
  });

  test("names a reaction in its network that has no file", async () => {
    const folder = mkdtempSync(join(tmpdir(), "emberline-rates-"));
    mkdirSync(join(folder, "networks"));
    cpSync(join(ours, "networks/twelve.csv"), join(folder, "networks/twelve.csv"));
    const network = readFileSync(join(folder, "networks/twelve.csv"), "utf8");
    writeFileSync(join(folder, "networks/twelve.csv"), network.replace("iliadis2016", "nosuch1900"));
    expect(await refused("--network", "twelve", "--rates", folder)).toContain("nosuch1900");
  });
});

test("what is legal but outside what the physics supports gives an answer with a warning that says why", async () => {
  const { status, out, err } = await runMain(
    ...["--network", "twelve", "--errors", "none", "--delta-n", "-2", "--format", "json"],
  );
  expect(status).toBe(0);
  const { warnings } = JSON.parse(out);
  expect(warnings).toHaveLength(1);
  expect(warnings[0]).toContain("deltaNEff = -2");
  expect(err).toBe(`emberline: warning: ${warnings[0]}\n`);
});
