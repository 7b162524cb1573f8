/** Probability densities on grids: integrals, quantiles and levels of highest density. */

/** A density of one variable on rising points, normalised: its integral by {@link trapezoid} is 1. */
export interface Density {
  readonly x: Float64Array;
  readonly density: Float64Array;
}

/** Integral of the straight lines through (x, y). */
export function trapezoid(x: ArrayLike<number>, y: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 1; i < x.length; i++) sum += ((x[i] - x[i - 1]) * (y[i] + y[i - 1])) / 2;
  return sum;
}

/**
 * Normalises non-negative values to a density.
 * @throws {RangeError} if their integral is not positive and finite
 */
export function normalised(x: ArrayLike<number>, y: ArrayLike<number>): Density {
  const whole = trapezoid(x, y);
  if (!(whole > 0 && whole < Number.POSITIVE_INFINITY)) throw new RangeError(`density: integral ${whole}`);
  return { x: Float64Array.from(x), density: Float64Array.from(y, (v) => v / whole) };
}

/**
 * x below which the share q of a density lies; exact for the straight lines between its points.
 * @param q between 0 and 1
 */
export function densityQuantile({ x, density }: Density, q: number): number {
  let below = 0;
  for (let i = 1; i < x.length; i++) {
    const h = x[i] - x[i - 1];
    const [a, b] = [density[i - 1], density[i]];
    const part = (h * (a + b)) / 2;
    if (below + part >= q && part > 0) {
      // a u + (b - a) u^2/2 = wanted/h, with 0 <= u <= 1: the root written so that it holds for b = a as well.
      const wanted = (q - below) / h;
      if (wanted <= 0) return x[i - 1];
      const u = (2 * wanted) / (a + Math.sqrt(Math.max(0, a * a + 2 * (b - a) * wanted)));
      return x[i - 1] + h * Math.min(1, u);
    }
    below += part;
  }
  return x[x.length - 1];
}

/** Mean and standard deviation of a density. */
export function densityMoments({ x, density }: Density): { mean: number; sigma: number } {
  const mean = trapezoid(
    x,
    density.map((p, i) => p * x[i]),
  );
  const variance = trapezoid(
    x,
    density.map((p, i) => p * (x[i] - mean) ** 2),
  );
  return { mean, sigma: Math.sqrt(variance) };
}

/**
 * Level of a density on a grid of equal cells above which the share q of its sum lies (the region of highest density).
 * @param values not negative, in any order
 */
export function highestDensityLevel(values: ArrayLike<number>, q: number): number {
  const sorted = Float64Array.from(values).sort().reverse();
  const whole = sorted.reduce((sum, v) => sum + v, 0);
  let sum = 0;
  for (const v of sorted) {
    sum += v;
    if (sum >= q * whole) return v;
  }
  return 0;
}
