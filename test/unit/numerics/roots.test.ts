/** Brent's root finder: known roots, hard shapes, economy, failures. */
import { describe, expect, test } from "vitest";
import { CalculationError } from "../../../src/numerics/check.ts";
import { findRoot } from "../../../src/numerics/roots.ts";

test.each([
  ["cos x = x", (x: number) => Math.cos(x) - x, 0, 1, 0.7390851332151607],
  ["x^2 = 2", (x: number) => x * x - 2, 0, 2, Math.SQRT2],
  ["limits in falling order", (x: number) => x * x - 2, 2, 0, Math.SQRT2],
  ["ln x = 0 over 600 decades", Math.log, 1e-300, 1e300, 1],
  ["a steep step", (x: number) => Math.tanh(1e6 * (x - 0.3)), -5, 7, 0.3],
  ["a flat root", (x: number) => (x - 1) ** 3, -3, 2.5, 1],
  ["a root at the lower end", (x: number) => x, 0, 1, 0],
  ["a root at the upper end", (x: number) => x - 1, 0, 1, 1],
] as const)("%s", (_name, f, a, b, root) => {
  const tolerance = _name === "a flat root" ? 1e-4 : 1e-11;
  expect(Math.abs(findRoot(f, a, b) - root)).toBeLessThan(tolerance * Math.max(1, Math.abs(root)));
});

test("the tolerance is that of the abscissa", () => {
  for (const tolerance of [1e-2, 1e-5, 1e-9])
    expect(Math.abs(findRoot((x) => Math.exp(x) - 5, 0, 3, tolerance) - Math.log(5))).toBeLessThan(tolerance);
});

test("a smooth root takes few evaluations", () => {
  let calls = 0;
  findRoot(
    (x) => {
      calls++;
      return Math.exp(x) - 5;
    },
    0,
    3,
    1e-12,
  );
  expect(calls).toBeLessThan(14);
});

describe("failures", () => {
  test("no change of sign", () => {
    expect(() => findRoot((x) => x * x + 1, -1, 2)).toThrow(CalculationError);
    expect(() => findRoot((x) => x * x + 1, -1, 2)).toThrow("no change of sign between -1 and 2: f = 2, 5");
  });
  test("a function that is not a number at an end, or inside", () => {
    expect(() => findRoot(() => Number.NaN, 0, 1)).toThrow("no change of sign");
    expect(() => findRoot((x) => (x === 0 ? -1 : x === 1 ? 1 : Number.NaN), 0, 1)).toThrow(CalculationError);
  });
});
