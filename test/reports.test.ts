// The examples in reports/ are what the code makes: same text, same numbers. If results move, `npm run reports` and commit.
import { readdirSync, readFileSync } from "node:fs";
import { join, resolve } from "node:path";
import { beforeAll, describe, expect, test } from "vitest";
import { makeReports } from "../src/scripts/reports.ts";

const folder = resolve(import.meta.dirname, "../reports");
const NUMBER = /(?<![A-Za-z#])-?\d+(?:\.\d+)?(?:e[-+]?\d+)?/g;
/** Numbers may differ in their last digits between machines, whose exponential functions do. */
const SAME = 1e-9;

/** Text without the coordinates of drawn curves, its numbers taken out. */
function taken(content: string): { words: string; numbers: number[] } {
  const text = content.replace(/\bd="[^"]*"/g, "");
  return { words: text.replace(NUMBER, "#"), numbers: (text.match(NUMBER) ?? []).map(Number) };
}

let made: Map<string, string>;
beforeAll(async () => {
  made = await makeReports();
});

test("reports/ holds these files and no others", () => {
  expect(readdirSync(folder).sort()).toEqual([...made.keys()].sort());
});

describe("text and numbers are unchanged", () => {
  test.each([
    "README.md",
    "eta-diagram.svg",
    "eta-diagram.csv",
    "report.html",
    "recombination.txt",
    "recombination.svg",
  ])("%s", (name) => {
    const kept = taken(readFileSync(join(folder, name), "utf8"));
    const now = taken(made.get(name) ?? "");
    expect(now.words === kept.words, `the text of reports/${name} has changed: npm run reports`).toBe(true);
    const moved = now.numbers.findIndex((x, i) => Math.abs(x - kept.numbers[i]) > SAME * Math.abs(x));
    expect(
      moved < 0 ? undefined : `reports/${name}: ${kept.numbers[moved]} is now ${now.numbers[moved]}: npm run reports`,
    ).toBeUndefined();
  });
});

test("nothing in them depends on time or machine", () => {
  for (const [name, content] of made) {
    expect(content, name).not.toMatch(/wall|\d+ ms\b|\/home\/|\/tmp\/|file:\/\//);
    expect(content.includes(process.cwd()), name).toBe(false);
    expect(content.includes(new Date().toISOString().slice(0, 10)), name).toBe(false);
  }
});
