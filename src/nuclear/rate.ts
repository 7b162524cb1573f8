/** Forward rate of a reaction at T9 with its factor uncertainty, from a table, a seven-parameter fit, or a decay constant. */
import { intervalOf, notAKnotSpline } from "../numerics/interpolate.ts";
import type { RateTable } from "./parse-rate-file.ts";

/** Fits are held at their value here above it: extrapolated they explode by up to 1e58 [GK]. */
export const FIT_TOP_T9 = 10;

/**
 * A rate as functions of temperature. Rates are N_A^(k-1)<sigma v> of k reactants [cm^(3(k-1)) mol^(1-k) s^-1], without
 * the factor 1/(1 + delta) of identical reactants; decays [s^-1]. A variation p means rate * f_u^p.
 */
export interface RateEvaluator {
  /** ln rate at T9 [GK] > 0; -Infinity below the first row of a table. */
  lnRate(T9: number): number;
  /** Its derivative d ln rate/d ln T9; 0 where the rate is held constant or zero. */
  dLnRatedLnT9(T9: number): number;
  /** ln f_u, the standard deviation of ln rate. */
  lnFactorUncertainty(T9: number): number;
}

/**
 * Turns a rate file into functions of T9.
 *
 * Table: cubic spline with not-a-knot ends of ln rate in ln T9 (exact at the rows, better than 3e-4 between those of the
 * 60-point grid above T9 = 0.01); zero below the first row, held constant above the last. ln f_u linear in ln T9, constant
 * outside. Fit: ln sum_k exp(a0 + a1/T9 + a2/T9^(1/3) + a3 T9^(1/3) + a4 T9 + a5 T9^(5/3) + a6 ln T9), held above
 * T9 = 10. Decay: constant.
 * @see Cyburt et al. 2010, ApJS 189, 240, eq. (1) for the fit
 */
export function evaluateRate(table: RateTable): RateEvaluator {
  if (table.kind === "table") return evaluateTable(table);
  const lnF = Math.log(table.factorUncertainty[0]);
  const lnFactorUncertainty = () => lnF;
  if (table.kind === "decay") {
    const lnDecay = Math.log(table.rate[0]);
    return { lnRate: () => lnDecay, dLnRatedLnT9: () => 0, lnFactorUncertainty };
  }
  return {
    lnRate: (T9) => fitSum(table.terms, Math.min(T9, FIT_TOP_T9)).value,
    dLnRatedLnT9: (T9) => (T9 >= FIT_TOP_T9 ? 0 : fitSum(table.terms, T9).slope),
    lnFactorUncertainty,
  };
}

function evaluateTable({ T9: grid, rate, factorUncertainty }: RateTable): RateEvaluator {
  const x = grid.map(Math.log);
  const spline = notAKnotSpline(x, rate.map(Math.log));
  const lnF = factorUncertainty.map(Math.log);
  const n = grid.length;
  return {
    lnRate(T9) {
      if (T9 < grid[0]) return Number.NEGATIVE_INFINITY;
      return T9 >= grid[n - 1] ? spline.y[n - 1] : spline.value(Math.log(T9));
    },
    dLnRatedLnT9(T9) {
      return T9 < grid[0] || T9 >= grid[n - 1] ? 0 : spline.derivative(Math.log(T9));
    },
    lnFactorUncertainty(T9) {
      if (T9 <= grid[0]) return lnF[0];
      if (T9 >= grid[n - 1]) return lnF[n - 1];
      const i = intervalOf(grid, T9);
      const u = (Math.log(T9) - x[i]) / (x[i + 1] - x[i]);
      return lnF[i] + u * (lnF[i + 1] - lnF[i]);
    },
  };
}

/** ln of the summed terms and its derivative in ln T9; the largest term is factored out, so nothing underflows. */
function fitSum(terms: readonly (readonly number[])[], T9: number): { value: number; slope: number } {
  const c = Math.cbrt(T9);
  const lnT9 = Math.log(T9);
  const exponents = terms.map(
    ([a0, a1, a2, a3, a4, a5, a6]) => a0 + a1 / T9 + a2 / c + a3 * c + a4 * T9 + a5 * T9 * c * c + a6 * lnT9,
  );
  const largest = Math.max(...exponents);
  let sum = 0;
  let weighted = 0;
  for (let k = 0; k < terms.length; k++) {
    const weight = Math.exp(exponents[k] - largest);
    const [, a1, a2, a3, a4, a5, a6] = terms[k];
    sum += weight;
    weighted += weight * (-a1 / T9 - a2 / (3 * c) + (a3 * c) / 3 + a4 * T9 + (5 / 3) * a5 * T9 * c * c + a6);
  }
  return { value: largest + Math.log(sum), slope: weighted / sum };
}

/**
 * The forward rate with a variation p of its uncertainty: rate * f_u^p.
 * @param T9 [GK], > 0
 * @param p standard normal variable of the lognormal; 0: the recommended value
 * @returns as {@link RateEvaluator}; 0 below the first row of a table
 */
export function rateAt(rate: RateEvaluator, T9: number, p = 0): number {
  return Math.exp(rate.lnRate(T9) + (p === 0 ? 0 : p * rate.lnFactorUncertainty(T9)));
}
