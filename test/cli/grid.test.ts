// grid from the shell: parts computed by separate processes join to the bytes of a single run.
import { copyFileSync, existsSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { beforeAll, describe, expect, test } from "vitest";
import { builtCommand, emberline, start, workFolder } from "./built-command.ts";

const folder = workFolder();
const file = (name: string) => join(folder, name);
const read = (name: string) => readFileSync(file(name), "utf8");
const GRID = ["grid", "--over", "omegaB=0.02:0.03:7", "--over", "deltaNEff=-2:1:3", "--network", "twelve", "--quiet"];
let main: string;
beforeAll(async () => {
  main = await builtCommand();
});

test.each([
  ["csv", "linear"],
  ["ecsv", "none"],
])("parts computed side by side by xargs join to the single run, in %s with errors %s", async (format, errors) => {
  const args = [...GRID, "--errors", errors, "--format", format];
  const whole = await emberline(folder, [...args, "--out", `whole.${format}`]);
  expect(whole.status).toBe(0);
  const command = [process.execPath, main, ...args].map((word) => `'${word}'`).join(" ");
  const script = `seq 1 4 | xargs -P 2 -I{} ${command} --jobs 1 --part {}/4 --out part{}.${format}`;
  const parts = await start("/bin/sh", ["-c", script], folder).finished;
  expect(parts.status, parts.err).toBe(0);
  const names = [3, 1, 4, 2].map((k) => `part${k}.${format}`);
  const joined = await emberline(folder, ["grid", "--join", ...names, "--out", `joined.${format}`]);
  expect(joined).toMatchObject({ status: 0, err: "", out: "" });
  expect(read(`joined.${format}`)).toBe(read(`whole.${format}`));
  const printed = await emberline(folder, ["grid", "--join", ...names]);
  expect(printed.out).toBe(read(`whole.${format}`));
  // What the header promises, with the tools of any system.
  const sum = await start("/bin/sh", ["-c", `grep -v '^#' joined.${format} | sha256sum`], folder).finished;
  expect(read(`joined.${format}`)).toContain(`sha256 ${sum.out.slice(0, 64)}`);
});

describe("parts that do not make a grid are refused with one line", () => {
  const edit = (from: string, to: string, change: (text: string) => string) =>
    writeFileSync(file(to), change(read(from)));
  const join4 = (...names: string[]) => emberline(folder, ["grid", "--join", ...names, "--out", "bad.csv"]);
  const all = ["part1.csv", "part2.csv", "part3.csv", "part4.csv"];

  test("missing, twice, whole, of another format, unreadable, no grid", async () => {
    copyFileSync(file("part2.csv"), file("again.csv"));
    writeFileSync(file("other.txt"), "hello\n");
    for (const [names, message] of [
      [all.slice(0, 3), /missing 1 of 4 parts: 4/],
      [[...all, "again.csv"], /both part 2/],
      [["whole.csv"], /not a part but a whole grid/],
      [[...all.slice(0, 3), "part4.ecsv"], /do not belong together/],
      [[...all.slice(0, 3), "nosuch.csv"], /nosuch.csv: cannot be read \(no such file\)/],
      [[...all.slice(0, 3), "."], /cannot be read \(is a directory\)/],
      [["other.txt"], /other.txt: not a grid of this program/],
    ] as const) {
      const { status, err, out } = await join4(...names);
      expect(err).toMatch(message);
      expect(err.trim().split("\n").length).toBe(1);
      expect([status, out, existsSync(file("bad.csv"))]).toEqual([2, "", false]);
    }
  });

  test("changed by a digit, a row too few, another version, another parameter, another rate", async () => {
    edit("part2.csv", "digit.csv", (text) => text.replace(/(\d)(\d\n)$/, (_, a, b) => `${(Number(a) + 1) % 10}${b}`));
    edit("part2.csv", "short.csv", (text) => text.replace(/[^\n]*\n$/, ""));
    edit("part2.csv", "version.csv", (text) => text.replace(/emberline \S+ grid/, "emberline 9.9.9 grid"));
    edit("part2.csv", "parameter.csv", (text) => text.replace("tauN=878.4", "tauN=880"));
    edit("part2.csv", "rate.csv", (text) => text.replace(/rates_sha256: ./, "rates_sha256: x"));
    for (const [name, message] of [
      ["digit.csv", /digit.csv: damaged/],
      ["short.csv", /short.csv: damaged/],
      ["version.csv", /do not belong together: .*9\.9\.9/],
      ["parameter.csv", /do not belong together: .*tauN=880|do not belong together/],
      ["rate.csv", /do not belong together: .*rates_sha256/],
    ] as const) {
      const { status, err } = await join4("part1.csv", name, "part3.csv", "part4.csv");
      expect(err).toMatch(message);
      expect(status).toBe(2);
    }
  });

  test("--join with a request, --part in a format that cannot be joined, parts that cannot be", async () => {
    for (const [args, message] of [
      [["--join", "part1.csv", "--network", "twelve"], /--join: takes everything from the parts; leave out network/],
      [[...GRID.slice(1), "--part", "1/2"], /--part: needs --format csv or ecsv/],
      [[...GRID.slice(1), "--part", "5/4", "--format", "csv"], /write K\/N with 1 <= K <= N/],
      [[...GRID.slice(1), "--part", "1/400", "--format", "csv"], /there are only 21 points/],
      [["--over", "nEff=2,3"], /grid: 1 axes given/],
    ] as const) {
      const { status, err, out } = await emberline(folder, ["grid", ...args]);
      expect(err).toMatch(message);
      expect([status, out]).toEqual([2, ""]);
    }
  });
});
