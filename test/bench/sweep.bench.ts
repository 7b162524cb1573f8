/** Benchmarks of commands that run many cases, from the shell: wall time of the whole process, answers checked. */
import { readFileSync } from "node:fs";
import { join } from "node:path";
import { bench, describe } from "vitest";
import { builtCommand, emberline, workFolder } from "../cli/built-command.ts";

const folder = workFolder();
await builtCommand();
/** Each is a process of a second or more: once is enough. */
const once = { iterations: 1, warmupIterations: 0, warmupTime: 0, time: 0 };

async function lines(args: readonly string[], wanted: number): Promise<void> {
  const { status, err } = await emberline(folder, [...args, "--format", "csv", "--quiet", "--out", "out.csv"]);
  const rows = readFileSync(join(folder, "out.csv"), "utf8").match(/^[^#\n]/gm)?.length ?? 0;
  if (status !== 0 || rows !== wanted + 1) throw new Error(`benchmark failed: status ${status}, ${rows} rows: ${err}`);
}

describe("scan of 200 values of eta10, 1 to 100", () => {
  const axis = ["scan", "--over", "eta10=1:100:200log"];
  bench(
    "twelve, errors none (target 0.5 s)",
    () => lines([...axis, "--network", "twelve", "--errors", "none"], 200),
    once,
  );
  bench("standard with bands (target 5 s on two cores)", () => lines(axis, 200), once);
  bench("the same on one core", () => lines([...axis, "--jobs", "1"], 200), once);
});

describe("grid of 100 x 20, standard, errors none", () => {
  const grid = ["grid", "--over", "omegaB=0.018:0.027:100", "--over", "deltaNEff=-2:2:20", "--errors", "none"];
  bench("on all cores (target 60 s on two)", () => lines(grid, 2000), once);
});

describe("batch of 10000 lines, twelve, errors none", () => {
  const input = Array.from({ length: 10000 }, (_, id) => {
    const request = { id, command: "abundances", network: "twelve", errors: "none", omegaB: 0.02 + 1e-7 * id };
    return `${JSON.stringify(request)}\n`;
  }).join("");
  for (const jobs of ["1", "2"])
    bench(
      `${jobs} jobs`,
      async () => {
        const { out, status } = await emberline(folder, ["batch", "--jobs", jobs], input);
        if (status !== 0 || out.split("\n").length !== 10001) throw new Error("benchmark failed: answers are missing");
      },
      once,
    );
});
