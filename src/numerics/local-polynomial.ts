/** Local polynomial interpolation: on each interval the polynomial through the nearest points of a non-uniform grid. */
import { intervalOf } from "./interpolate.ts";

export interface LocalPolynomial {
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** Value at v; `interval` (x[i] <= v <= x[i+1]) saves the search where the caller knows it. */
  value(v: number, interval?: number): number;
}

/** Stencil starts and barycentric weights of a grid, shared by every function tabulated on it. */
interface Stencils {
  readonly size: number;
  readonly weights: Float64Array;
}

function stencilStart(interval: number, n: number, size: number): number {
  return Math.min(Math.max(0, interval + 1 - (size >> 1)), n - size);
}

function stencils(x: Float64Array, size: number): Stencils {
  const starts = x.length - size + 1;
  const weights = new Float64Array(starts * size);
  for (let start = 0; start < starts; start++)
    for (let i = 0; i < size; i++) {
      let product = 1;
      for (let j = 0; j < size; j++) if (j !== i) product *= x[start + i] - x[start + j];
      weights[start * size + i] = 1 / product;
    }
  return { size, weights };
}

/**
 * Interpolants of several functions on one grid, each through the `size` points nearest to the interval in which the
 * argument falls: order `size` in the spacing, continuous at the points, no derivative needed. Meant for the accepted
 * steps of an integrator, whose slopes are useless where the system is stiff.
 *
 * @param xs increasing abscissae
 * @param ys one array of ordinates per function
 * @param size points used, at least 2; fewer where the grid has fewer
 * @throws {RangeError} if xs is not increasing or has fewer than two points
 * @see Berrut & Trefethen 2004, SIAM Rev. 46, 501, sec. 3 (barycentric form)
 */
export function localPolynomials(
  xs: ArrayLike<number>,
  ys: readonly ArrayLike<number>[],
  size = 8,
): readonly LocalPolynomial[] {
  const x = Float64Array.from(xs);
  const n = x.length;
  if (n < 2) throw new RangeError(`interpolation needs at least two points, got ${n}`);
  for (let i = 1; i < n; i++)
    if (!(x[i] > x[i - 1])) throw new RangeError(`abscissae must increase, but ${x[i]} follows ${x[i - 1]}`);
  const grid = stencils(x, Math.min(size, n));
  return ys.map((values) => {
    const y = Float64Array.from(values);
    if (y.length !== n) throw new RangeError(`${n} abscissae but ${y.length} ordinates`);
    return {
      x,
      y,
      value(v, interval) {
        const start = stencilStart(interval ?? intervalOf(x, v), n, grid.size);
        let numerator = 0;
        let denominator = 0;
        for (let i = 0; i < grid.size; i++) {
          const d = v - x[start + i];
          if (d === 0) return y[start + i];
          const w = grid.weights[start * grid.size + i] / d;
          numerator += w * y[start + i];
          denominator += w;
        }
        return numerator / denominator;
      },
    };
  });
}
