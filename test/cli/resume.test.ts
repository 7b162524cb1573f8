// Long runs: killed at any moment they go on and end with the bytes of an uninterrupted run; nothing is left behind.
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { beforeAll, describe, expect, test } from "vitest";
import { seededUniform } from "../../src/numerics/random.ts";
import { builtCommand, emberline, start, workFolder } from "./built-command.ts";

const folder = workFolder();
const file = (name: string) => join(folder, name);
let main: string;
beforeAll(async () => {
  main = await builtCommand();
});

/** About half a second of work on a quiet core, in two stages: points, then bands. */
const SCAN = ["scan", "--over", "eta10=1:20:50log", "--network", "twelve", "--format", "csv", "--quiet"];
/** Kills in all. */
const KILLS = 50;

test(`killed at ${KILLS} random moments, the scan ends with the bytes of an uninterrupted one`, async () => {
  const seed = Number(process.env.TEST_SEED ?? 20260106);
  console.log(`seed of the moments: ${seed} (TEST_SEED sets another)`);
  const random = seededUniform(seed);
  const begin = performance.now();
  expect((await emberline(folder, [...SCAN, "--out", "whole.csv"])).status).toBe(0);
  const time = performance.now() - begin;
  const whole = readFileSync(file("whole.csv"), "utf8");
  let kills = 0;
  let finished = 0;
  while (kills < KILLS) {
    const run = start(process.execPath, [main, ...SCAN, "--out", "killed.csv", "--resume", "--jobs", "2"], folder);
    const timer = setTimeout(() => run.child.kill("SIGKILL"), 0.9 * time * random());
    const { status, signal, err } = await run.finished;
    clearTimeout(timer);
    if (signal === "SIGKILL") {
      kills++;
      // The output is there whole or not at all.
      if (existsSync(file("killed.csv"))) expect(readFileSync(file("killed.csv"), "utf8")).toBe(whole);
      continue;
    }
    expect(status, `seed ${seed}, after ${kills} kills: ${err}`).toBe(0);
    expect(readFileSync(file("killed.csv"), "utf8")).toBe(whole);
    expect(readdirSync(folder).filter((name) => name.startsWith("killed.csv."))).toEqual([]);
    finished++;
  }
  const last = await emberline(folder, [...SCAN, "--out", "killed.csv", "--resume"]);
  expect(last.status, last.err).toBe(0);
  expect(readFileSync(file("killed.csv"), "utf8")).toBe(whole);
  console.log(`${kills} kills, ${finished} runs that were faster, one uninterrupted run ${Math.round(time)} ms`);
  // Whatever killed processes left, a finished run has removed.
  expect(readdirSync(folder).filter((name) => name.includes("killed.csv"))).toEqual(["killed.csv"]);
}, 300_000);

test("a signal keeps what is finished, says how to go on, and that command goes on", async () => {
  const args = ["scan", "--over", "eta10=1:20:400log", "--errors", "none", "--format", "csv", "--out", "signal.csv"];
  for (const signal of ["SIGINT", "SIGTERM"] as const) {
    const run = start(process.execPath, [main, ...args, ...(signal === "SIGTERM" ? ["--resume"] : [])], folder);
    // Once the output is locked the run listens to signals.
    for (const name of ["signal.csv.lock", "signal.csv.checkpoint"])
      while (!existsSync(file(name)) && run.child.exitCode === null)
        await new Promise((resolve) => setTimeout(resolve, 20));
    run.child.kill(signal);
    const { status, err, out } = await run.finished;
    expect(status, err).toBe(130);
    expect(out).toBe("");
    expect(err.trim()).toMatch(
      /^emberline: interrupted: \d+ finished pieces are kept in \S*signal\.csv\.checkpoint; go on with: emberline scan .* --out signal\.csv --resume$/,
    );
    expect(existsSync(file("signal.csv.lock"))).toBe(false);
  }
  const kept = readFileSync(file("signal.csv.checkpoint"), "utf8").split("\n").length - 2;
  expect(kept).toBeGreaterThan(1);
  const refused = await emberline(folder, args);
  expect(refused.status).toBe(2);
  expect(refused.err).toMatch(/add --resume to go on from it, or delete it to start anew/);
  const other = await emberline(folder, [...args, "--resume", "--tau-n", "880"]);
  expect(other.status).toBe(2);
  expect(other.err).toMatch(/belongs to another request \(tauN differ\)/);
  expect((await emberline(folder, [...args, "--resume", "--quiet"])).status).toBe(0);
  expect(existsSync(file("signal.csv.checkpoint"))).toBe(false);
});

test("two runs on the same output: the second is refused, the first ends well", async () => {
  const args = ["scan", "--over", "eta10=1:20:300log", "--errors", "none", "--format", "csv", "--out", "both.csv"];
  const first = start(process.execPath, [main, ...args], folder);
  while (!existsSync(file("both.csv.lock"))) await new Promise((resolve) => setTimeout(resolve, 10));
  const second = await emberline(folder, args);
  expect(second.status).toBe(2);
  expect(second.err).toMatch(/both\.csv: process \d+ is writing this file; wait for it or choose another file/);
  expect((await first.finished).status).toBe(0);
  expect(readdirSync(folder).filter((name) => name.startsWith("both.csv"))).toEqual(["both.csv"]);
});

describe("an output that cannot be written is told, and no file is left", () => {
  test("a full disk", async () => {
    // A file system of 64 kB, if this machine lets us have one; else the device that is always full.
    const small = file("small");
    mkdirSync(small);
    const mounted = await start("mount", ["-t", "tmpfs", "-o", "size=16k", "none", small], folder).finished.catch(
      () => undefined,
    );
    try {
      const out = mounted?.status === 0 ? join(small, "scan.csv") : "/dev/full";
      const { status, err } = await emberline(folder, [...SCAN, "--out", out]);
      expect(err).toMatch(/cannot be written: no space left on the device/);
      expect(err.trim().split("\n").length).toBe(1);
      expect(status).toBe(2);
      if (mounted?.status === 0) expect(readdirSync(small).filter((name) => !name.endsWith(".checkpoint"))).toEqual([]);
    } finally {
      if (mounted?.status === 0) await start("umount", [small], folder).finished;
    }
  });

  test("a folder that is none, and a name that is a folder", async () => {
    writeFileSync(file("plain"), "");
    for (const [out, message] of [
      ["plain/x.csv", /part of the path is not a folder/],
      [".", /is a folder/],
      ["nosuch/x.csv", /no such folder/],
    ] as const) {
      const { status, err } = await emberline(folder, [...SCAN, "--out", out]);
      expect(err).toMatch(message);
      expect(status).toBe(2);
    }
  });
});
