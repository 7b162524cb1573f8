// batch from the shell: order, any number of jobs, closed pipes, signals, memory.
import { readFileSync } from "node:fs";
import { beforeAll, expect, test } from "vitest";
import { builtCommand, emberline, start, workFolder } from "./built-command.ts";

const folder = workFolder();
let main: string;
beforeAll(async () => {
  main = await builtCommand();
});

const request = (i: number) =>
  JSON.stringify({ id: i, command: "abundances", network: "twelve", errors: "none", omegaB: 0.02 + 1e-6 * i });
const requests = (count: number) => Array.from({ length: count }, (_, i) => `${request(i)}\n`).join("");

test("the contract's four lines get their four answers", async () => {
  const lines = [
    request(0),
    "{broken",
    JSON.stringify({ id: 3, command: "abundances", nosuch: 1 }),
    JSON.stringify({ command: "scan", over: ["eta10=4,5"], network: "twelve", errors: "none" }),
  ];
  const { status, out, err } = await emberline(folder, ["batch"], `${lines.join("\n")}\n`);
  const [first, second, third, fourth] = out
    .trim()
    .split("\n")
    .map((line) => JSON.parse(line));
  expect([status, err]).toEqual([0, ""]);
  expect(first).toMatchObject({ id: 0, command: "abundances", results: { abundances: { Yp: {} } } });
  expect(second).toMatchObject({ line: 2, error: { code: "json" } });
  expect(third).toMatchObject({ id: 3, line: 3, error: { message: expect.stringContaining("nosuch") } });
  expect(fourth.results.table.rows.length).toBe(2);
});

test("with workers and without, thousands of answers are the same bytes, in bounded memory", async () => {
  const input = requests(3000);
  const one = await emberline(folder, ["batch", "--jobs", "1"], input);
  const run = start(process.execPath, [main, "batch", "--jobs", "2"], folder, input);
  let peak = 0;
  const watch = setInterval(() => {
    try {
      const status = readFileSync(`/proc/${run.child.pid}/status`, "utf8");
      peak = Math.max(peak, Number(/VmHWM:\s*(\d+)/.exec(status)?.[1] ?? 0));
    } catch {
      // Ended, or a system without /proc.
    }
  }, 100);
  const two = await run.finished;
  clearInterval(watch);
  expect(two.status).toBe(0);
  expect(two.out === one.out).toBe(true);
  expect(one.out.split("\n").length - 1).toBe(3000);
  expect(peak / 1024, "MB").toBeLessThan(400);
});

test("a reader that has enough ends it without a word", async () => {
  const command = `seq 1 20000 | sed 's/.*/{"id":&,"command":"nosuch"}/' | '${process.execPath}' '${main}' batch; echo "status $?" >&2`;
  const { err, out } = await start("/bin/bash", ["-c", `(${command}) | head -n 3`], folder).finished;
  expect(
    out
      .split("\n")
      .filter((line) => line !== "")
      .map((line) => JSON.parse(line).id),
  ).toEqual([1, 2, 3]);
  expect(err.trim()).toBe("status 0");
});

test.each(["SIGINT", "SIGTERM"] as const)("%s ends it after a whole line, with status 130", async (signal) => {
  const run = start(process.execPath, [main, "batch"], folder, requests(20000));
  await new Promise((resolve) => run.child.stdout?.once("data", resolve));
  run.child.kill(signal);
  const { status, out, err } = await run.finished;
  expect(status).toBe(130);
  expect(err).toMatch(/^emberline: interrupted: \d+ answers were written/);
  expect(out.endsWith("}\n")).toBe(true);
  for (const line of out.trim().split("\n")) JSON.parse(line);
});

test("an input that is no text, and one without a last line end, end well", async () => {
  const { status, out } = await emberline(folder, ["batch"], `\u0000\u0001\n${request(5)}`);
  const found = out
    .trim()
    .split("\n")
    .map((line) => JSON.parse(line));
  expect(status).toBe(0);
  expect(found).toMatchObject([
    { line: 1, error: { code: "json" } },
    { id: 5, results: {} },
  ]);
});
