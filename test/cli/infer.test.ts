// The command `infer`: keys of the contract, text, table, charts, threads, and every refusal in one line.
import { mkdtempSync, readFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { describe, expect, test } from "vitest";
import { displayWidth, TEXT_WIDTH } from "../../src/output/text.ts";
import { runMain } from "./run-main.ts";

const plain = ["infer", "--network", "twelve"];
const fast = [...plain, "--jobs", "1"];
const json = async (...args: string[]) => {
  const { status, out, err } = await runMain(...fast, ...args, "--format", "json");
  expect(status, err).toBe(0);
  return JSON.parse(out);
};

test("json: estimates in order, chi^2, degrees of freedom, tension of every element", async () => {
  const { results, cosmology, warnings } = await json("--observed", "D/H=2.527e-5±0.030e-5");
  for (const name of ["omegaB", "eta10"]) {
    const e = results.parameters[name];
    const ends = [e.lower95, e.lower68, e.best, e.upper68, e.upper95];
    expect([...ends].sort((a, b) => a - b)).toEqual(ends);
  }
  expect(results.parameters.nEff).toBeUndefined();
  expect(results.parameters.eta10.best / results.parameters.omegaB.best).toBeCloseTo(273.748, 2);
  expect(cosmology.omegaB).toBeCloseTo(results.parameters.omegaB.best, 6);
  expect(results.degreesOfFreedom).toBe(0);
  expect(results.chi2).toBeLessThan(0.01);
  expect(Object.keys(results.tension).sort()).toEqual(["Yp", "dToH", "he3ToH", "li7ToH"]);
  expect(results.tension.he3ToH).toBe(0);
  expect(results.interpolation.inSigma).toBeLessThan(0.02);
  expect(warnings).toEqual([]);
});

test("a Gaussian prior is a datum: it counts in the degrees of freedom and draws the density", async () => {
  const free = (await json()).results;
  const tied = (await json("--prior", "planck2018")).results;
  expect(tied.degreesOfFreedom).toBe(free.degreesOfFreedom + 1);
  expect(tied.parameters.omegaB.mean).toBeGreaterThan(free.parameters.omegaB.mean);
  expect(tied.parameters.omegaB.sigma).toBeLessThan(0.00015);
  expect(tied.priors[0].source).toContain("Planck");
});

test("what cuts the posterior warns, and says which edge", async () => {
  const { warnings } = await json("--prior", "omegaB=0.022:0.03");
  expect(warnings).toHaveLength(1);
  expect(warnings[0]).toMatch(/omegaB runs into the lower edge of its prior, omegaB = 0.022/);
});

test("lithium alone leaves two baryon densities, and says so", async () => {
  const { warnings } = await json("--observed", "7Li/H=1.6e-10±0.3e-10");
  expect(warnings.join(" ")).toMatch(/2 peaks/);
});

test("the text fits the terminal; csv and ecsv hold the table", async () => {
  const { out } = await runMain(...fast, "--free", "omegaB,nEff");
  for (const line of out.split("\n")) expect(displayWidth(line), line).toBeLessThanOrEqual(TEXT_WIDTH);
  expect(out).toContain("Posterior of what is free");
  expect(out).toMatch(/⁷Li\/H .* compared/);
  const csv = (await runMain(...fast, "--format", "csv")).out.split("\n");
  const rows = csv.filter((line) => line !== "" && !line.startsWith("#"));
  expect(rows[0]).toBe("parameter,unit,best,mean,sigma,lower68,upper68,lower95,upper95");
  expect(rows.slice(1).map((row) => row.split(",")[0])).toEqual(["omegaB", "eta10"]);
  const ecsv = (await runMain(...fast, "--format", "ecsv")).out;
  expect(ecsv.startsWith("# %ECSV 1.0")).toBe(true);
  expect(ecsv).toContain("# schema: astropy-2.0");
});

test("a run repeats itself in every digit, on one thread and on two", async () => {
  const numbers = async (jobs: string) =>
    JSON.parse((await runMain(...plain, "--jobs", jobs, "--format", "json")).out).results;
  const first = await numbers("1");
  expect(await numbers("1")).toEqual(first);
  expect(await numbers("2")).toEqual(first);
});

describe("charts", () => {
  const folder = mkdtempSync(join(tmpdir(), "emberline-infer-"));
  test("whole, or by name", async () => {
    const files = ["a.png", "b.svg", "c.pdf"].map((name) => join(folder, name));
    const args = ["--chart", files[0], "--chart", `contours=${files[1]}`, "--chart", `elements=${files[2]}`];
    expect((await runMain(...fast, "--free", "omegaB,nEff", ...args)).status).toBe(0);
    expect(readFileSync(files[0]).subarray(1, 4).toString("latin1")).toBe("PNG");
    expect(readFileSync(files[1], "utf8")).toContain("<svg");
    expect(readFileSync(files[2]).subarray(0, 4).toString("latin1")).toBe("%PDF");
  });
  test("contours of one parameter are refused", async () => {
    const { status, err } = await runMain(...fast, "--chart", `contours=${join(folder, "d.png")}`);
    expect(status).toBe(2);
    expect(err).toContain("--free omegaB,nEff");
  });
});

describe("bad input is refused in one line that names it", () => {
  test.each([
    [["--observed", "nosuch=1+-1"], "nosuch"],
    [["--observed", "D/H=2.5e-5+-0"], "error must be positive"],
    [["--observed", "D/H=2.5e-5+--1e-7"], "error must be positive"],
    [["--observed", "D/H=x"], "D/H=x"],
    [["--observed", "D/H=2.5e-5±1e-7", "--observed", "D/H=2.6e-5±1e-7"], "given twice"],
    [["--observed", "nosuchset"], "sets are"],
    [["--prior", "omegaB=1"], "VALUE±SIGMA"],
    [["--prior", "omegaB=1±0.1"], "outside what omegaB may be"],
    [["--prior", "nEff=3±0.1"], "not free"],
    [["--free", "omegaB,nEff", "--prior", "nEff=-1:4"], "0 to 30"],
    [["--free", "h0"], "cannot be free"],
    [["--free", "omegaB,nEff", "--n-eff", "3"], "nEff is free here"],
    [["--omega-b", "0.022"], "omegaB is free here"],
    [["--eta10", "6"], "omegaB is free here"],
    [["--seed", "1.5"], "whole number"],
    [["--seed", "-1"], "--seed -1"],
    [["--samples", "10"], "unknown option"],
  ])("%s", async (args, message) => {
    const { status, out, err } = await runMain(...fast, ...args);
    expect(status, err).toBe(2);
    expect(out).toBe("");
    expect(err.trim().split("\n")).toHaveLength(1);
    expect(err).toContain(message);
  });
});
