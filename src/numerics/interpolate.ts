/** Interpolation in one dimension: cubic splines with not-a-knot ends, and look-up on uniform grids. */

/** A piecewise cubic through given points; outside the range it continues the end piece (callers check ranges). */
export interface Spline {
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** First derivative at each point. */
  readonly slope: Float64Array;
  value(x: number): number;
  derivative(x: number): number;
}

/**
 * Slopes of the cubic spline with not-a-knot ends through (x, y): C2 at interior points, third derivative continuous
 * at the second and the last but one point. Fourth order in the spacing. Two points: a line; three: a parabola.
 * @throws {RangeError} if x is not increasing or has fewer than two points
 * @see de Boor 1978, A Practical Guide to Splines, ch. IV
 */
export function notAKnotSlopes(x: ArrayLike<number>, y: ArrayLike<number>): Float64Array {
  const n = x.length;
  if (n < 2 || y.length !== n) throw new RangeError(`spline needs at least two points, got ${n}`);
  for (let i = 1; i < n; i++)
    if (!(x[i] > x[i - 1])) throw new RangeError(`spline abscissae must increase, but ${x[i]} follows ${x[i - 1]}`);
  const slope = new Float64Array(n);
  if (n === 2) {
    slope.fill((y[1] - y[0]) / (x[1] - x[0]));
    return slope;
  }
  const h = (i: number) => x[i + 1] - x[i];
  const d = (i: number) => (y[i + 1] - y[i]) / (x[i + 1] - x[i]);
  if (n === 3) {
    const curvature = (d(1) - d(0)) / (x[2] - x[0]);
    slope[0] = d(0) - curvature * h(0);
    slope[1] = d(0) + curvature * h(0);
    slope[2] = d(1) + curvature * h(1);
    return slope;
  }
  const lower = new Float64Array(n);
  const diagonal = new Float64Array(n);
  const upper = new Float64Array(n);
  const right = new Float64Array(n);
  diagonal[0] = h(1);
  upper[0] = h(0) + h(1);
  right[0] = ((h(0) + 2 * (h(0) + h(1))) * h(1) * d(0) + h(0) ** 2 * d(1)) / (h(0) + h(1));
  for (let i = 1; i < n - 1; i++) {
    lower[i] = h(i);
    diagonal[i] = 2 * (h(i - 1) + h(i));
    upper[i] = h(i - 1);
    right[i] = 3 * (h(i) * d(i - 1) + h(i - 1) * d(i));
  }
  const a = h(n - 3);
  const b = h(n - 2);
  lower[n - 1] = a + b;
  diagonal[n - 1] = a;
  right[n - 1] = (b ** 2 * d(n - 3) + (2 * (a + b) + b) * a * d(n - 2)) / (a + b);
  for (let i = 1; i < n; i++) {
    const factor = lower[i] / diagonal[i - 1];
    diagonal[i] -= factor * upper[i - 1];
    right[i] -= factor * right[i - 1];
  }
  slope[n - 1] = right[n - 1] / diagonal[n - 1];
  for (let i = n - 2; i >= 0; i--) slope[i] = (right[i] - upper[i] * slope[i + 1]) / diagonal[i];
  return slope;
}

/** Index i of the interval x[i] <= v < x[i+1], clamped to the table, by bisection. */
export function intervalOf(x: ArrayLike<number>, v: number): number {
  let lo = 0;
  let hi = x.length - 1;
  while (hi - lo > 1) {
    const middle = (lo + hi) >> 1;
    if (x[middle] <= v) lo = middle;
    else hi = middle;
  }
  return lo;
}

/** Cubic Hermite interpolant on one interval of width h at fraction u, from values and slopes at both ends. */
export function hermite(u: number, h: number, y0: number, s0: number, y1: number, s1: number): number {
  const d = y1 - y0;
  const a = h * s0 - d;
  const b = d - h * s1;
  return y0 + u * d + u * (1 - u) * (a * (1 - u) + b * u);
}

/** Derivative with respect to x of {@link hermite}. */
export function hermiteDerivative(u: number, h: number, y0: number, s0: number, y1: number, s1: number): number {
  const d = y1 - y0;
  const a = h * s0 - d;
  const b = d - h * s1;
  return (d + a * (1 - u) * (1 - 3 * u) + b * u * (2 - 3 * u)) / h;
}

/** Cubic spline with not-a-knot ends through (x, y). @throws {RangeError} as {@link notAKnotSlopes} */
export function notAKnotSpline(xs: ArrayLike<number>, ys: ArrayLike<number>): Spline {
  return hermiteSpline(xs, ys, notAKnotSlopes(xs, ys));
}

/** Piecewise cubic with given values and slopes. */
export function hermiteSpline(xs: ArrayLike<number>, ys: ArrayLike<number>, slopes: ArrayLike<number>): Spline {
  const x = Float64Array.from(xs);
  const y = Float64Array.from(ys);
  const slope = Float64Array.from(slopes);
  return {
    x,
    y,
    slope,
    value(v) {
      const i = intervalOf(x, v);
      const h = x[i + 1] - x[i];
      return hermite((v - x[i]) / h, h, y[i], slope[i], y[i + 1], slope[i + 1]);
    },
    derivative(v) {
      const i = intervalOf(x, v);
      const h = x[i + 1] - x[i];
      return hermiteDerivative((v - x[i]) / h, h, y[i], slope[i], y[i + 1], slope[i + 1]);
    },
  };
}
