/** Stiff integration: an adaptive linearly implicit (Rosenbrock) stepper with pluggable linear algebra. */
import { CalculationError } from "./check.ts";
import { luFactor, luSolve } from "./linear.ts";
import { RODAS4, RODAS5P, type RosenbrockTableau } from "./rosenbrock-coefficients.ts";

export type Rhs = (t: number, y: Float64Array, dydt: Float64Array) => void;
/** Row-major n by n: dfdy[i*n + j] = d f_i/d y_j. */
export type Jacobian = (t: number, y: Float64Array, dfdy: Float64Array) => void;

/** Linear algebra of (shift I - J): supplied by systems that know their sparsity. */
export interface ShiftedSolver {
  /** Evaluates J at (t, y) and keeps it. */
  update(t: number, y: Float64Array): void;
  /** Factors shift I - J; false if a pivot fails. */
  factor(shift: number): boolean;
  /** Solves in place. */
  solve(b: Float64Array): void;
}

export interface StiffSystem {
  readonly n: number;
  readonly rhs: Rhs;
  /** Needed unless `solver` is given. */
  readonly jacobian?: Jacobian;
  /** Partial derivative df/dt at fixed y; by a forward difference if left out. */
  readonly timeDerivative?: Rhs;
  readonly solver?: ShiftedSolver;
}

export interface StiffOptions {
  readonly rtol: number;
  readonly atol: number | Float64Array;
  readonly method?: "rodas4" | "rodas5p";
  readonly firstStep?: number;
  readonly maxStep?: number;
  readonly maxSteps?: number;
}

export interface SolverCounts {
  steps: number;
  rejected: number;
  rhs: number;
  jacobians: number;
  factorisations: number;
}

const METHODS: Record<string, RosenbrockTableau> = { rodas4: RODAS4, rodas5p: RODAS5P };

/** Dense LU with pivoting on a user Jacobian: the default linear algebra. */
function denseSolver(n: number, jacobian: Jacobian): ShiftedSolver {
  const J = new Float64Array(n * n);
  const factors = new Float64Array(n * n);
  const pivots = new Int32Array(n);
  return {
    update: (t, y) => jacobian(t, y, J),
    factor(shift) {
      for (let i = 0; i < n * n; i++) factors[i] = -J[i];
      for (let i = 0; i < n; i++) factors[i * n + i] += shift;
      return luFactor(factors, n, pivots);
    },
    solve: (b) => luSolve(factors, n, pivots, b),
  };
}

/**
 * One integration of y' = f(t, y), advanced step by step.
 * Error control: max over components of |u_s|/(atol_i + rtol max(|y_i|, |ynew_i|)) <= 1, PI step controller.
 */
export class StiffStepper {
  t: number;
  readonly y: Float64Array;
  /** Start and end of the last accepted step and the values there, for {@link interpolate}. */
  tOld: number;
  readonly counts: SolverCounts = { steps: 0, rejected: 0, rhs: 0, jacobians: 0, factorisations: 0 };
  private readonly yOld: Float64Array;
  private readonly system: StiffSystem;
  private readonly tableau: RosenbrockTableau;
  private readonly solver: ShiftedSolver;
  private readonly atol: Float64Array;
  private readonly rtol: number;
  private readonly maxSteps: number;
  private readonly maxStep: number;
  private h: number;
  private readonly tEnd: number;
  private readonly direction: number;
  private lastError = 1e-2;
  private afterReject = false;
  private readonly u: Float64Array[];
  private readonly w: Float64Array;
  private readonly f0: Float64Array;
  private readonly ft: Float64Array;
  private readonly f1: Float64Array;
  private readonly A: Float64Array[];
  private readonly C: Float64Array[];
  private endSlope = false;

