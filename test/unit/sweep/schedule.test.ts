// The schedule of tasks: each handed out once, runs kept together, late ones split, all before an error done.
import { expect, test } from "vitest";
import { seededUniform } from "../../../src/numerics/random.ts";
import { makeSchedule } from "../../../src/sweep/schedule.ts";

test("every task is handed out exactly once, whatever thread asks when", () => {
  const seed = 20260103;
  const random = seededUniform(seed);
  for (let trial = 0; trial < 200; trial++) {
    const count = Math.floor(200 * random());
    const length = 1 + Math.floor(20 * random());
    const threads = 1 + Math.floor(5 * random());
    const schedule = makeSchedule(count, (i) => `${Math.floor(i / length)}`);
    const seen: number[] = [];
    // A thread that gets nothing asks again later: what is left is with others until they have taken it.
    for (let idle = 0; schedule.left > 0 && idle < 100000; idle++)
      seen.push(...schedule.take(Math.floor(threads * random()), 1 + Math.floor(4 * random())));
    expect(
      seen.sort((a, b) => a - b),
      `seed ${seed}, trial ${trial}`,
    ).toEqual(Array.from({ length: count }, (_, i) => i));
  }
});

test("a thread stays with its run while it lasts, and takes one that nobody has begun next", () => {
  const schedule = makeSchedule(6, (i) => (i < 3 ? "a" : "b"));
  expect(schedule.take(0, 2)).toEqual([0, 1]);
  expect(schedule.take(1, 2)).toEqual([3, 4]);
  expect(schedule.take(0, 2)).toEqual([2]);
  expect(schedule.take(0, 2)).toEqual([]);
  expect(schedule.take(1, 2)).toEqual([5]);
});

test("an idle thread takes the later half of the longest run", () => {
  const schedule = makeSchedule(20, () => "all");
  expect(schedule.take(0, 2)).toEqual([0, 1]);
  expect(schedule.take(1, 2)).toEqual([11, 12]);
  expect(schedule.take(0, 2)).toEqual([2, 3]);
});

test("after an error only tasks before it are handed out", () => {
  const schedule = makeSchedule(10, () => "all");
  expect(schedule.take(0, 1)).toEqual([0]);
  schedule.stopAt(3);
  expect(schedule.take(0, 10)).toEqual([1, 2]);
  expect(schedule.take(0, 10)).toEqual([]);
});
