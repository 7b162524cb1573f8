// Declaration of the part of odex 2.0.4 that we use: the package's own .ts does not pass a strict compiler.
export type Derivative = (x: number, y: number[]) => number[];
export type OutputFunction = (
  step: number,
  xOld: number,
  x: number,
  y: number[],
  dense: (component: number, x: number) => number,
) => unknown;
export enum Outcome {
  Converged = 0,
  MaxStepsExceeded = 1,
  EarlyReturn = 2,
}
export class Solver {
  constructor(n: number);
  maxSteps: number;
  initialStepSize: number;
  maxStepSize: number;
  denseOutput: boolean;
  relativeTolerance: number | number[];
  absoluteTolerance: number | number[];
  solve(
    f: Derivative,
    x0: number,
    y0: number[],
    xEnd: number,
    out?: OutputFunction,
  ): { y: number[]; outcome: number; nStep: number; xEnd: number; nAccept: number; nReject: number; nEval: number };
}
