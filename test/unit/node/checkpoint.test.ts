// Checkpoints and locks: what a killed run left is found again unless it is torn or of another request.
import {
  appendFileSync,
  existsSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  truncateSync,
  writeFileSync,
} from "node:fs";
import { hostname, tmpdir } from "node:os";
import { join } from "node:path";
import { expect, test } from "vitest";
import { openCheckpoint, withCheckpoint } from "../../../src/node/checkpoint.ts";
import { lockOutput, lockPath } from "../../../src/node/lock.ts";
import { InputError } from "../../../src/numerics/check.ts";
import { seededUniform } from "../../../src/numerics/random.ts";
import { singleThread } from "../../../src/sweep/engine.ts";

const folder = mkdtempSync(join(tmpdir(), "checkpoint-"));
let files = 0;
const fresh = () => join(folder, `out${files++}.csv`);
const request = { version: "1", command: "scan", over: ["eta10=1:2:3"] };

function written(out: string, pieces: number): void {
  const checkpoint = openCheckpoint(out, request, true);
  for (let i = 0; i < pieces; i++) checkpoint.put(0, i, { values: [i / 7, -0.1, 1e-300] });
  checkpoint.close();
}

test("pieces are found again, to the last bit", () => {
  const out = fresh();
  written(out, 20);
  const again = openCheckpoint(out, request, true);
  expect(again.found).toBe(20);
  expect(again.get(0, 3)).toEqual({ values: [3 / 7, -0.1, 1e-300] });
  expect(again.get(1, 3)).toBeUndefined();
  again.remove();
  expect(existsSync(again.path)).toBe(false);
});

test("cut anywhere, a checkpoint holds the whole pieces before the cut, and goes on from there", () => {
  const seed = 20260104;
  const random = seededUniform(seed);
  const out = fresh();
  written(out, 10);
  const whole = readFileSync(`${out}.checkpoint`);
  for (let trial = 0; trial < 60; trial++) {
    const cut = Math.floor(random() * (whole.length + 1));
    const text = whole.subarray(0, cut).toString();
    const lines = text.split("\n").length - 1;
    writeFileSync(`${out}.checkpoint`, whole.subarray(0, cut));
    const again = openCheckpoint(out, request, true);
    expect(again.found, `seed ${seed}, cut at ${cut}`).toBe(Math.max(0, lines - 1));
    again.put(0, 99, "more");
    again.close();
    expect(openCheckpoint(out, request, true).found).toBe(Math.max(0, lines - 1) + 1);
  }
});

test("a harmed line and what follows it is not used", () => {
  const out = fresh();
  written(out, 5);
  const path = `${out}.checkpoint`;
  const lines = readFileSync(path, "utf8").split("\n");
  lines[3] = lines[3].replace("0,2,", "0,9,");
  writeFileSync(path, lines.join("\n"));
  expect(openCheckpoint(out, request, true).found).toBe(2);
  truncateSync(path, 0);
  expect(openCheckpoint(out, request, true).found).toBe(0);
  // A first line that was written whole and is not ours: refused, not deleted.
  appendFileSync(path, Buffer.from([0, 255, 10, 10]));
  expect(() => openCheckpoint(out, request, true)).toThrow(/:1: damaged, not a checkpoint; delete it to start anew/);
});

test("a checkpoint is neither overwritten unasked nor used for another request", () => {
  const out = fresh();
  written(out, 3);
  expect(() => openCheckpoint(out, request, false)).toThrow(/add --resume to go on from it, or delete it/);
  expect(() => openCheckpoint(out, { ...request, over: ["eta10=1:2:4"], seed: 2 }, true)).toThrow(
    /belongs to another request \(over, seed differ\)/,
  );
  expect(openCheckpoint(out, request, true).found).toBe(3);
});

test("an engine with a checkpoint asks only for what is missing", async () => {
  const out = fresh();
  const asked: number[] = [];
  const engine = singleThread((question: number) => {
    asked.push(question);
    if (question === 7) throw new InputError("x", "stop");
    return question * 2;
  });
  const run = async () => {
    const checkpoint = openCheckpoint(out, request, true);
    try {
      const kept = withCheckpoint(engine, checkpoint);
      return [await kept.answerAll([1, 2, 3], () => ""), await kept.answerAll([5, asked.length > 5 ? 6 : 7], () => "")];
    } finally {
      checkpoint.close();
    }
  };
  await expect(run()).rejects.toThrow("stop");
  expect(asked).toEqual([1, 2, 3, 5, 7]);
  asked.push(0);
  expect(await run()).toEqual([
    [2, 4, 6],
    [10, 12],
  ]);
  expect(asked).toEqual([1, 2, 3, 5, 7, 0, 6]);
});

test("one run at a time has an output; a dead one's lock is taken over", async () => {
  const out = fresh();
  const unlock = await lockOutput(out);
  await expect(lockOutput(out)).rejects.toThrow(/process \d+ is writing this file/);
  unlock();
  expect(existsSync(lockPath(out))).toBe(false);

  writeFileSync(lockPath(out), JSON.stringify({ pid: 2 ** 22 + 12345, host: hostname() }));
  (await lockOutput(out))();
  // The same number, but of a process that started at another time.
  writeFileSync(lockPath(out), JSON.stringify({ pid: process.pid, host: hostname(), start: "1" }));
  if (existsSync("/proc/self/stat")) (await lockOutput(out))();
  else writeFileSync(lockPath(out), "");
  // A lock without an owner: its process was killed before it wrote its name.
  writeFileSync(lockPath(out), "");
  (await lockOutput(out))();
  writeFileSync(lockPath(out), JSON.stringify({ pid: 1, host: "elsewhere" }));
  await expect(lockOutput(out)).rejects.toThrow(/process 1 on elsewhere.*if it is dead, delete/);
  expect(readdirSync(folder).filter((name) => name.includes(".lock."))).toEqual([]);
});

test("a checkpoint or lock that cannot be written is told", async () => {
  await expect(lockOutput("/nonexistent/out.csv")).rejects.toThrow(/no such folder/);
  const checkpoint = openCheckpoint("/nonexistent/out.csv", request, false);
  checkpoint.put(0, 0, 1);
  expect(() => checkpoint.close()).toThrow(/out.csv.checkpoint: cannot be written: no such folder/);
});
