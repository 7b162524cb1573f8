// Chebyshev interpolation: exact for polynomials, spectral for smooth functions, refused outside.
import { expect, test } from "vitest";
import { ChebyshevInterpolant, chebyshevPoints, lagrangeWeights } from "../../../src/numerics/chebyshev.ts";

test("the points of n are among those of 2n - 1, and the ends are exact", () => {
  const fine = chebyshevPoints(17, 0.1, 0.7);
  expect(fine[0]).toBe(0.1);
  expect(fine[16]).toBe(0.7);
  for (const x of chebyshevPoints(9, 0.1, 0.7)) expect([...fine]).toContain(x);
  expect([...chebyshevPoints(1, 2, 4)]).toEqual([3]);
});

test("a polynomial of degree n - 1 comes back to rounding", () => {
  const points = chebyshevPoints(7, -1, 2);
  const f = (x: number) => 3 * x ** 6 - x ** 5 + 2 * x - 1;
  for (const x of [-1, -0.3, 0.5, 1.99, 2]) {
    const value = lagrangeWeights(points, x).reduce((sum, w, k) => sum + w * f(points[k]), 0);
    expect(Math.abs(value - f(x))).toBeLessThan(1e-11);
  }
});

// Runge's function 1/(1 + 25 x^2) has poles at +-i/5: the error falls as rho^-n, rho = (1 + sqrt(26))/5 = 1.2198
// (Trefethen 2013, ch. 8).
test("the error falls geometrically at the rate the nearest pole sets", () => {
  const error = (n: number) => {
    const points = chebyshevPoints(n, -1, 1);
    let worst = 0;
    for (let x = -0.995; x < 1; x += 0.01) {
      const value = lagrangeWeights(points, x).reduce((sum, w, k) => sum + w / (1 + 25 * points[k] ** 2), 0);
      worst = Math.max(worst, Math.abs(value - 1 / (1 + 25 * x * x)));
    }
    return worst;
  };
  const rate = (error(41) / error(81)) ** (1 / 40);
  expect(Math.abs(rate - (1 + Math.sqrt(26)) / 5)).toBeLessThan(0.01);
});

test("products of polynomials in three variables come back, several outputs at once", () => {
  const axes = [chebyshevPoints(4, 0, 1), chebyshevPoints(3, -1, 1), chebyshevPoints(2, 5, 6)];
  const f = ([x, y, z]: readonly number[]) => [x ** 3 * y ** 2 * z, 1 - x * y + z];
  const values = [...axes[0]].flatMap((x) => [...axes[1]].flatMap((y) => [...axes[2]].flatMap((z) => f([x, y, z]))));
  const interpolant = new ChebyshevInterpolant(axes, 2, Float64Array.from(values));
  for (const point of [
    [0.2, 0.3, 5.9],
    [0, -1, 5],
    [1, 1, 6],
  ]) {
    const out = interpolant.evaluate(point, new Float64Array(2));
    f(point).forEach((expected, i) => {
      expect(Math.abs(out[i] - expected)).toBeLessThan(1e-13);
    });
  }
});

test("outside its range, or with values that do not fit, it refuses", () => {
  const axes = [chebyshevPoints(3, 0, 1)];
  const interpolant = new ChebyshevInterpolant(axes, 1, new Float64Array(3));
  for (const x of [-1e-12, 1.0001, Number.NaN])
    expect(() => interpolant.evaluate([x], new Float64Array(1))).toThrow(RangeError);
  expect(() => new ChebyshevInterpolant(axes, 2, new Float64Array(5))).toThrow(RangeError);
  expect(() => chebyshevPoints(0, 0, 1)).toThrow(RangeError);
});
