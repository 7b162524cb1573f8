// Monte Carlo from the command line: the same bytes on any number of threads, after an interruption, and in the library.
import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { expect, test } from "vitest";
import { prepare } from "../../src/node/index.ts";
import { builtCommand, start, workFolder } from "./built-command.ts";
import { runMain } from "./run-main.ts";

const samples = ["--network", "twelve", "--samples", "1500", "--seed", "7", "--quiet", "--format", "json"];
const withoutTime = (text: string) => text.replace(/"wall_ms": [\d.]+/, "");

test("one thread, two threads and the library give the same numbers", async () => {
  const [one, two] = [await runMain(...samples, "--jobs", "1"), await runMain(...samples, "--jobs", "2")];
  expect(one.status, one.err).toBe(0);
  expect(withoutTime(two.out)).toBe(withoutTime(one.out));
  const model = await prepare({ network: "twelve", samples: 1500, seed: 7 });
  const { abundances, quantiles, sampling } = model.abundances();
  expect(JSON.parse(one.out).results).toMatchObject({ abundances, quantiles, sampling });
}, 120_000);

test("quantiles in order, errors of the sigmas, the seed in the provenance", async () => {
  const { results, provenance } = JSON.parse((await runMain(...samples, "--jobs", "1")).out);
  for (const name of ["Yp", "dToH", "he3ToH", "li7ToH"]) {
    const q = ["0.025", "0.16", "0.5", "0.84", "0.975"].map((level) => results.quantiles[name][level]);
    expect([...q].sort((a, b) => a - b)).toEqual(q);
    const known = results.sampling.sigmaError[name] / results.abundances[name].sigma;
    expect(known).toBeGreaterThan(0);
    // Independent samples would know it to 1/sqrt(2 n) = 1.8 %.
    expect(known).toBeLessThan(0.018);
  }
  expect(results.sampling.samples).toBe(1500);
  expect(provenance.seed).toBe(7);
});

test("interrupted and resumed, the output is that of an uninterrupted run", async () => {
  const main = await builtCommand();
  const folder = workFolder();
  const args = ["abundances", ...samples.map((word) => (word === "1500" ? "6000" : word)), "--jobs", "1"];
  const whole = start(process.execPath, [main, ...args, "--out", "whole.json"], folder);
  expect((await whole.finished).status).toBe(0);
  const run = start(process.execPath, [main, ...args, "--out", "cut.json"], folder);
  const checkpoint = join(folder, "cut.json.checkpoint");
  while (!existsSync(checkpoint) && run.child.exitCode === null)
    await new Promise((resolve) => setTimeout(resolve, 20));
  run.child.kill("SIGINT");
  const { status, err } = await run.finished;
  expect(status, err).toBe(130);
  expect(err).toMatch(
    /finished pieces are kept in .*cut\.json\.checkpoint; go on with: emberline abundances .* --resume/,
  );
  expect(existsSync(join(folder, "cut.json"))).toBe(false);
  const resumed = start(process.execPath, [main, ...args, "--out", "cut.json", "--resume"], folder);
  expect((await resumed.finished).status).toBe(0);
  const read = (name: string) => withoutTime(readFileSync(join(folder, name), "utf8"));
  expect(read("cut.json")).toBe(read("whole.json"));
  expect(existsSync(checkpoint)).toBe(false);
}, 120_000);

test.each([
  ["--samples", "1", "need at least 2"],
  ["--samples", "30000000", "at most 20000000 fit into memory"],
  ["--samples", "-5", "0 to 1000000000"],
  ["--samples", "2.5", "whole number"],
  ["--seed", "x", "--seed x: not a"],
])("%s %s is refused", async (option, value, message) => {
  const { status, out, err } = await runMain("--network", "twelve", option, value);
  expect(status).toBe(2);
  expect(out).toBe("");
  expect(err.trim().split("\n")).toHaveLength(1);
  expect(err).toContain(message);
});
