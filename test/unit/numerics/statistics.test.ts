// Distributions against tabulated values and closed forms; sample summaries against small samples worked out by hand.
import { describe, expect, test } from "vitest";
import {
  chiSquaredCdf,
  chiSquaredSurvival,
  covariance,
  incompleteGamma,
  mean,
  normalCdf,
  normalQuantile,
  sortedQuantile,
} from "../../../src/numerics/statistics.ts";

const relative = (value: number, expected: number) => Math.abs(value / expected - 1);

describe("normal distribution", () => {
  // Abramowitz & Stegun 1964, table 26.1: P(x) to 15 decimals.
  test.each([
    [0.5, 0.691462461274013],
    [1, 0.841344746068543],
    [1.96, 0.97500210485178],
    [2, 0.97724986805182],
    [3, 0.99865010196837],
  ])("P(%s) = %s", (x, P) => {
    expect(Math.abs(normalCdf(x) - P)).toBeLessThan(1e-14);
    expect(Math.abs(normalCdf(-x) - (1 - P))).toBeLessThan(1e-14);
  });

  // Shares within one, two, three, five standard deviations, erf(n/sqrt 2): Particle Data Group, Review of Particle
  // Physics, section Statistics, table of confidence levels: alpha = 0.3173, 4.55e-2, 2.7e-3, 5.7e-7; digits by A & S 7.1.
  test.each([
    [1, 0.317310507862914],
    [2, 0.0455002638963584],
    [3, 0.00269979606326019],
    [5, 5.73303143758389e-7],
  ])("outside %s sigma: %s", (n, alpha) => {
    expect(relative(2 * normalCdf(-n), alpha)).toBeLessThan(1e-9);
  });

  // Wichura 1988, Appl. Statist. 37, 477 (algorithm AS 241), test values of the quantile.
  test.each([
    [0.25, -0.6744897501960817],
    [0.001, -3.090232306167814],
    [1e-20, -9.262340089798408],
  ])("quantile of %s", (p, x) => {
    expect(Math.abs(normalQuantile(p) - x)).toBeLessThan(1e-12 * Math.abs(x));
  });

  // Abramowitz & Stegun 1964, table 26.5.
  test.each([
    [0.975, 1.959963984540054],
    [0.995, 2.5758293035489],
    [0.95, 1.644853626951473],
  ])("quantile of %s, upper", (p, x) => {
    expect(Math.abs(normalQuantile(p) - x)).toBeLessThan(1e-12);
  });

  test("the quantile inverts the distribution over 300 decades", () => {
    for (let power = -300; power < 0; power += 7) {
      const p = 10 ** power;
      expect(relative(normalCdf(normalQuantile(p)), p), `p = ${p}`).toBeLessThan(1e-11);
    }
    expect(normalQuantile(0.5)).toBe(0);
  });

  test("what is no probability is refused", () => {
    for (const p of [0, 1, -0.1, 1.1, Number.NaN]) expect(() => normalQuantile(p)).toThrow(RangeError);
  });
});

describe("chi-squared distribution", () => {
  // Abramowitz & Stegun 1964, table 26.8: percentage points to 6 figures, and the closed forms of k = 1, 2, 4.
  test.each([
    [1, 3.84146, 0.05],
    [2, 5.99146, 0.05],
    [10, 18.307, 0.05],
    [30, 50.8922, 0.01],
    [100, 124.342, 0.05],
  ])("k = %s: %s is exceeded with probability %s", (k, x, Q) => {
    expect(relative(chiSquaredSurvival(x, k), Q)).toBeLessThan(5e-5);
  });

  test("closed forms: k = 2 and 4 by elementary functions, k = 1 by the normal distribution, to 1e-9 and better", () => {
    for (const x of [1e-6, 0.01, 0.5, 1, 3, 10, 40, 200]) {
      expect(relative(chiSquaredSurvival(x, 2), Math.exp(-x / 2))).toBeLessThan(1e-12);
      expect(relative(chiSquaredSurvival(x, 4), Math.exp(-x / 2) * (1 + x / 2))).toBeLessThan(1e-12);
      expect(relative(chiSquaredSurvival(x, 1), 2 * normalCdf(-Math.sqrt(x)))).toBeLessThan(1e-12);
      expect(relative(chiSquaredCdf(x, 2), -Math.expm1(-x / 2))).toBeLessThan(1e-9);
    }
  });

  // 3.841458820694124 and 5.991464547107979 = -2 ln 0.05: the square of 1.959963984540054, and the closed form.
  test("95 % points of one and two degrees of freedom", () => {
    expect(Math.abs(chiSquaredCdf(1.959963984540054 ** 2, 1) - 0.95)).toBeLessThan(1e-12);
    expect(Math.abs(chiSquaredCdf(-2 * Math.log(0.05), 2) - 0.95)).toBeLessThan(1e-12);
  });

  test("recurrence: Q(x; k + 2) - Q(x; k) = (x/2)^(k/2) e^(-x/2)/Gamma(k/2 + 1)", () => {
    let gamma = Math.sqrt(Math.PI) / 2; // Gamma(3/2), of k = 1
    for (let k = 1; k < 40; k += 2) {
      const x = 0.8 * k + 1;
      const step = ((x / 2) ** (k / 2) * Math.exp(-x / 2)) / gamma;
      const difference = chiSquaredSurvival(x, k + 2) - chiSquaredSurvival(x, k);
      expect(Math.abs(difference - step)).toBeLessThan(1e-13);
      gamma *= k / 2 + 1;
    }
  });

  test("nothing lies below 0", () => {
    expect(chiSquaredCdf(0, 3)).toBe(0);
    expect(chiSquaredSurvival(-1, 3)).toBe(1);
  });
});

test("incomplete gamma functions of half-integers add to one and refuse what they cannot", () => {
  for (const a of [0.5, 1, 2.5, 7, 30])
    for (const x of [0, 0.1, a, 3 * a, 100]) {
      const { P, Q } = incompleteGamma(a, x);
      expect(Math.abs(P + Q - 1)).toBeLessThan(1e-14);
    }
  expect(() => incompleteGamma(0.2, 1)).toThrow(RangeError);
  expect(() => incompleteGamma(1, -1)).toThrow(RangeError);
});

describe("samples", () => {
  test("mean and covariance of a small sample", () => {
    expect(mean([1, 2, 6])).toBe(3);
    // Deviations -2 -1 3 and 1 0 -1: sum of products -5, divisor 2.
    expect(covariance([1, 2, 6], [4, 3, 2])).toBe(-2.5);
  });

  // Hyndman & Fan 1996, Am. Stat. 50, 361, type 7.
  test("quantiles between order statistics", () => {
    expect(sortedQuantile([1, 2, 3, 4], 0.5)).toBe(2.5);
    expect(sortedQuantile([1, 2, 3, 4], 0)).toBe(1);
    expect(sortedQuantile([1, 2, 3, 4], 1)).toBe(4);
    expect(sortedQuantile([10, 20], 0.16)).toBeCloseTo(11.6, 12);
    expect(sortedQuantile([5], 0.3)).toBe(5);
  });
});
