/** Gauss-Legendre rules and the adaptive integral: exactness, convergence, known integrals, failures. */
import { describe, expect, test } from "vitest";
import { CalculationError } from "../../../src/numerics/check.ts";
import { gaussLegendre, integrateAdaptive, integrateGauss, integratePanels } from "../../../src/numerics/quadrature.ts";
import { seededUniform } from "../../../src/numerics/random.ts";

describe("Gauss-Legendre rules", () => {
  test.each([1, 2, 3, 5, 8, 21, 64, 240])("%i points: weights add to 2, nodes rise and are symmetric", (n) => {
    const { nodes, weights } = gaussLegendre(n);
    expect(Math.abs(weights.reduce((a, b) => a + b, 0) - 2)).toBeLessThan(2e-14);
    for (let i = 0; i < n; i++) {
      expect(nodes[i]).toBeCloseTo(-nodes[n - 1 - i], 15);
      expect(weights[i]).toBeGreaterThan(0);
      if (i > 0) expect(nodes[i]).toBeGreaterThan(nodes[i - 1]);
    }
  });

  test.each([1, 2, 3, 4, 7, 12])("%i points integrate polynomials of degree 2n - 1, and not of degree 2n", (n) => {
    for (let degree = 0; degree <= 2 * n; degree++) {
      const exact = (2 ** (degree + 1) - 1) / (degree + 1);
      const error = Math.abs(integrateGauss((x) => x ** degree, 1, 2, n) / exact - 1);
      if (degree < 2 * n) expect(error, `degree ${degree}`).toBeLessThan(1e-13);
    }
    // The error of degree 2n on [-1, 1] is 2^(2n+1) n!^4/((2n+1) (2n)!^2), Abramowitz & Stegun 1964, 25.4.29.
    let factorials = 1;
    for (let k = 1; k <= n; k++) factorials *= k / (n + k);
    const expected = (2 ** (2 * n + 1) / (2 * n + 1)) * factorials ** 2;
    const error = 2 / (2 * n + 1) - integrateGauss((x) => x ** (2 * n), -1, 1, n);
    expect(Math.abs(error / expected - 1)).toBeLessThan(1e-5);
  });

  // Abramowitz & Stegun 1964, table 25.4.
  test("five points as tabulated", () => {
    const { nodes, weights } = gaussLegendre(5);
    expect(nodes[4]).toBeCloseTo(0.906179845938664, 14);
    expect(nodes[3]).toBeCloseTo(0.538469310105683, 14);
    expect(weights[4]).toBeCloseTo(0.236926885056189, 14);
    expect(weights[2]).toBeCloseTo(0.568888888888889, 14);
  });

  test("the same rule is not computed twice", () => expect(gaussLegendre(17)).toBe(gaussLegendre(17)));
});

test("panels: a kink at an edge does no harm", () => {
  expect(integratePanels(Math.abs, [-1, 0, 2], 4)).toBeCloseTo(2.5, 14);
  expect(integrateGauss(Math.abs, -1, 2, 4)).not.toBeCloseTo(2.5, 6);
});

describe("adaptive integral", () => {
  test.each([
    ["a narrow peak", (x: number) => 1e-3 / (x * x + 1e-6), -1, 2, Math.atan(2e3) + Math.atan(1e3)],
    ["an oscillation", (x: number) => Math.sin(200 * x), 0, 1, (1 - Math.cos(200)) / 200],
    ["a singular derivative", Math.sqrt, 0, 1, 2 / 3],
    ["a kink", (x: number) => Math.abs(x - 1 / 3), 0, 1, 5 / 18],
    ["a logarithm", (x: number) => Math.log(x), 0, 1, -1],
    ["reversed limits", Math.exp, 1, 0, 1 - Math.E],
  ] as const)("%s", (_name, f, a, b, exact) => {
    const { value, error } = integrateAdaptive(f, a, b, 1e-11);
    expect(Math.abs(value / exact - 1)).toBeLessThan(1e-10);
    expect(Math.abs(value - exact)).toBeLessThan(error + 1e-13);
  });

  test("an integral of zero needs an absolute tolerance, and has one", () => {
    expect(Math.abs(integrateAdaptive(Math.sin, -1, 1, 1e-12, 1e-12).value)).toBeLessThan(1e-12);
  });

  test("a function that is not finite, or has no integral to the tolerance, throws", () => {
    expect(() => integrateAdaptive(() => Number.NaN, 0, 1)).toThrow(CalculationError);
    expect(() => integrateAdaptive(() => Number.NaN, 0, 1)).toThrow("integral over [0, 1] is not finite");
    const noise = seededUniform(1);
    expect(() => integrateAdaptive(noise, 0, 1, 1e-12)).toThrow(/error .* above tolerance/);
  });
});
