// Contours by marching squares: circles, saddles, lines that leave the grid.
import { expect, test } from "vitest";
import { contourLines } from "../../../src/numerics/contour.ts";

const grid = (a: number, b: number, n: number) =>
  Float64Array.from({ length: n }, (_, i) => a + ((b - a) * i) / (n - 1));

function table(x: Float64Array, y: Float64Array, f: (x: number, y: number) => number): Float64Array {
  return Float64Array.from({ length: x.length * y.length }, (_, at) =>
    f(x[Math.floor(at / y.length)], y[at % y.length]),
  );
}

test("a cone is cut in a circle, closed, the error falling as the square of the spacing", () => {
  const error = (n: number) => {
    const x = grid(-2, 2, n);
    const y = grid(-1.9, 2.1, n + 1);
    const lines = contourLines(
      x,
      y,
      table(x, y, (u, v) => -Math.hypot(u, v)),
      -1.3,
    );
    expect(lines).toHaveLength(1);
    expect(lines[0][0]).toEqual(lines[0].at(-1));
    // Every crossed edge of the grid is one point.
    expect(lines[0].length).toBeGreaterThan(2 * n);
    return Math.max(...lines[0].map(([u, v]) => Math.abs(Math.hypot(u, v) - 1.3)));
  };
  expect(error(81)).toBeLessThan(1e-3);
  expect(Math.abs(Math.log2(error(41) / error(81)) - 2)).toBeLessThan(0.5);
});

test("a plane is cut in one straight line from rim to rim", () => {
  const x = grid(0, 1, 6);
  const lines = contourLines(
    x,
    x,
    table(x, x, (u, v) => u + 2 * v),
    1.07,
  );
  expect(lines).toHaveLength(1);
  for (const [u, v] of lines[0]) expect(Math.abs(u + 2 * v - 1.07)).toBeLessThan(1e-12);
  const ends = [lines[0][0], lines[0].at(-1) as readonly [number, number]];
  for (const [u, v] of ends) expect([u, v].some((c) => c === 0 || c === 1)).toBe(true);
});

test("two peaks give two closed lines; a saddle does not cross itself", () => {
  const x = grid(-3, 3, 61);
  const peaks = table(x, x, (u, v) => Math.exp(-((u - 1.5) ** 2) - v * v) + Math.exp(-((u + 1.5) ** 2) - v * v));
  expect(contourLines(x, x, peaks, 0.5)).toHaveLength(2);
  const saddle = contourLines(
    x,
    x,
    table(x, x, (u, v) => u * v),
    0.3,
  );
  expect(saddle).toHaveLength(2);
  for (const [u, v] of saddle.flat()) expect(Math.abs(u * v - 0.3)).toBeLessThan(0.01);
});

test("no crossing, no line; a grid that does not fit is refused", () => {
  const x = grid(0, 1, 4);
  expect(contourLines(x, x, new Float64Array(16), 1)).toEqual([]);
  expect(() => contourLines(x, x, new Float64Array(15), 1)).toThrow(RangeError);
});
