// Interpolation of a grid: exact for cubics, of fourth order, at places that depend on the seed alone.
import { expect, test } from "vitest";
import { parseAxis } from "../../../src/sweep/axis.ts";
import { gridCoordinates, interpolateGrid, randomPoints } from "../../../src/sweep/grid-interpolation.ts";

const axis = (text: string) => parseAxis(text, (name) => name);

test("products of cubics in the axes are interpolated exactly, on three axes in any order of values", () => {
  const f = (x: number, y: number, z: number) => (1 + x ** 3) * (2 - y ** 2) * (3 + z - z ** 3);
  const u = [
    [0, 0.7, 0.3, 1],
    [0, 0.2, 0.5, 0.9, 1],
    [1, 0.6, 0.4, 0],
  ];
  const values = u[0].flatMap((x) => u[1].flatMap((y) => u[2].map((z) => f(x, y, z))));
  for (const at of [
    [0.1, 0.33, 0.5],
    [0.95, 0.05, 0.99],
    [0.5, 0.5, 0.2],
  ])
    expect(interpolateGrid(u, values, at)).toBeCloseTo(f(at[0], at[1], at[2]), 12);
});

test("halving the spacing of both axes makes the error 16 times smaller", () => {
  const f = (x: number, y: number) => Math.exp(x) * Math.sin(2 * y);
  const error = (n: number) => {
    const u = [0, 1].map(() => Array.from({ length: n + 1 }, (_, i) => i / n));
    const values = u[0].flatMap((x) => u[1].map((y) => f(x, y)));
    // In the middle of the middle cells: there the ends no longer matter.
    const at = [0.5 + 0.5 / n, 0.5 + 0.5 / n];
    return Math.abs(interpolateGrid(u, values, at) - f(at[0], at[1]));
  };
  const order = Math.log2(error(16) / error(32));
  expect(Math.abs(order - 4)).toBeLessThan(0.2);
});

test("random points lie inside the axes and follow from the seed", () => {
  const axes = [axis("omegaB=0.018:0.027:5"), axis("eta10=1:100:4log")];
  const points = randomPoints(axes, 50, 7);
  expect(randomPoints(axes, 50, 7)).toEqual(points);
  expect(randomPoints(axes, 50, 8)).not.toEqual(points);
  for (const { values, at } of points) {
    expect(values[0]).toBeGreaterThanOrEqual(0.018);
    expect(values[0]).toBeLessThanOrEqual(0.027);
    expect(values[1]).toBeGreaterThanOrEqual(1);
    expect(values[1]).toBeLessThanOrEqual(100);
    expect(at[1]).toBeCloseTo(Math.log(values[1]), 12);
  }
  expect(gridCoordinates(axes)[1][3]).toBeCloseTo(Math.log(100), 12);
});