  constructor(system: StiffSystem, t0: number, y0: ArrayLike<number>, tEnd: number, options: StiffOptions) {
    const { n } = system;
    this.system = system;
    this.tableau = METHODS[options.method ?? "rodas4"];
    if (!system.solver && !system.jacobian) throw new RangeError("stiff integration: needs a jacobian or a solver");
    this.solver = system.solver ?? denseSolver(n, system.jacobian as Jacobian);
    this.t = t0;
    this.tOld = t0;
    this.tEnd = tEnd;
    this.direction = tEnd >= t0 ? 1 : -1;
    this.y = Float64Array.from(y0);
    this.yOld = Float64Array.from(y0);
    this.rtol = options.rtol;
    this.atol = typeof options.atol === "number" ? new Float64Array(n).fill(options.atol) : options.atol;
    this.maxSteps = options.maxSteps ?? 100000;
    this.maxStep = options.maxStep ?? Math.abs(tEnd - t0);
    this.h = this.direction * Math.min(options.firstStep ?? Math.abs(tEnd - t0) * 1e-4, this.maxStep);
    this.u = Array.from({ length: this.tableau.stages }, () => new Float64Array(n));
    this.w = new Float64Array(n);
    this.f0 = new Float64Array(n);
    this.ft = new Float64Array(n);
    this.f1 = new Float64Array(n);
    this.A = this.tableau.a.map((row) => Float64Array.from(row));
    this.C = this.tableau.C.map((row) => Float64Array.from(row));
  }

  /** True once tEnd has been reached. */
  get done(): boolean {
    return this.direction * (this.tEnd - this.t) <= 0;
  }

  /**
   * Advances by one accepted step, never past `limit` (default tEnd).
   * @throws {CalculationError} with t and the reason if the step underflows, a pivot fails or maxSteps is reached
   * @throws {RangeError} if the limit is not ahead
   */
  step(limit: number = this.tEnd): void {
    const { system, solver, tableau, u, w, f0, ft, f1, counts, y, yOld, atol, rtol } = this;
    const n = system.n;
    const t = this.t;
    if (!(this.direction * (limit - t) > 0))
      throw new RangeError(`stiff integration: limit ${limit} is not ahead of ${t} on the way to ${this.tEnd}`);
    if (counts.steps >= this.maxSteps)
      throw new CalculationError(
        "steps",
        `stiff integration: ${this.maxSteps} steps without reaching ${this.tEnd}, at ${t}`,
      );
    system.rhs(t, y, f0);
    counts.rhs++;
    if (system.timeDerivative) system.timeDerivative(t, y, ft);
    else {
      const dt = this.direction * Math.max(1e-8 * Math.abs(t), 1e-7 * Math.abs(this.h), 1e-300);
      system.rhs(t + dt, y, ft);
      counts.rhs++;
      for (let i = 0; i < n; i++) ft[i] = (ft[i] - f0[i]) / dt;
    }
    solver.update(t, y);
    counts.jacobians++;
    const stages = tableau.stages;
    for (;;) {
      let h = this.h;
      const room = limit - t;
      // End exactly on the limit, without a sliver of a step before it.
      let clipped = false;
      if (Math.abs(h) >= Math.abs(room) * (1 - 1e-10)) {
        h = room;
        clipped = true;
      } else if (Math.abs(h) > 0.5 * Math.abs(room) && Math.abs(h) < Math.abs(room)) h = room / 2;
      if (!(Math.abs(h) > 4e-16 * Math.abs(t) && Math.abs(h) > 0))
        throw new CalculationError("step", `stiff integration: step ${h} underflows at ${t}`);
      let error = Number.POSITIVE_INFINITY;
      counts.factorisations++;
      if (solver.factor(1 / (h * tableau.gamma))) {
        const overH = 1 / h;
        for (let i = 0; i < stages; i++) {
          const ui = u[i];
          if (i === 0) for (let k = 0; k < n; k++) ui[k] = f0[k];
          else {
            if (i < tableau.explicitStages) {
              const a = this.A[i];
              for (let k = 0; k < n; k++) w[k] = y[k];
              for (let j = 0; j < i; j++) {
                const aij = a[j];
                if (aij === 0) continue;
                const uj = u[j];
                for (let k = 0; k < n; k++) w[k] += aij * uj[k];
              }
            } else {
              const previous = u[i - 1];
              for (let k = 0; k < n; k++) w[k] += previous[k];
            }
            system.rhs(t + tableau.c[i] * h, w, ui);
            counts.rhs++;
          }
          const hd = h * tableau.d[i];
          if (hd !== 0) for (let k = 0; k < n; k++) ui[k] += hd * ft[k];
          const c = this.C[i];
          for (let j = 0; j < i; j++) {
            const cij = c[j] * overH;
            const uj = u[j];
            for (let k = 0; k < n; k++) ui[k] += cij * uj[k];
          }
          solver.solve(ui);
        }
        const last = u[stages - 1];
        error = 0;
        for (let k = 0; k < n; k++) {
          w[k] += last[k];
          const scale = atol[k] + rtol * Math.max(Math.abs(y[k]), Math.abs(w[k]));
          const e = Math.abs(last[k]) / scale;
          // A NaN must not slip through a maximum.
          if (!(e <= error)) error = e;
          if (Number.isNaN(e)) {
            error = Number.POSITIVE_INFINITY;
            break;
          }
        }
      }
      const order = tableau.embeddedOrder + 1;
      if (error <= 1) {
        const e = Math.max(error, 1e-8);
        // PI controller, Gustafsson 1991 (Hairer & Wanner 1996, sec. IV.2): exponents 0.7/k and 0.4/k.
        let factor = 0.9 * e ** (-0.7 / order) * this.lastError ** (0.4 / order);
        factor = Math.min(this.afterReject ? 1 : 6, Math.max(0.2, factor));
        this.lastError = e;
        this.afterReject = false;
        this.tOld = t;
        yOld.set(y);
        y.set(w);
        f1.set(f0);
        this.endSlope = false;
        this.t = clipped ? limit : t + h;
        counts.steps++;
        const proposal = h * factor;
        // A step cut short by an output point must not shrink the next one.
        this.h = clipped && Math.abs(proposal) < Math.abs(this.h) && factor >= 1 ? this.h : proposal;
        if (Math.abs(this.h) > this.maxStep) this.h = this.direction * this.maxStep;
        return;
      }
      counts.rejected++;
      this.afterReject = true;
      if (counts.rejected > this.maxSteps)
        throw new CalculationError("steps", `stiff integration: ${counts.rejected} rejected steps, at ${t}`);
      this.h = h * (Number.isFinite(error) ? Math.max(0.1, 0.9 * error ** (-1 / order)) : 0.1);
    }
  }

