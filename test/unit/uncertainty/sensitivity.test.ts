// Central logarithmic differences against power laws, whose exponents they must return.
import { expect, test } from "vitest";
import { CalculationError } from "../../../src/numerics/check.ts";
import { centralSensitivities, relativeStep } from "../../../src/uncertainty/sensitivity.ts";

test("a power law gives its exponent whatever the step", () => {
  for (const share of [1e-3, 0.02, 0.05, 0.5]) {
    const rows = centralSensitivities([relativeStep("p", 7, share)], (_, p) => [3 * p ** 1.6, 2 / p, 5]);
    expect(rows[0][0]).toBeCloseTo(1.6, 11);
    expect(rows[0][1]).toBeCloseTo(-1, 11);
    expect(rows[0][2]).toBe(0);
  }
});

test("the error falls as the square of the step", () => {
  const slope = (share: number) => centralSensitivities([relativeStep("p", 1, share)], (_, p) => [Math.exp(p)])[0][0];
  // d ln e^p/d ln p = p = 1.
  const order = Math.log2((slope(0.2) - 1) / (slope(0.1) - 1));
  expect(Math.abs(order - 2)).toBeLessThan(0.2);
});

test("a step in p itself takes the distance it is given", () => {
  // N from 2.94 to 3.06 at N = 3: d ln X/d ln N = 3 d ln X/dN.
  const rows = centralSensitivities([{ name: "N", up: 0.06, down: -0.06, lnDistance: 0.12 / 3 }], (_, d) => [
    Math.exp(0.05 * d),
  ]);
  expect(rows[0][0]).toBeCloseTo(0.15, 12);
});

test("what has no logarithm has sensitivity 0; what is not finite is refused", () => {
  expect(centralSensitivities([relativeStep("p", 1, 0.1)], () => [0])[0][0]).toBe(0);
  expect(() => centralSensitivities([relativeStep("p", 1, 0.1)], () => [Number.NaN])).toThrow(CalculationError);
  expect(() => relativeStep("p", 0, 0.1)).toThrow(RangeError);
  expect(() => relativeStep("p", 1, 1)).toThrow(RangeError);
});
