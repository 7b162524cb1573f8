// The progress line: share, rate, time left; nothing where standard error is no terminal.
import { expect, test } from "vitest";
import { duration, progressLine, progressText } from "../../../src/cli/progress.ts";

test("a time is told in the units one counts in", () => {
  expect([0, 0.2, 59, 60, 61, 3599, 3600, 7500].map(duration)).toEqual([
    "0 s",
    "1 s",
    "59 s",
    "1 min 0 s",
    "1 min 1 s",
    "59 min 59 s",
    "1 h 0 min",
    "2 h 5 min",
  ]);
});

test("rate and time left are told once they are known, counted from where a resumed run began", () => {
  expect(progressText(0.1, "points", 200, 0.1, 100)).toBe("10 % of 200 points");
  expect(progressText(0.5, "points", 200, 0.5, 10000)).toBe("50 % of 200 points, 10 a second, 10 s left");
  // 80 % were there; 10 % more took 5 s.
  expect(progressText(0.9, "points", 200, 0.1, 5000)).toBe("90 % of 200 points, 4 a second, 5 s left");
  expect(progressText(0.5, "error runs", undefined, 0.25, 60000)).toBe("50 % error runs, 2 min 0 s left");
});

test("where standard error is no terminal, or --quiet, there is none", () => {
  expect(progressLine(true).report).toBeUndefined();
  if (!process.stderr.isTTY) expect(progressLine(false).report).toBeUndefined();
});