  /**
   * Solution inside the last accepted step by the cubic Hermite interpolant (third order), written to `out`.
   * @param t between tOld and t
   */
  interpolate(t: number, out: Float64Array): void {
    const { system, yOld, y, f1, ft } = this;
    if (!this.endSlope) {
      system.rhs(this.t, y, ft);
      this.counts.rhs++;
      this.endSlope = true;
    }
    const h = this.t - this.tOld;
    const u = h === 0 ? 1 : (t - this.tOld) / h;
    for (let k = 0; k < system.n; k++) {
      const d = y[k] - yOld[k];
      const a = h * f1[k] - d;
      const b = d - h * ft[k];
      out[k] = yOld[k] + u * d + u * (1 - u) * (a * (1 - u) + b * u);
    }
  }
}

/**
 * Integrates from t0 to tEnd, hitting every time of `tOut` exactly.
 * @param each called as each(i, t, y) for every output time; y is valid during the call only
 * @throws {CalculationError} as {@link StiffStepper.step}
 */
export function integrateStiff(
  system: StiffSystem,
  t0: number,
  y0: ArrayLike<number>,
  tEnd: number,
  options: StiffOptions,
  tOut: ArrayLike<number> = [],
  each: (i: number, t: number, y: Float64Array) => void = () => {},
): { y: Float64Array; counts: SolverCounts } {
  const stepper = new StiffStepper(system, t0, y0, tEnd, options);
  for (let i = 0; i < tOut.length; i++) {
    while (stepper.t !== tOut[i]) stepper.step(tOut[i]);
    each(i, tOut[i], stepper.y);
  }
  while (!stepper.done) stepper.step();
  return { y: stepper.y, counts: stepper.counts };
}
