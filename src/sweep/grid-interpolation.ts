/** How well a grid can be interpolated: tensor products of cubic splines, measured at random points between its own. */
import { notAKnotSpline } from "../numerics/interpolate.ts";
import { seededUniform } from "../numerics/random.ts";
import type { Axis } from "./axis.ts";
import { coordinate } from "./bands.ts";

/** Coordinates of a grid in which it is interpolated: the logarithm of an axis that is logarithmic or spans a factor of 3. */
export function gridCoordinates(axes: readonly Axis[]): number[][] {
  return axes.map((axis) => coordinate(axis.values, axis.log));
}

/**
 * Value between the points of a grid: cubic splines with not-a-knot ends along the last axis, then along the one before
 * it, and so on ("bicubic" for two axes). Fourth order in each spacing.
 * @param u      coordinates of each axis; in any order, none twice
 * @param values in the order of the points, the last axis fastest
 * @param at     one coordinate an axis, within its range
 */
export function interpolateGrid(
  u: readonly (readonly number[])[],
  values: ArrayLike<number>,
  at: readonly number[],
): number {
  let level = Array.from(values);
  for (let a = u.length - 1; a >= 0; a--) {
    const order = u[a].map((_, i) => i).sort((i, j) => u[a][i] - u[a][j]);
    const x = order.map((i) => u[a][i]);
    const n = x.length;
    level = Array.from({ length: level.length / n }, (_, row) => {
      const y = order.map((i) => level[row * n + i]);
      return n === 1 ? y[0] : notAKnotSpline(x, y).value(at[a]);
    });
  }
  return level[0];
}

/** Random points inside a grid, even in its coordinates: values of the axes and the coordinates themselves. */
export function randomPoints(axes: readonly Axis[], count: number, seed: number): { values: number[]; at: number[] }[] {
  const random = seededUniform(seed);
  const u = gridCoordinates(axes);
  return Array.from({ length: count }, () => {
    const at = u.map((x) => {
      const low = Math.min(...x);
      const high = Math.max(...x);
      return low + (high - low) * random();
    });
    const values = at.map((x, a) => (u[a][0] === axes[a].values[0] ? x : Math.exp(x)));
    return { values, at: values.map((value, a) => (u[a][0] === axes[a].values[0] ? value : Math.log(value))) };
  });
}
