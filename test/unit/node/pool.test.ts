// The pool: the same answers with workers as without, and the same error, whichever thread meets it first.
import { afterAll, expect, test } from "vitest";
import { loadRates } from "../../../src/node/load-rates.ts";
import { makePool, type Pool, WORKERS_PAY_MS } from "../../../src/node/pool.ts";
import { makeTaskStream } from "../../../src/node/task-stream.ts";
import { type LineTask, type PointTask, pointAnswerer, taskAnswerer } from "../../../src/requests/tasks.ts";

const library = loadRates();
const tasks = Array.from(
  { length: 60 },
  (_, i): PointTask => ({
    kind: "point",
    base: { network: "twelve", errors: "none" },
    question: { overrides: { eta10: 1 + i / 7, nEff: i % 20 < 10 ? 3 : 3.5 }, where: `point ${i}`, values: true },
  }),
);
const affinity = (_: unknown, i: number) => `${Math.floor(i / 10)}`;

/** Answers as this thread does, but slowly, so that the pool finds workers worth starting. */
function slowAnswerer(ms: number) {
  const answer = pointAnswerer(library);
  return async (task: PointTask) => {
    await new Promise((resolve) => setTimeout(resolve, ms));
    return answer(task);
  };
}

const pools: Pool[] = [];
afterAll(() => Promise.all(pools.map((pool) => pool.close())));
function pool(jobs: number, ms: number, signal?: AbortSignal): Pool {
  const made = makePool({ jobs, answer: slowAnswerer(ms), signal });
  pools.push(made);
  return made;
}

test("a little work is done in this thread, and a single job starts no other", async () => {
  const little = pool(2, 0);
  await little.answerAll(tasks.slice(0, 5), affinity);
  expect(little.threads).toBe(1);
  const single = pool(1, (1.5 * WORKERS_PAY_MS) / tasks.length);
  await single.answerAll(tasks, affinity);
  expect(single.threads).toBe(1);
});

test("with workers the answers are the same, in the order of the questions", async () => {
  const alone = await pool(1, 0).answerAll(tasks, affinity);
  const many = pool(3, (4 * WORKERS_PAY_MS) / tasks.length);
  let told = 0;
  const found = await many.answerAll(tasks, affinity, (answer, index) => {
    told++;
    expect(answer).toEqual(alone[index]);
  });
  expect(many.threads).toBe(3);
  expect(told).toBe(tasks.length);
  expect(found).toEqual(alone);
});

test("of several errors the one of the first question is thrown", async () => {
  const bad = tasks.map((task, i) =>
    i === 25 || i === 45 ? { ...task, question: { ...task.question, overrides: { omegaB: -i } } } : task,
  );
  await expect(pool(1, 0).answerAll(bad, affinity)).rejects.toThrow(/at point 25: omegaB = -25/);
  const many = pool(2, (4 * WORKERS_PAY_MS) / tasks.length);
  await expect(many.answerAll(bad, affinity)).rejects.toThrow(/at point 25: omegaB = -25/);
  await expect(many.answerAll(bad, affinity)).rejects.toMatchObject({ code: "range", exitCode: 2 });
});

test("a signal ends the work with its reason", async () => {
  const controller = new AbortController();
  const work = pool(1, 20, controller.signal).answerAll(tasks, affinity);
  setTimeout(() => controller.abort(new Error("enough")), 50);
  await expect(work).rejects.toThrow("enough");
});

test("a stream of lines is answered the same by workers", async () => {
  const lines = Array.from({ length: 120 }, (_, i): LineTask => {
    const text = JSON.stringify({ id: i, command: "abundances", network: "twelve", errors: "none", eta10: 1 + i / 30 });
    return { kind: "line", line: i + 1, text: i % 11 === 0 ? "broken" : text };
  });
  const answer = taskAnswerer(library);
  const slow = async (task: LineTask) => {
    await new Promise((resolve) => setTimeout(resolve, 30));
    return answer(task);
  };
  const stream = makeTaskStream({ jobs: 2, answer: slow });
  const found = await Promise.all(lines.map((line) => stream.submit(line)));
  await stream.close();
  for (const [i, line] of lines.entries()) expect(found[i], `line ${i + 1}`).toEqual(await answer(line));
});
