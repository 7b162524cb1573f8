/** Local polynomial interpolation: on each interval the polynomial through the nearest points of a non-uniform grid. */
import { intervalOf } from "./interpolate.ts";

export interface LocalPolynomial {
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** Value at v; `interval` (x[i] <= v <= x[i+1]) saves the search where the caller knows it. */
  value(v: number, interval?: number): number;
}

/** For each interval the points of its stencil and their barycentric weights, shared by all functions on the grid. */
interface Stencils {
  /** Points of interval i: `points[start[i]] ... points[start[i + 1] - 1]`. */
  readonly start: Int32Array;
  readonly points: Int32Array;
  readonly weights: Float64Array;
}

/** Points of a stencil are at least this share of the interval apart. */
const LEAST_DISTANCE = 0.4;

/**
 * Points for the interval (x[interval], x[interval + 1]): its ends, then alternately the next one outwards on either
 * side, passing over points that crowd (polynomials through them would amplify the noise of the ordinates).
 */
function stencil(x: Float64Array, interval: number, size: number): number[] {
  const least = LEAST_DISTANCE * (x[interval + 1] - x[interval]);
  const left = [interval];
  const right = [interval + 1];
  const nextLeft = () => {
    let k = left[0] - 1;
    while (k >= 0 && x[left[0]] - x[k] < least) k--;
    return k;
  };
  const nextRight = () => {
    const last = right[right.length - 1];
    let k = last + 1;
    while (k < x.length && x[k] - x[last] < least) k++;
    return k;
  };
  while (left.length + right.length < size) {
    const l = nextLeft();
    const r = nextRight();
    if (l < 0 && r >= x.length) break;
    if (r >= x.length || (l >= 0 && left.length <= right.length)) left.unshift(l);
    else right.push(r);
  }
  return [...left, ...right];
}

function stencils(x: Float64Array, size: number): Stencils {
  const start = new Int32Array(x.length);
  const points: number[] = [];
  const weights: number[] = [];
  for (let interval = 0; interval < x.length - 1; interval++) {
    const chosen = stencil(x, interval, size);
    // Distances in units of the interval: products of eight of them stay within range.
    const unit = 1 / (x[interval + 1] - x[interval]);
    for (const i of chosen) {
      let product = 1;
      for (const j of chosen) if (j !== i) product *= (x[i] - x[j]) * unit;
      points.push(i);
      weights.push(1 / product);
    }
    start[interval + 1] = points.length;
  }
  return { start, points: Int32Array.from(points), weights: Float64Array.from(weights) };
}

/**
 * Interpolants of several functions on one grid, each through `size` points around the interval in which the argument
 * falls: order `size` in the spacing, continuous at the points, no derivative needed. Meant for the accepted steps of an
 * integrator: their slopes are useless where the system is stiff, and their spacing may jump.
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
  const { start, points, weights } = stencils(x, size);
  return ys.map((values) => {
    const y = Float64Array.from(values);
    if (y.length !== n) throw new RangeError(`${n} abscissae but ${y.length} ordinates`);
    return {
      x,
      y,
      value(v, interval) {
        const i = interval ?? intervalOf(x, v);
        let numerator = 0;
        let denominator = 0;
        for (let k = start[i]; k < start[i + 1]; k++) {
          const point = points[k];
          const d = v - x[point];
          if (d === 0) return y[point];
          const w = weights[k] / d;
          numerator += w * y[point];
          denominator += w;
        }
        return numerator / denominator;
      },
    };
  });
}
