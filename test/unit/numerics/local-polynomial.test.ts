/** Local polynomials: exact for their degree, order in the spacing, steady on spacings that jump. */
import { describe, expect, test } from "vitest";
import { localPolynomials } from "../../../src/numerics/local-polynomial.ts";
import { seededUniform } from "../../../src/numerics/random.ts";

const grid = (n: number) => Array.from({ length: n + 1 }, (_, i) => -1 + (2 * i) / n);

test.each([2, 3, 4, 6, 8])("%i points reproduce polynomials below that degree, also near the ends", (size) => {
  const random = seededUniform(11);
  const x = grid(20).map((v) => v + 0.03 * random());
  for (let degree = 0; degree < size; degree++) {
    const [p] = localPolynomials(x, [x.map((v) => v ** degree)], size);
    for (let i = 0; i < 50; i++) {
      const v = x[0] + (x[20] - x[0]) * random();
      expect(Math.abs(p.value(v) - v ** degree), `degree ${degree} at ${v}`).toBeLessThan(1e-12);
    }
  }
});

test.each([4, 6, 8])("order of convergence is %i", (size) => {
  const error = (n: number) => {
    const x = grid(n);
    const [p] = localPolynomials(x, [x.map((v) => Math.exp(Math.sin(3 * v)))], size);
    let worst = 0;
    for (let k = 0; k < 400; k++) {
      const v = -0.6 + (1.2 * k) / 400;
      worst = Math.max(worst, Math.abs(p.value(v) - Math.exp(Math.sin(3 * v))));
    }
    return worst;
  };
  // Even point numbers are symmetric about the interval; the error is that of the next power, size itself.
  const order = Math.log2(error(40) / error(80));
  expect(Math.abs(order - size)).toBeLessThan(0.4);
});

describe("spacings that jump by a factor of a million", () => {
  const x: number[] = [0];
  for (let i = 0; i < 12; i++) x.push(x[x.length - 1] + 0.1);
  for (let i = 0; i < 12; i++) x.push(x[x.length - 1] + 1e-7);
  for (let i = 0; i < 12; i++) x.push(x[x.length - 1] + 0.1);

  test("noise of the ordinates is not amplified", () => {
    const random = seededUniform(5);
    const noise = 1e-4;
    const [p] = localPolynomials(x, [x.map((v) => Math.cos(v) + noise * (random() - 0.5))], 8);
    for (let v = 0; v < x[x.length - 1]; v += 0.0037)
      expect(Math.abs(p.value(v) - Math.cos(v)), `at ${v}`).toBeLessThan(10 * noise);
  });

  test("a smooth function is met to 1e-9 everywhere", () => {
    const [p] = localPolynomials(x, [x.map(Math.cos)], 8);
    for (let v = 0; v < x[x.length - 1]; v += 0.0037) expect(Math.abs(p.value(v) - Math.cos(v))).toBeLessThan(1e-9);
  });
});

test("values at the points are those given, and an interval that is known gives the same value", () => {
  const x = [0, 1, 3, 4, 7, 8];
  const y = [5, -1, 2, 2, 9, 0];
  const [p] = localPolynomials(x, [y]);
  expect(x.map((v) => p.value(v))).toEqual(y);
  expect(p.value(3.5, 2)).toBe(p.value(3.5));
});

test("abscissae that do not increase, too few, or not as many ordinates are refused", () => {
  expect(() => localPolynomials([0, 0, 1], [[1, 2, 3]])).toThrow("abscissae must increase, but 0 follows 0");
  expect(() => localPolynomials([0], [[1]])).toThrow("at least two points, got 1");
  expect(() => localPolynomials([0, 1], [[1]])).toThrow("2 abscissae but 1 ordinates");
});
