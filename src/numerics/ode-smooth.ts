/** Non-stiff integration: a thin wrapper of odex (Gragg-Bulirsch-Stoer extrapolation) that throws where odex returns a code. */
import { Solver } from "odex";
import { CalculationError } from "./check.ts";

export interface SmoothOptions {
  readonly rtol: number;
  readonly atol: number;
  readonly firstStep: number;
  readonly maxSteps: number;
}

export const SMOOTH_DEFAULTS: SmoothOptions = { rtol: 1e-10, atol: 1e-14, firstStep: 1e-3, maxSteps: 20000 };

export interface SmoothResult {
  readonly y: number[];
  readonly steps: number;
  readonly rejected: number;
  readonly rhs: number;
}

/**
 * Integrates y' = f(x, y) from x0 to x1 and reports y at each of `xOut` (ascending in the direction of integration,
 * within [x0, x1]) by the method's own dense output.
 * @param f returns dy/dx as a new or reused array
 * @param each called as each(i, x, y) for every i of xOut, y valid during the call only
 * @throws {CalculationError} if the step limit is reached or a value is not finite
 * @see Hairer, Norsett & Wanner 1993, Solving Ordinary Differential Equations I, sec. II.9
 */
export function integrateSmooth(
  f: (x: number, y: number[]) => number[],
  x0: number,
  y0: readonly number[],
  x1: number,
  xOut: ArrayLike<number> = [],
  each: (i: number, x: number, y: Float64Array) => void = () => {},
  options: Partial<SmoothOptions> = {},
): SmoothResult {
  const { rtol, atol, firstStep, maxSteps } = { ...SMOOTH_DEFAULTS, ...options };
  const n = y0.length;
  const solver = new Solver(n);
  solver.relativeTolerance = rtol;
  solver.absoluteTolerance = atol;
  solver.initialStepSize = firstStep;
  solver.maxSteps = maxSteps;
  solver.denseOutput = xOut.length > 0;
  const buffer = new Float64Array(n);
  const sign = x1 >= x0 ? 1 : -1;
  let next = 0;
  const guard = (x: number, y: number[]) => {
    const dydx = f(x, y);
    for (let i = 0; i < n; i++)
      if (!Number.isFinite(dydx[i]))
        throw new CalculationError("ode", `derivative of component ${i} is not finite at x = ${x}`);
    return dydx;
  };
  const result = solver.solve(guard, x0, [...y0], x1, (step, _xOld, x, y, dense) => {
    while (next < xOut.length && sign * (xOut[next] - x) <= 0) {
      if (step === 1 || xOut[next] === x) buffer.set(y);
      else for (let i = 0; i < n; i++) buffer[i] = dense(i, xOut[next]);
      each(next, xOut[next], buffer);
      next++;
    }
  });
  if (result.outcome !== 0)
    throw new CalculationError("ode", `smooth integration stopped after ${result.nStep} steps before x = ${x1}`);
  while (next < xOut.length && Math.abs(xOut[next] - x1) <= 1e-12 * Math.max(1, Math.abs(x1))) {
    buffer.set(result.y);
    each(next, xOut[next], buffer);
    next++;
  }
  return { y: result.y, steps: result.nStep, rejected: result.nReject, rhs: result.nEval };
}
