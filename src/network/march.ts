/** One step of a fourth-order Rosenbrock method on a network whose flux coefficients are given as rows. */
import { RODAS4 } from "../numerics/rosenbrock-coefficients.ts";
import type { NetworkKernels } from "./generate.ts";

const { gamma: GAMMA, a, C, c, d } = RODAS4;
const [, [A21], [A31, A32], [A41, A42, A43], [A51, A52, A53, A54]] = a;
const [, [C21], [C31, C32], [C41, C42, C43], [C51, C52, C53, C54], [C61, C62, C63, C64, C65]] = C;
const [D1, D2, D3, D4] = d;

/** Where, as a share of the step, the stages need coefficients: start, three inner points, end. */
export const STAGE_POINTS = [c[0], c[1], c[2], c[3], 1] as const;

/** Rows of flux coefficients of one step: at the stage points, and their derivative in s at the start. */
export interface StepRows {
  readonly start: Float64Array;
  readonly slope: Float64Array;
  readonly second: Float64Array;
  readonly third: Float64Array;
  readonly fourth: Float64Array;
  readonly end: Float64Array;
}

/** Working space and the step itself; one instance a network, not shared between concurrent runs. */
export interface March {
  /** Abundances after the last step. */
  readonly next: Float64Array;
  /** Stage increments u_1 ... u_6 and the factored matrix of the last step, for its adjoint. */
  readonly stages: readonly Float64Array[];
  readonly factors: Float64Array;
  /**
   * Tries one step of length h from y; the result is in `next`.
   * @returns the largest of |error_i|/(atol_i + rtol max(|y_i|, |next_i|)); Infinity if a pivot fails or a value is not
   *   finite
   */
  step(y: Float64Array, h: number, rows: StepRows, rtol: number, atol: Float64Array): number;
}

/**
 * Rodas4 (Hairer & Wanner 1996, sec. IV.7) with the stages written out; the same arithmetic as the general stepper.
 * @param n nuclides
 * @param slots size of the matrix store of the kernels
 */
export function createMarch(kernels: NetworkKernels, n: number, slots: number): March {
  const vector = () => new Float64Array(n);
  const [u1, u2, u3, u4, u5, u6, w, ft, next] = Array.from({ length: 9 }, vector);
  const values = new Float64Array(slots);
  const { derivatives, assemble, factor, solve } = kernels;
  return {
    next,
    stages: [u1, u2, u3, u4, u5, u6],
    factors: values,
    step(y, h, rows, rtol, atol) {
      const k = 1 / h;
      assemble(rows.start, y, k / GAMMA, values);
      if (!factor(values)) return Number.POSITIVE_INFINITY;
      derivatives(rows.slope, y, ft);
      derivatives(rows.start, y, u1);
      let hd = h * D1;
      for (let i = 0; i < n; i++) u1[i] += hd * ft[i];
      solve(values, u1);
      for (let i = 0; i < n; i++) w[i] = y[i] + A21 * u1[i];
      derivatives(rows.second, w, u2);
      hd = h * D2;
      let k1 = k * C21;
      for (let i = 0; i < n; i++) u2[i] += hd * ft[i] + k1 * u1[i];
      solve(values, u2);
      for (let i = 0; i < n; i++) w[i] = y[i] + A31 * u1[i] + A32 * u2[i];
      derivatives(rows.third, w, u3);
      hd = h * D3;
      k1 = k * C31;
      let k2 = k * C32;
      for (let i = 0; i < n; i++) u3[i] += hd * ft[i] + k1 * u1[i] + k2 * u2[i];
      solve(values, u3);
      for (let i = 0; i < n; i++) w[i] = y[i] + A41 * u1[i] + A42 * u2[i] + A43 * u3[i];
      derivatives(rows.fourth, w, u4);
      hd = h * D4;
      k1 = k * C41;
      k2 = k * C42;
      let k3 = k * C43;
      for (let i = 0; i < n; i++) u4[i] += hd * ft[i] + k1 * u1[i] + k2 * u2[i] + k3 * u3[i];
      solve(values, u4);
      for (let i = 0; i < n; i++) w[i] = y[i] + A51 * u1[i] + A52 * u2[i] + A53 * u3[i] + A54 * u4[i];
      derivatives(rows.end, w, u5);
      k1 = k * C51;
      k2 = k * C52;
      k3 = k * C53;
      let k4 = k * C54;
      for (let i = 0; i < n; i++) u5[i] += k1 * u1[i] + k2 * u2[i] + k3 * u3[i] + k4 * u4[i];
      solve(values, u5);
      for (let i = 0; i < n; i++) w[i] += u5[i];
      derivatives(rows.end, w, u6);
      k1 = k * C61;
      k2 = k * C62;
      k3 = k * C63;
      k4 = k * C64;
      const k5 = k * C65;
      for (let i = 0; i < n; i++) u6[i] += k1 * u1[i] + k2 * u2[i] + k3 * u3[i] + k4 * u4[i] + k5 * u5[i];
      solve(values, u6);
      let error = 0;
      for (let i = 0; i < n; i++) {
        const value = w[i] + u6[i];
        next[i] = value;
        const e = Math.abs(u6[i]) / (atol[i] + rtol * Math.max(Math.abs(y[i]), Math.abs(value)));
        // A NaN must not slip through a maximum.
        if (!(e <= error)) error = Number.isNaN(e) ? Number.POSITIVE_INFINITY : e;
      }
      return error;
    },
  };
}
