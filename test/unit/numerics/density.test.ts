// Densities on grids: integrals, quantiles and levels against closed forms.
import { expect, test } from "vitest";
import {
  densityMoments,
  densityQuantile,
  highestDensityLevel,
  normalised,
  trapezoid,
} from "../../../src/numerics/density.ts";
import { normalQuantile } from "../../../src/numerics/statistics.ts";

const grid = (a: number, b: number, n: number) =>
  Float64Array.from({ length: n }, (_, i) => a + ((b - a) * i) / (n - 1));

test("a straight line is integrated exactly, and its quantiles are roots of a square", () => {
  const x = grid(0, 1, 11);
  const line = normalised(
    x,
    x.map((u) => 2 * u),
  );
  expect(trapezoid(line.x, line.density)).toBeCloseTo(1, 14);
  // P(below x) = x^2.
  for (const q of [0.01, 0.16, 0.5, 0.84, 0.975]) expect(densityQuantile(line, q)).toBeCloseTo(Math.sqrt(q), 13);
  expect(densityQuantile(line, 0)).toBe(0);
  expect(densityQuantile(line, 1)).toBeCloseTo(1, 13);
});

test("quantiles and moments of a Gaussian, the error falling as the square of the spacing", () => {
  const gaussian = (n: number) => {
    const x = grid(-9, 9, n);
    return normalised(
      x,
      x.map((u) => Math.exp((-u * u) / 2)),
    );
  };
  const error = (n: number) => Math.abs(densityQuantile(gaussian(n), 0.84) - normalQuantile(0.84));
  expect(error(2001)).toBeLessThan(1e-5);
  expect(Math.abs(Math.log2(error(91) / error(181)) - 2)).toBeLessThan(0.2);
  const { mean, sigma } = densityMoments(gaussian(2001));
  expect(Math.abs(mean)).toBeLessThan(1e-12);
  expect(Math.abs(sigma - 1)).toBeLessThan(1e-12);
});

test("the region of highest density of a two-dimensional Gaussian: -2 ln(level) = -2 ln(1 - q)", () => {
  const x = grid(-6, 6, 401);
  const values = Float64Array.from({ length: 401 * 401 }, (_, at) =>
    Math.exp(-(x[Math.floor(at / 401)] ** 2 + x[at % 401] ** 2) / 2),
  );
  for (const q of [0.6827, 0.9545])
    expect(Math.abs(highestDensityLevel(values, q) - (1 - q))).toBeLessThan(2e-3 * (1 - q));
});

test("what is no density is refused", () => {
  expect(() => normalised([0, 1], [0, 0])).toThrow(RangeError);
  expect(() => normalised([0, 1], [Number.NaN, 1])).toThrow(RangeError);
});
