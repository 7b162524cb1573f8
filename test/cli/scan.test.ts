// scan from the shell: formats, charts, threads, and lines that say what is wrong.
import { readFileSync, statSync } from "node:fs";
import { join } from "node:path";
import { beforeAll, describe, expect, test } from "vitest";
import { builtCommand, emberline, workFolder } from "./built-command.ts";
import { runMain } from "./run-main.ts";

const folder = workFolder();
beforeAll(builtCommand);

test("any number of jobs writes the same bytes", async () => {
  const args = ["scan", "--over", "eta10=1:20:100log", "--over", "nEff=2.9,3.1", "--format", "csv", "--quiet"];
  args.push("--errors", "none");
  const one = await emberline(folder, [...args, "--jobs", "1"]);
  const three = await emberline(folder, [...args, "--jobs", "3"]);
  expect(one.err).toBe("");
  expect(one.status).toBe(0);
  expect(three).toEqual(one);
  const lines = one.out.split("\n");
  expect(lines[0]).toMatch(/^# command: emberline \S+ scan$/);
  expect(lines.find((line) => line.startsWith("# axes: nEff"))).toMatch(/effective neutrino number/);
  expect(lines.filter((line) => line !== "" && !line.startsWith("#")).length).toBe(201);
});

test("the table comes as CSV, ECSV and JSON with the same numbers, and units where there are any", async () => {
  const args = ["scan", "--over", "tauN=875,880", "--network", "twelve"];
  const csv = (await runMain(...args, "--format", "csv")).out;
  const ecsv = (await runMain(...args, "--format", "ecsv")).out;
  const json = JSON.parse((await runMain(...args, "--format", "json")).out);
  const rows = (text: string) => text.split("\n").filter((line) => line !== "" && !line.startsWith("#"));
  expect(rows(ecsv)).toEqual(rows(csv));
  expect(rows(csv)[0].split(",")).toEqual(json.results.table.columns);
  expect(rows(csv)[2].split(",").map(Number)).toEqual(json.results.table.rows[1]);
  expect(csv).toContain("# units: tauN [s]");
  expect(ecsv).toContain('# - {name: "tauN", unit: "s", datatype: float64, description: "neutron mean life [s]"}');
  expect(json.results.axes).toEqual([{ key: "tauN", unit: "s", count: 2, log: false }]);
  expect(csv).not.toMatch(/tauN=878/);
});

test("the diagram is drawn in each format, whole and by panels", async () => {
  const file = (name: string) => join(folder, name);
  const charts = ["a.png", "a.svg", "a.pdf"].flatMap((name) => ["--chart", file(name)]);
  const panels = ["helium", "deuterium", "lithium"].flatMap((name) => ["--chart", `${name}=${file(`${name}.svg`)}`]);
  const { status, out } = await runMain(
    ...["scan", "--over", "eta10=1:10:9log", "--network", "twelve", "--quiet"],
    ...[...charts, ...panels],
  );
  expect(status).toBe(0);
  expect(out).toContain("Abundances along parameters");
  expect(readFileSync(file("a.png")).subarray(1, 4).toString()).toBe("PNG");
  expect(readFileSync(file("a.pdf")).subarray(0, 4).toString()).toBe("%PDF");
  for (const name of ["a", "helium", "deuterium", "lithium"])
    expect(readFileSync(file(`${name}.svg`), "utf8")).toContain("<title>Light-element abundances against the baryon");
  expect(statSync(file("a.svg")).size).toBeGreaterThan(statSync(file("helium.svg")).size);
});

describe("refused with one line and status 2", () => {
  test.each([
    [["--over", "eta10=10:1:0"], /count 0/],
    [["--over", "nosuch=1:2:3"], /unknown key nosuch/],
    [["--over", "eta10=0:1:3log"], /above 0/],
    [["--over", "eta10=1:2"], /KEY=START:STOP:COUNT/],
    [["--over", "eta10=a,b"], /not a number/],
    [[], /0 axes given/],
    [["--over", "nEff=2,3", "--over", "tauN=870,880", "--over", "omegaB=0.02,0.03"], /3 axes given/],
    [["--over", "nEff=2:3:100000", "--over", "tauN=870:880:100000"], /need about .* GB/],
    [["--over", "eta10=1,2", "--omega-b", "0.02"], /keep one of them/],
    [["--over", "eta10=1,2", "--jobs", "0"], /--jobs 0/],
    [["--over", "eta10=1,2", "--resume"], /--resume: needs --out/],
    [["--over", "eta10=1,2", "--chart", "nosuch=x.svg"], /no chart nosuch/],
    [["--over", "eta10=1,2", "--out", "/nonexistent/x.csv"], /no such folder/],
  ])("%j", async (args, message) => {
    const { status, out, err } = await runMain("scan", ...args);
    expect(err).toMatch(message);
    expect(err.trim().split("\n").length).toBe(1);
    expect(out).toBe("");
    expect(status).toBe(2);
  });
});
