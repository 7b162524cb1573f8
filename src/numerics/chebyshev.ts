/** Interpolation through Chebyshev points in one and more dimensions: spectral accuracy for smooth functions. */

/**
 * Chebyshev points of the second kind on [a, b], ends included, rising: (a+b)/2 - (b-a)/2 cos(pi k/(n-1)). Those of n
 * are among those of 2n - 1, to the last bit.
 * @param n number of points, 1 (the middle) or more
 * @see Trefethen 2013, Approximation Theory and Approximation Practice, ch. 2
 */
export function chebyshevPoints(n: number, a: number, b: number): Float64Array {
  if (!(n >= 1 && Number.isInteger(n))) throw new RangeError(`Chebyshev points: ${n} points`);
  if (n === 1) return Float64Array.of((a + b) / 2);
  const points = Float64Array.from(
    { length: n },
    (_, k) => (a + b) / 2 - ((b - a) / 2) * Math.cos((Math.PI * k) / (n - 1)),
  );
  points[0] = a;
  points[n - 1] = b;
  return points;
}

/**
 * Values at x of the Lagrange polynomials of Chebyshev points: f(x) = sum_k w_k f(x_k) for polynomials of degree n - 1.
 * @param points from {@link chebyshevPoints}
 * @see Berrut & Trefethen 2004, SIAM Review 46, 501, eq. (4.2) and (5.4)
 */
export function lagrangeWeights(
  points: ArrayLike<number>,
  x: number,
  out: Float64Array = new Float64Array(points.length),
): Float64Array {
  const n = points.length;
  let sum = 0;
  for (let k = 0; k < n; k++) {
    const distance = x - points[k];
    if (distance === 0) {
      out.fill(0);
      out[k] = 1;
      return out;
    }
    const end = k === 0 || k === n - 1 ? 0.5 : 1;
    out[k] = (k % 2 === 0 ? end : -end) / distance;
    sum += out[k];
  }
  for (let k = 0; k < n; k++) out[k] /= sum;
  return out;
}

/** Several functions of several variables, known on the product of Chebyshev points of each variable. */
export class ChebyshevInterpolant {
  readonly #axes: readonly Float64Array[];
  readonly #outputs: number;
  readonly #values: Float64Array;
  readonly #weights: readonly Float64Array[];
  readonly #work: readonly Float64Array[];

  /**
   * @param axes   Chebyshev points of each variable
   * @param values at every combination of points, the last variable running fastest, all outputs of a point together
   * @throws {RangeError} if the number of values does not fit
   */
  constructor(axes: readonly Float64Array[], outputs: number, values: Float64Array) {
    const points = axes.reduce((product, axis) => product * axis.length, 1);
    if (values.length !== points * outputs)
      throw new RangeError(`interpolant: ${values.length} values for ${points} points of ${outputs} outputs`);
    this.#axes = axes;
    this.#outputs = outputs;
    this.#values = values;
    this.#weights = axes.map((axis) => new Float64Array(axis.length));
    // What is left of the values after the first axis, the first two, ... has been summed over.
    let size = values.length;
    this.#work = axes.map((axis) => {
      size /= axis.length;
      return new Float64Array(size);
    });
  }

  /**
   * The functions at a point.
   * @param point one coordinate for each axis, inside the range of its points
   * @param out   receives the outputs
   * @throws {RangeError} outside the range: a polynomial goes astray there
   */
  evaluate(point: ArrayLike<number>, out: Float64Array): Float64Array {
    let from = this.#values;
    for (let d = 0; d < this.#axes.length; d++) {
      const axis = this.#axes[d];
      const x = point[d];
      if (!(axis.length === 1 || (x >= axis[0] && x <= axis[axis.length - 1])))
        throw new RangeError(
          `interpolant: ${x} of variable ${d + 1} is outside ${axis[0]} to ${axis[axis.length - 1]}, where it was built`,
        );
      const weights = lagrangeWeights(axis, x, this.#weights[d]);
      const target = this.#work[d];
      target.fill(0);
      for (let k = 0; k < axis.length; k++) {
        const w = weights[k];
        if (w === 0) continue;
        const offset = k * target.length;
        for (let i = 0; i < target.length; i++) target[i] += w * from[offset + i];
      }
      from = target;
    }
    for (let i = 0; i < this.#outputs; i++) out[i] = from[i];
    return out;
  }
}
