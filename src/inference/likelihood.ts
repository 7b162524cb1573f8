/** Likelihood of measured abundances: Gaussian, with the theory covariance of the point at which it is taken. */
import { CalculationError } from "../numerics/check.ts";
import type { Observation } from "./observations.ts";
import type { Theory } from "./theory.ts";

/** Value of the likelihood at one point. */
export interface Fit {
  /** r^T (C_theory + diag sigma^2)^-1 r, r the predicted less the observed abundances. */
  readonly chi2: number;
  /** ln of the Gaussian likelihood up to a constant: -(chi2 + ln det C)/2; the theory errors vary from point to point. */
  readonly lnLikelihood: number;
}

/**
 * Fit of predicted to observed abundances. An upper limit counts only where the prediction is above it.
 * @param observed   each with the index of its abundance in the prediction
 * @param values     predicted abundances
 * @param covariance of the theory, row-major over all predicted abundances
 * @throws {CalculationError} if the covariance is not positive definite
 */
export function gaussianFit(
  observed: readonly { readonly index: number; readonly observation: Observation }[],
  values: ArrayLike<number>,
  covariance: ArrayLike<number>,
): Fit {
  const n = observed.length;
  const M = values.length;
  // Cholesky factor L of the total covariance, and L^-1 r, in one pass.
  const L = new Float64Array(n * n);
  const z = new Float64Array(n);
  let chi2 = 0;
  let lnDet = 0;
  for (let i = 0; i < n; i++) {
    const { index, observation } = observed[i];
    let residual = values[index] - observation.value;
    if (observation.kind === "upper-limit") residual = Math.max(0, residual);
    for (let j = 0; j <= i; j++) {
      let sum = covariance[index * M + observed[j].index] + (i === j ? observation.sigma ** 2 : 0);
      for (let k = 0; k < j; k++) sum -= L[i * n + k] * L[j * n + k];
      if (i !== j) {
        L[i * n + j] = sum / L[j * n + j];
        residual -= L[i * n + j] * z[j];
        continue;
      }
      if (!(sum > 0)) throw new CalculationError("covariance", "covariance of abundances is not positive definite");
      L[i * n + i] = Math.sqrt(sum);
      lnDet += Math.log(sum);
    }
    z[i] = residual / L[i * n + i];
    chi2 += z[i] ** 2;
  }
  return { chi2, lnLikelihood: -(chi2 + lnDet) / 2 };
}

/** Observations with the index of their abundance in a theory. @throws {RangeError} for one it does not predict */
export function indexed(theory: Pick<Theory, "abundances">, observations: readonly Observation[]) {
  return observations.map((observation) => {
    const index = theory.abundances.indexOf(observation.abundance);
    if (index < 0) throw new RangeError(`${observation.abundance}: not among ${theory.abundances.join(", ")}`);
    return { index, observation };
  });
}

/** A function of the free parameters: the likelihood of these observations. Keeps its work arrays between calls. */
export function likelihoodOf(theory: Theory, observations: readonly Observation[]): (point: ArrayLike<number>) => Fit {
  const observed = indexed(theory, observations);
  const M = theory.abundances.length;
  const values = new Float64Array(M);
  const covariance = new Float64Array(M * M);
  return (point) => {
    theory.predict(point, values, covariance);
    return gaussianFit(observed, values, covariance);
  };
}
