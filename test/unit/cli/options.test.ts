// Options: strict numbers, values with errors, reactions, charts, and the keys they become.
import { describe, expect, test } from "vitest";
import { parseChart, parseScale, strictNumber, toKeys } from "../../../src/cli/options.ts";
import { makeProgram } from "../../../src/cli/program.ts";
import { InputError } from "../../../src/numerics/check.ts";
import { DEFAULTS, RANGES } from "../../../src/parameters/cosmology.ts";

/** Keys that a line of `abundances` becomes, without running it. */
async function keysOf(...args: string[]): Promise<object> {
  const program = makeProgram(() => {});
  const command = program.commands.find((each) => each.name() === "abundances")!;
  let keys: object = {};
  command.action((options) => {
    keys = toKeys(options);
  });
  await program.parseAsync(["abundances", ...args], { from: "user" });
  return keys;
}

test("a number is read whole or refused", () => {
  for (const [text, value] of [
    ["1", 1],
    ["-.5e-3", -5e-4],
    ["+2.", 2],
    ["1E6", 1e6],
  ] as const)
    expect(strictNumber(text, "--x", "a number")).toBe(value);
  for (const text of ["", " ", "1x", "0x10", "1e", "1_000", "NaN", "nan", "Infinity", "-inf", "1e999", "1,5", "1 2"])
    expect(() => strictNumber(text, "--x", "a number"), text).toThrow(InputError);
});

test("every option becomes its key", async () => {
  expect(
    await keysOf(
      ...["--omega-b", "0.0224±0.0001", "--delta-n", "-0.5", "--tau-n", "879.4+-0.6", "--xi-e", "-0.1"],
      ...["--without", "coulomb", "--without", "qed-e3", "--evaluation", "d(p,g)he3=marcucci2016"],
      ...["--scale", "d-p_gamma-he3=1.02", "--scale", "3He(a,g)7Be=2", "--expansion", "1+0*T"],
      ...["--samples", "50", "--seed", "3", "--errors", "sampled", "--network", "twelve", "--tolerance", "1e-6"],
      ...["--format", "json", "--jobs", "2", "--quiet"],
    ),
  ).toEqual({
    omegaB: { value: 0.0224, sigma: 0.0001 },
    deltaNEff: -0.5,
    tauN: { value: 879.4, sigma: 0.6 },
    xiE: -0.1,
    without: ["coulomb", "qed-e3"],
    evaluations: { "d(p,g)he3": "marcucci2016" },
    scales: { "d-p_gamma-he3": 1.02, "3He(a,g)7Be": 2 },
    expansion: "1+0*T",
    samples: 50,
    seed: 3,
    errors: "sampled",
    network: "twelve",
    tolerance: 1e-6,
  });
  expect(await keysOf()).toEqual({});
});

test("an error may be written ±, +- or +/-", async () => {
  for (const sign of ["±", "+-", "+/-"])
    expect(await keysOf("--tau-n", `878.4${sign}0.5`)).toEqual({ tauN: { value: 878.4, sigma: 0.5 } });
});

test("a scale is split at its last = and given once a reaction", () => {
  expect(parseScale("d-p_gamma-he3=1e-6")).toEqual({ "d-p_gamma-he3": 1e-6 });
  expect(() => parseScale("d-p_gamma-he3=2", { "d-p_gamma-he3": 1 })).toThrow("given twice");
});

test("a chart has an optional name of the command and one of three endings", () => {
  expect(parseChart("a.png", ["weak"])).toEqual([{ file: "a.png" }]);
  expect(parseChart("weak=out/a.SVG", ["weak"])).toEqual([{ name: "weak", file: "out/a.SVG" }]);
  expect(parseChart("./x=1.pdf", ["weak"])).toEqual([{ file: "./x=1.pdf" }]);
  for (const text of ["a.gif", "a", ".png", "weak=", "heat=a.png"])
    expect(() => parseChart(text, ["weak"]), text).toThrow(InputError);
});

describe("help", () => {
  const program = makeProgram(() => {});
  test.each(program.commands.map((command) => [command.name(), command] as const))(
    "%s: 80 columns, an example, defaults and ranges",
    (_, command) => {
      let help = "";
      command.configureOutput({ writeOut: (text) => (help += text), getOutHelpWidth: () => 80 });
      command.outputHelp();
      // Lines of an example are there to be copied: they may be longer than the terminal.
      const [described, examples] = help.split(/^Examples?:/m);
      // A group of commands is laid out by the program, whose width its parts inherit only when run.
      if (command.commands.length > 0) return;
      for (const line of described.split("\n")) expect(line.length, line).toBeLessThanOrEqual(80);
      const words = described.replace(/\s+/g, " ");
      expect(examples).toContain(`emberline ${command.name()}`);
      if (!words.includes("--tau-n")) return;
      for (const key of ["omegaB", "tauN", "xiE"] as const) {
        expect(words).toContain(`${RANGES[key].min} .. ${RANGES[key].max}`);
        expect(words).toContain(`default ${DEFAULTS[key]}`);
      }
      expect(words).toContain("neutron mean life [s]");
    },
  );
});
