// The command `budget`: keys of the contract, shares that add to one, the three tables, the text's width, charts, refusals.
import { mkdtempSync, readFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { expect, test } from "vitest";
import { displayWidth, TEXT_WIDTH } from "../../src/output/text.ts";
import { runMain } from "./run-main.ts";

const fast = ["budget", "--network", "twelve"];
const ABUNDANCES = ["Yp", "dToH", "he3ToH", "li7ToH"];

test("json holds sensitivities to every parameter and rate, and variances that add to 1", async () => {
  const { status, out } = await runMain(...fast, "--omega-b", "0.02237±0.00015", "--format", "json");
  expect(status).toBe(0);
  const { results, provenance } = JSON.parse(out);
  const reactions = provenance.rates.map((rate: { reaction: string }) => rate.reaction);
  expect(reactions).toHaveLength(12);
  for (const name of ABUNDANCES) {
    expect(Object.keys(results.sensitivities[name])).toEqual(["omegaB", "tauN", "nEff", "G", "n_p", ...reactions]);
    expect(Object.keys(results.variance[name])).toEqual(["tauN", ...reactions, "omegaB"]);
    const shares = Object.values<number>(results.variance[name]);
    expect(Math.abs(shares.reduce((a, b) => a + b, 0) - 1)).toBeLessThan(1e-12);
    expect(Math.min(...shares)).toBeGreaterThanOrEqual(0);
    expect(results.abundances[name].sigma).toBeGreaterThan(0);
  }
  // A nuclide that the network does not make has no logarithm and is left out.
  expect(results.sensitivities.li6ToH).toBeUndefined();
  const bases = Object.fromEntries(results.sources.map((s: { name: string; basis: string }) => [s.name, s.basis]));
  expect(bases).toMatchObject({ "p-n_gamma-d": "published", "he3-n_p-t": "assumed", omegaB: "given" });
  for (const source of results.sources) expect(source.citation.length, source.name).toBeGreaterThan(4);
});

test("errors and correlations are those of abundances", async () => {
  const { results: budget } = JSON.parse((await runMain(...fast, "--format", "json")).out);
  const { results } = JSON.parse((await runMain("--network", "twelve", "--format", "json")).out);
  const at = (order: string[], name: string) => order.indexOf(name);
  for (const a of ABUNDANCES) {
    expect(budget.abundances[a].value).toBe(results.abundances[a].value);
    expect(Math.abs(budget.abundances[a].sigma / results.abundances[a].sigma - 1)).toBeLessThan(1e-9);
    for (const b of ABUNDANCES) {
      const ours = budget.correlation.matrix[at(budget.correlation.order, a)][at(budget.correlation.order, b)];
      const theirs = results.correlation.matrix[at(results.correlation.order, a)][at(results.correlation.order, b)];
      expect(Math.abs(ours - theirs)).toBeLessThan(1e-9);
    }
  }
});

test("an error of the baryon density of 0.7 % dominates D/H, as its sensitivity says", async () => {
  const { results } = JSON.parse((await runMain(...fast, "--omega-b", "0.02237±0.00015", "--format", "json")).out);
  const { value, sigma } = results.abundances.dToH;
  const expected = (results.sensitivities.dToH.omegaB * 0.00015) / 0.02237;
  expect(Math.abs(results.variance.dToH.omegaB / (expected / (sigma / value)) ** 2 - 1)).toBeLessThan(0.01);
});

test("the text fits the terminal, opens with what to measure next, and marks what is assumed", async () => {
  const { status, out } = await runMain(...fast);
  expect(status).toBe(0);
  const lines = out.split("\n");
  for (const line of lines) expect(displayWidth(line), line).toBeLessThanOrEqual(TEXT_WIDTH);
  expect(lines[2]).toMatch(/^What to measure better next/);
  expect(out).toContain("D/H: theory is the less certain side; the rate of d(p,γ)³He comes first.");
  expect(out).toMatch(/³He\(n,p\)t\*/);
});

test("csv has one row for every parameter and reaction", async () => {
  const { out } = await runMain(...fast, "--format", "csv");
  const [head, ...rows] = out.split("\n").filter((line) => line !== "" && !line.startsWith("#"));
  expect(head).toContain("dln_dToH_dln_p");
  expect(rows.map((row) => row.split(",")[0]).slice(0, 5)).toEqual(["omegaB", "tauN", "nEff", "G", "n_p"]);
  expect(rows).toHaveLength(5 + 12);
});

test("the chart is drawn whole or by the name of an element", async () => {
  const folder = mkdtempSync(join(tmpdir(), "emberline-budget-"));
  const files = ["a.png", "b.svg", "c.pdf"].map((name) => join(folder, name));
  const args = ["--chart", files[0], "--chart", `lithium=${files[1]}`, "--chart", `deuterium=${files[2]}`];
  expect((await runMain(...fast, ...args)).status).toBe(0);
  const starts = files.map((file) => readFileSync(file).subarray(1, 4).toString("latin1"));
  expect(starts).toEqual(["PNG", expect.any(String), "PDF"]);
  expect(readFileSync(files[1], "utf8")).toContain("<svg");
});

test.each([
  ["--chart", "carbon=x.png"],
  ["--samples", "10"],
  ["--tau-n", "878.4±-1"],
])("%s %s is refused", async (...args) => {
  const { status, out, err } = await runMain(...fast, ...args);
  expect(status).toBe(2);
  expect(out).toBe("");
  expect(err.trim().split("\n")).toHaveLength(1);
});
