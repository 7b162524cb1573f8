/** Splines with not-a-knot ends, Hermite pieces and look-up: exactness, order, continuity, refusals. */
import { describe, expect, test } from "vitest";
import {
  hermite,
  hermiteDerivative,
  hermiteSpline,
  intervalOf,
  notAKnotSlopes,
  notAKnotSpline,
} from "../../../src/numerics/interpolate.ts";
import { seededUniform } from "../../../src/numerics/random.ts";

describe("cubic spline with not-a-knot ends", () => {
  test.each([2, 3, 4, 5, 20])("%i points: polynomials up to the cubic are met exactly", (n) => {
    const random = seededUniform(3);
    const x = Array.from({ length: n }, (_, i) => i + 0.6 * random());
    for (let degree = 0; degree <= Math.min(3, n - 1); degree++) {
      const spline = notAKnotSpline(
        x,
        x.map((v) => v ** degree),
      );
      for (let i = 0; i < 30; i++) {
        const v = x[0] + (x[n - 1] - x[0]) * random();
        const scale = Math.max(1, v ** degree);
        expect(Math.abs(spline.value(v) - v ** degree) / scale, `degree ${degree} at ${v}`).toBeLessThan(1e-11);
        const slope = degree === 0 ? 0 : degree * v ** (degree - 1);
        expect(Math.abs(spline.derivative(v) - slope) / Math.max(1, slope)).toBeLessThan(1e-10);
      }
    }
  });

  test("order of convergence is 4 in the value and 3 in the slope, ends included", () => {
    const f = (v: number) => Math.exp(Math.sin(v));
    const errors = [160, 320, 640].map((n) => {
      const x = Array.from({ length: n + 1 }, (_, i) => (4 * i) / n);
      const spline = notAKnotSpline(x, x.map(f));
      let value = 0;
      let slope = 0;
      for (let v = 0.0003; v < 4; v += 0.00071) {
        value = Math.max(value, Math.abs(spline.value(v) - f(v)));
        slope = Math.max(slope, Math.abs(spline.derivative(v) - Math.cos(v) * f(v)));
      }
      return { value, slope };
    });
    expect(Math.abs(Math.log2(errors[1].value / errors[2].value) - 4)).toBeLessThan(0.2);
    expect(Math.abs(Math.log2(errors[1].slope / errors[2].slope) - 3)).toBeLessThan(0.2);
  });

  test("second derivative is continuous at inner points, third at the second and the last but one", () => {
    const random = seededUniform(9);
    const x = [0];
    for (let i = 0; i < 8; i++) x.push(x[i] + 0.2 + random());
    const y = x.map(() => random());
    const { slope } = notAKnotSpline(x, y);
    const secondAndThird = (i: number, end: 0 | 1) => {
      const h = x[i + 1] - x[i];
      const d = (y[i + 1] - y[i]) / h;
      const a = (slope[i] + slope[i + 1] - 2 * d) / h ** 2;
      const b = (3 * d - 2 * slope[i] - slope[i + 1]) / h;
      return [2 * b + 6 * a * h * end, 6 * a];
    };
    for (let i = 1; i < 8; i++) expect(secondAndThird(i - 1, 1)[0]).toBeCloseTo(secondAndThird(i, 0)[0], 10);
    for (const i of [1, 7]) expect(secondAndThird(i - 1, 1)[1]).toBeCloseTo(secondAndThird(i, 0)[1], 9);
  });

  test("abscissae that do not increase, one point, or lengths that differ are refused", () => {
    expect(() => notAKnotSlopes([0, 1, 1], [1, 2, 3])).toThrow("spline abscissae must increase, but 1 follows 1");
    expect(() => notAKnotSlopes([0, Number.NaN], [1, 2])).toThrow("must increase");
    expect(() => notAKnotSlopes([0], [1])).toThrow("at least two points, got 1");
    expect(() => notAKnotSlopes([0, 1], [1])).toThrow(RangeError);
  });
});

describe("Hermite pieces", () => {
  test("values and slopes at both ends, and a cubic between them", () => {
    const f = (v: number) => 2 * v ** 3 - v + 1;
    const g = (v: number) => 6 * v ** 2 - 1;
    for (const u of [0, 0.2, 0.5, 0.9, 1]) {
      const v = 1 + 3 * u;
      expect(hermite(u, 3, f(1), g(1), f(4), g(4))).toBeCloseTo(f(v), 11);
      expect(hermiteDerivative(u, 3, f(1), g(1), f(4), g(4))).toBeCloseTo(g(v), 11);
    }
  });

  test("a piecewise cubic keeps what it was given", () => {
    const p = hermiteSpline([0, 1, 3], [1, 2, 0], [0, -1, 5]);
    expect([0, 1, 3].map((v) => p.value(v))).toEqual([1, 2, 0]);
    expect(p.derivative(0)).toBeCloseTo(0, 14);
    expect(p.derivative(1)).toBeCloseTo(-1, 14);
    expect(p.derivative(3)).toBeCloseTo(5, 13);
  });
});

test("intervalOf: x[i] <= v < x[i+1], clamped to the table", () => {
  const x = [0, 1, 2.5, 4];
  for (const [v, i] of [
    [-1, 0],
    [0, 0],
    [0.99, 0],
    [1, 1],
    [2.5, 2],
    [4, 2],
    [9, 2],
  ])
    expect(intervalOf(x, v), `at ${v}`).toBe(i);
});
