// Sobol points: published digits, evenness that scrambling keeps, uniformity, and the order of the error.
import { describe, expect, test } from "vitest";
import { mixBits, owenScramble, SOBOL_DIMENSIONS, scrambledSobol, sobolDigits } from "../../../src/numerics/sobol.ts";

// The first eight points of Joe & Kuo 2008 in dimensions 1, 2, 3, 6, 16 and 32, as SciPy's Sobol gives them (in the order
// of the Gray code, put in natural order here).
test.each([
  [0, [0, 0.5, 0.25, 0.75, 0.125, 0.625, 0.375, 0.875]],
  [1, [0, 0.5, 0.75, 0.25, 0.625, 0.125, 0.375, 0.875]],
  [2, [0, 0.5, 0.75, 0.25, 0.375, 0.875, 0.625, 0.125]],
  [5, [0, 0.5, 0.25, 0.75, 0.375, 0.875, 0.125, 0.625]],
  [15, [0, 0.5, 0.75, 0.25, 0.125, 0.625, 0.875, 0.375]],
  [31, [0, 0.5, 0.75, 0.25, 0.875, 0.375, 0.125, 0.625]],
])("dimension %s", (dimension, points) => {
  expect(points.map((_, i) => sobolDigits(i, dimension) / 2 ** 32)).toEqual(points);
});

describe("evenness", () => {
  const n = 256;
  const keys = [0, 1, 12345];

  test("each interval of length 1/256 holds one of 256 points, in every dimension, scrambled or not", () => {
    for (let d = 0; d < SOBOL_DIMENSIONS; d++)
      for (const key of [undefined, ...keys]) {
        const cells = Array.from({ length: n }, (_, i) => {
          const digits = sobolDigits(i, d);
          return (key === undefined ? digits : owenScramble(digits, key)) >>> 24;
        });
        expect(new Set(cells).size, `dimension ${d}, key ${key}`).toBe(n);
      }
  });

  test("each rectangle of area 1/256 holds one point of the first two dimensions", () => {
    for (let a = 0; a <= 8; a++) {
      const cells = Array.from({ length: n }, (_, i) => {
        const x = owenScramble(sobolDigits(i, 0), 7);
        const y = owenScramble(sobolDigits(i, 1), 8);
        return Math.floor(x / 2 ** (32 - a)) * 2 ** (8 - a) + Math.floor(y / 2 ** (24 + a));
      });
      expect(new Set(cells).size, `2^${a} by 2^${8 - a}`).toBe(n);
    }
  });
});

test("one point is uniform over the keys: mean 1/2, variance 1/12, no digit preferred", () => {
  const n = 4000;
  const x = Array.from({ length: n }, (_, k) => scrambledSobol(5, 3, mixBits(k)));
  const mean = x.reduce((a, b) => a + b, 0) / n;
  const variance = x.reduce((a, b) => a + (b - mean) ** 2, 0) / n;
  // 4 standard errors: of the mean 1/sqrt(12 n), of the variance sqrt(1/180 n).
  expect(Math.abs(mean - 0.5)).toBeLessThan(4 / Math.sqrt(12 * n));
  expect(Math.abs(variance - 1 / 12)).toBeLessThan(4 / Math.sqrt(180 * n));
  for (let bit = 1; bit <= 20; bit++) {
    const ones = x.filter((u) => Math.floor(u * 2 ** bit) % 2 === 1).length;
    expect(Math.abs(ones / n - 0.5), `digit ${bit}`).toBeLessThan(4 * Math.sqrt(0.25 / n));
  }
});

// For a smooth function the error of scrambled points falls as n^-1.5 (Owen 1997), of independent ones as n^-0.5.
test("the error of a smooth integral falls faster than 1/n", () => {
  const f = (index: number, key: number) => {
    let product = 1;
    for (let d = 0; d < 4; d++) product *= 1 + 0.5 * (scrambledSobol(index, d, mixBits(key * 4 + d)) - 0.5);
    return product;
  };
  const error = (n: number) => {
    let sum = 0;
    for (let key = 0; key < 20; key++) {
      let mean = 0;
      for (let i = 0; i < n; i++) mean += f(i, key) / n;
      sum += (mean - 1) ** 2;
    }
    return Math.sqrt(sum / 20);
  };
  const order = Math.log2(error(64) / error(1024)) / 4;
  expect(order).toBeGreaterThan(1.2);
});

test("what does not exist is refused", () => {
  for (const [index, dimension] of [
    [-1, 0],
    [2 ** 32, 0],
    [0, -1],
    [0, SOBOL_DIMENSIONS],
  ])
    expect(() => sobolDigits(index, dimension)).toThrow(RangeError);
});
