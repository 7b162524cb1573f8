/** Discrete adjoint of the written-out Rosenbrock step: gradients of final quantities with respect to every flux. */
import { RODAS4 } from "../numerics/rosenbrock-coefficients.ts";
import type { CompiledNetwork } from "./compile.ts";
import type { Elimination } from "./elimination.ts";

const { a, C, c: C_POINTS, d: D } = RODAS4;
const STAGES = 6;

/** One accepted step as recorded: state, stages, factors and the flux rows of the stages. */
export interface RecordedStep {
  readonly s: number;
  readonly h: number;
  readonly y: Float64Array;
  readonly u: readonly Float64Array[];
  readonly factors: Float64Array;
  /** Flux coefficients at the stages' points (six references, the last two the same) and their slope at the start. */
  readonly rows: readonly Float64Array[];
  readonly slope: Float64Array;
}

/** How a parameter enters the fluxes: d ln c_f/d parameter at s, and the slope of that in s, written for every flux. */
export interface ReactionWeight {
  load(s: number, value: Float64Array, slope: Float64Array): void;
}

/** Solves (LU)^T x = b in place with the factors of the elimination (inverse diagonal). */
export function transposedSolver(plan: Elimination): (values: Float64Array, b: Float64Array) => void {
  const { forward, backward } = plan;
  const lower: number[] = [];
  for (let at = 0; at < forward.length; at += 2 + 2 * forward[at + 1]) lower.push(at);
  const upper: number[] = [];
  for (let at = 0; at < backward.length; at += 3 + 2 * backward[at + 2]) upper.push(at);
  lower.reverse();
  upper.reverse();
  return (values, b) => {
    for (const at of upper) {
      const x = b[backward[at]] * values[backward[at + 1]];
      b[backward[at]] = x;
      const end = at + 3 + 2 * backward[at + 2];
      for (let e = at + 3; e < end; e += 2) b[backward[e + 1]] -= values[backward[e]] * x;
    }
    for (const at of lower) {
      const x = b[forward[at]];
      const end = at + 2 + 2 * forward[at + 1];
      for (let e = at + 2; e < end; e += 2) b[forward[e + 1]] -= values[forward[e]] * x;
    }
  };
}

/**
 * Propagates adjoints backward through recorded steps and accumulates gradients.
 *
 * With M = I/(h gamma) - J, stages M u_i = g_i and y1 = y + sum b_i u_i, the adjoint v_i = M^-T ubar_i carries
 * J(w_i)^T v_i to the stage argument, (C_ij/h) v_i to earlier stages, and the second derivative of the fluxes along u_i
 * to y, since M depends on y. The gradient with respect to ln c_f collects v_i . S_f times the flux at w_i, its slope
 * term and its derivative along u_i. Exact for the discrete solution: it agrees with differences of it to their noise.
 *
 * @param steps in the order taken
 * @param lambda lambda[x] = d quantity_x/dY at the end; overwritten by d quantity_x/dY at the start
 * @param weights each weight q turns into one parameter per reaction (both directions together)
 * @returns gradient[x][q * reactions + k] = d quantity_x/d parameter q of reaction k
 * @see Sandu 2011, in Automatic Differentiation (discrete adjoints of Rosenbrock methods); derived here stage by stage
 */
