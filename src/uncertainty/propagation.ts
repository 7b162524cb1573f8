/** Linear propagation of independent standard sources (rates, tau_n, omega_b) to correlated errors of the results. */

/** Result of a linear propagation over S sources and X quantities. */
export interface LinearPropagation {
  /** response[s][x] = d ln x/dp_s, p_s the standardised source (one standard deviation = 1). */
  readonly response: readonly Float64Array[];
  /** Standard deviation of each quantity, in its own unit. */
  readonly sigma: Float64Array;
  /** Covariance of ln x, row-major X by X. */
  readonly covariance: Float64Array;
  /** Correlation matrix. */
  readonly correlation: readonly (readonly number[])[];
}

/**
 * Central differences at p = +-1 of each source: d ln x/dp = (ln x(+1) - ln x(-1))/2, sources independent.
 * A source that does not move a quantity contributes nothing; a quantity of value 0 has error 0.
 * @param central quantities at p = 0
 * @param sources number of sources
 * @param evaluate quantities with source s at p and all others at 0
 */
export function propagateLinearly(
  central: readonly number[],
  sources: number,
  evaluate: (source: number, p: number) => readonly number[],
): LinearPropagation {
  const rows: number[][] = [];
  for (let s = 0; s < sources; s++) {
    const up = evaluate(s, 1);
    const down = evaluate(s, -1);
    rows.push(central.map((_, x) => (up[x] > 0 && down[x] > 0 ? (Math.log(up[x]) - Math.log(down[x])) / 2 : 0)));
  }
  return propagateFrom(central, rows);
}

/**
 * The same from derivatives that are known.
 * @param rows rows[s][x] = d ln x/dp_s
 */
export function propagateFrom(central: readonly number[], rows: readonly (readonly number[])[]): LinearPropagation {
  const X = central.length;
  const covariance = new Float64Array(X * X);
  for (const row of rows)
    for (let i = 0; i < X; i++) for (let j = 0; j < X; j++) covariance[i * X + j] += row[i] * row[j];
  return { response: rows.map((row) => Float64Array.from(row)), ...summarise(central, covariance) };
}

/** Standard deviations and correlations from a covariance of ln x. */
export function summarise(
  central: readonly number[],
  covariance: Float64Array,
): { sigma: Float64Array; covariance: Float64Array; correlation: number[][] } {
  const X = central.length;
  const sigma = Float64Array.from(central, (x, i) => Math.abs(x) * Math.sqrt(covariance[i * X + i]));
  const correlation = central.map((_, i) =>
    central.map((__, j) => {
      if (i === j) return 1;
      const norm = Math.sqrt(covariance[i * X + i] * covariance[j * X + j]);
      return norm > 0 ? Math.max(-1, Math.min(1, covariance[i * X + j] / norm)) : 0;
    }),
  );
  return { sigma, covariance, correlation };
}
