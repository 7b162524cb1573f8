/** User expressions: what is computed, what is refused, and that nothing else of mathjs can be reached. */
import { expect, test } from "vitest";
import { InputError } from "../../../src/numerics/check.ts";
import { compileExpression, trivialExpression } from "../../../src/numerics/expression.ts";

const NAMES = ["T", "TMeV", "t", "H"];
const at = async (text: string, ...values: number[]) => (await compileExpression(text, NAMES))(...values);

test("a plain number needs no parser", () => {
  expect(trivialExpression("1")).toBe(1);
  expect(trivialExpression(" -2.5e-3 ")).toBe(-2.5e-3);
  expect(trivialExpression(".5")).toBe(0.5);
  for (const text of ["", "1+1", "T", "1e", "0x10", "Infinity", "NaN"]) expect(trivialExpression(text)).toBeUndefined();
});

test.each<[string, number[], number]>([
  ["1 + 0.1*TMeV^2", [0, 3, 0, 0], 1.9],
  ["-T^2", [3, 0, 0, 0], -9],
  ["2^3^2", [], 512],
  ["(1 + 2)*3 - 4/8", [], 8.5],
  ["2 T", [7, 0, 0, 0], 14],
  ["+T", [7, 0, 0, 0], 7],
  ["T > 1e9 ? 2 : 3", [2e9, 0, 0, 0], 2],
  ["T > 1e9 ? 2 : 3", [1e9, 0, 0, 0], 3],
  ["1 < TMeV < 3 ? 5 : 6", [0, 2, 0, 0], 5],
  ["1 < TMeV < 3 ? 5 : 6", [0, 3, 0, 0], 6],
  ["(T == 1) + (T != 1)*2 + (T <= 1)*4 + (T >= 1)*8", [1, 0, 0, 0], 13],
  ["exp(log(t)) + log10(100) + sqrt(16) + abs(-1)", [0, 0, 5, 0], 12],
  ["min(T, TMeV, t) + max(T, TMeV) + pow(2, 3)", [4, 5, 3, 0], 16],
  ["tanh(0) + sin(pi/2) + cos(0) + H", [0, 0, 0, 7], 9],
])("%s is computed", async (text, values, expected) => {
  expect(await at(text, ...values)).toBeCloseTo(expected, 12);
});

test.each<[string, RegExp]>([
  ["", /empty/],
  ["1 +", /does not parse/],
  ["1 + rho", /rho is unknown/],
  ["__proto__", /unknown/],
  ["constructor", /unknown/],
  ["gamma(T)", /function gamma is not accepted; accepted are exp, log/],
  ["constructor(T)", /function constructor is not accepted/],
  ["import({})", /function import is not accepted/],
  ["evaluate('1')", /function evaluate is not accepted/],
  ["sin.constructor('1')", /call of an expression is not accepted/],
  ["T.constructor", /access to a part of a value .* is not accepted/],
  ["T[1]", /access to a part of a value .* is not accepted/],
  ["[1, 2]", /list in brackets is not accepted/],
  ["{a: 1}", /object in braces is not accepted/],
  ["f(x) = x", /definition of a function is not accepted/],
  ["T = 3", /an assignment .* is not accepted/],
  ["1; 2", /more than one expression is not accepted/],
  ["'text'", /text is not a number/],
  ["true", /true is not a number/],
  ["NaN", /NaN is not a number/],
  ["1e999 + T", /Infinity is not a number/],
  ["3%", /operator % is not accepted/],
  ["T!", /operator ! is not accepted/],
  ["T'", /operator ' is not accepted/],
  ["T and t", /operator and is not accepted/],
  ["5 mod 3", /operator mod is not accepted/],
  ["1 cm", /cm is unknown/],
  ["sin(1, 2)", /takes 1 arguments, not 2/],
  ["pow(1)", /takes 2 arguments, not 1/],
  [`1${"+1".repeat(600)}`, /1201 characters/],
])("%s is refused, naming option and reason", async (text, why) => {
  const refusal = compileExpression(text, NAMES);
  await expect(refusal).rejects.toThrow(InputError);
  await expect(refusal).rejects.toThrow(why);
  await expect(refusal).rejects.toThrow(/^expansion = /);
});