export function adjointGradients(
  network: CompiledNetwork,
  steps: readonly RecordedStep[],
  lambda: readonly Float64Array[],
  weights: readonly ReactionWeight[],
): Float64Array[] {
  const { n, structure, elimination, reactions } = network;
  const { particles, start, nuclide, change } = structure;
  const count = reactions.length;
  const solve = transposedSolver(elimination);
  const parameters = weights.length;
  const gradient = lambda.map(() => new Float64Array(parameters * count));
  const padded = (fill: number) => {
    const array = new Float64Array(n + 2);
    array[n] = fill;
    return array;
  };
  const Y = padded(1);
  const W = Array.from({ length: STAGES }, () => padded(1));
  const U = Array.from({ length: STAGES }, () => padded(0));
  const bar = Array.from({ length: STAGES }, () => new Float64Array(n));
  const ybar = new Float64Array(n);
  const wbar = new Float64Array(n + 2);
  const other = new Float64Array(n + 2);
  const flow = new Float64Array(count);
  // term[i][q * count + k]: what v_i . S_k multiplies in the gradient of reaction k by parameter q.
  const term = Array.from({ length: STAGES }, () => new Float64Array(parameters * count));
  const fluxes = 2 * count;
  const [atStage, atStart, drift, late, early, slopes] = Array.from({ length: 6 }, () => new Float64Array(fluxes));
  for (let at = steps.length - 1; at >= 0; at--) {
    const step = steps[at];
    const { h, rows, slope, factors } = step;
    Y.set(step.y);
    for (let i = 0; i < STAGES; i++) U[i].set(step.u[i]);
    for (let i = 0; i < STAGES; i++) {
      const w = W[i];
      w.set(step.y);
      const coefficients = i < a.length ? a[i] : a[a.length - 1];
      for (let j = 0; j < coefficients.length; j++) for (let k = 0; k < n; k++) w[k] += coefficients[j] * U[j][k];
      if (i === 5) for (let k = 0; k < n; k++) w[k] += U[4][k];
    }
    // The three parts of every flux at every stage, then their weighted sums for each parameter and reaction.
    for (let i = 0; i < STAGES; i++) {
      const c = rows[i];
      const c0 = rows[0];
      const hd = h * D[i];
      const w = W[i];
      const u = U[i];
      for (let f = 0, p = 0; f < fluxes; f++, p += 3) {
        const p0 = particles[p];
        const p1 = particles[p + 1];
        const p2 = particles[p + 2];
        const sign = f % 2 === 0 ? 1 : -1;
        const product = sign * Y[p0] * Y[p1] * Y[p2];
        const along = u[p0] * Y[p1] * Y[p2] + Y[p0] * u[p1] * Y[p2] + Y[p0] * Y[p1] * u[p2];
        atStage[f] = sign * c[f] * w[p0] * w[p1] * w[p2];
        atStart[f] = hd * slope[f] * product + sign * c0[f] * along;
        drift[f] = hd * c0[f] * product;
      }
      const point = step.s + (i < 4 ? C_POINTS[i] : 1) * h;
      const terms = term[i];
      for (let q = 0; q < parameters; q++) {
        weights[q].load(point, late, slopes);
        weights[q].load(step.s, early, slopes);
        for (let f = 0; f < fluxes; f++) {
          const value = atStage[f] * late[f] + atStart[f] * early[f] + drift[f] * slopes[f];
          const e = q * count + (f >> 1);
          if (f % 2 === 0) terms[e] = value;
          else terms[e] += value;
        }
      }
    }
    for (let x = 0; x < lambda.length; x++) {
      const l = lambda[x];
      ybar.set(l);
      const last = a[a.length - 1];
      for (let i = 0; i < STAGES; i++) {
        const b = i < last.length ? last[i] : 1;
        for (let k = 0; k < n; k++) bar[i][k] = b * l[k];
      }
      for (let i = STAGES - 1; i >= 0; i--) {
        const v = bar[i];
        solve(factors, v);
        // v . S_k for every reaction.
        for (let k = 0; k < count; k++) {
          let sum = 0;
          for (let e = start[k]; e < start[k + 1]; e++) sum += change[e] * v[nuclide[e]];
          flow[k] = sum;
        }
        const g = gradient[x];
        const terms = term[i];
        for (let q = 0, e = 0; q < parameters; q++) for (let k = 0; k < count; k++, e++) g[e] += flow[k] * terms[e];
        // J(w_i)^T v to the stage argument; slope and second-derivative terms to y.
        wbar.fill(0);
        other.fill(0);
        const c = rows[i];
        const c0 = rows[0];
        const hd = h * D[i];
        const w = W[i];
        const u = U[i];
        for (let f = 0, p = 0; f < fluxes; f++, p += 3) {
          const s = f % 2 === 0 ? flow[f >> 1] : -flow[f >> 1];
          if (s === 0) continue;
          const p0 = particles[p];
          const p1 = particles[p + 1];
          const p2 = particles[p + 2];
          const direct = s * c[f];
          const sloping = s * hd * slope[f];
          const along = s * c0[f];
          const w0 = w[p0];
          const w1 = w[p1];
          const w2 = w[p2];
          const y0 = Y[p0];
          const y1 = Y[p1];
          const y2 = Y[p2];
          wbar[p0] += direct * w1 * w2;
          wbar[p1] += direct * w0 * w2;
          wbar[p2] += direct * w0 * w1;
          other[p0] += sloping * y1 * y2 + along * (u[p1] * y2 + y1 * u[p2]);
          other[p1] += sloping * y0 * y2 + along * (u[p0] * y2 + y0 * u[p2]);
          other[p2] += sloping * y0 * y1 + along * (u[p0] * y1 + y0 * u[p1]);
        }
        for (let k = 0; k < n; k++) ybar[k] += wbar[k] + other[k];
        const coefficients = i < a.length ? a[i] : last;
        for (let j = 0; j < coefficients.length; j++)
          for (let k = 0; k < n; k++) bar[j][k] += coefficients[j] * wbar[k];
        if (i === 5) for (let k = 0; k < n; k++) bar[4][k] += wbar[k];
        for (let j = 0; j < i; j++) {
          const cij = C[i][j] / h;
          for (let k = 0; k < n; k++) bar[j][k] += cij * v[k];
        }
      }
      l.set(ybar);
    }
  }
  return gradient;
}
